#include "deck/convex_panel.hpp"

#include "geometry/box_tree.hpp"
#include "geometry/strip_piece.hpp"
#include "geometry/strip_sweep.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

StripAxes axes_along(const LineCarrier& carrier) {
    const double length = distance(carrier.from, carrier.to);
    const Point d = (1 / length) * (carrier.to - carrier.from);
    return {carrier.from, d.y, 0.0 - d.x}; // no negative zero
}

Convex ring_of(const Panel& panel) {
    Convex ring;
    ring.reserve(panel.outer.size());
    for (const PanelEdge& edge : panel.outer) {
        ring.push_back(edge.from);
    }
    return ring;
}

/// Distance from a side over its weight, inside positive.
class WeightedDistance {
public:
    explicit WeightedDistance(const PanelSide& side)
        : a_(side.a), along_((1 / (distance(side.a, side.b) * side.weight)) * (side.b - side.a)) {}
    [[nodiscard]] double at(Point p) const { return cross(along_, p - a_); }

private:
    Point a_, along_;
};

/// Cuts a polygon where `value` changes its sign, into what is below zero and above; both have the same
/// cutting points. Values within `noise` of zero count as zero.
template <class Value>
void cut_by(const Convex& polygon, const Value& value, double noise, Convex& below, Convex& above) {
    below.clear();
    above.clear();
    if (polygon.empty()) {
        return;
    }
    const auto at = [&](Point p) {
        const double v = value(p);
        return std::abs(v) <= noise ? 0.0 : v;
    };
    bool any_below = false;
    bool any_above = false;
    double here = at(polygon.front());
    for (std::size_t i = 0; i < polygon.size(); ++i) {
        const Point p = polygon[i];
        const Point q = polygon[(i + 1) % polygon.size()];
        const double there = at(q);
        any_below = any_below || here < 0;
        any_above = any_above || here > 0;
        if (here <= 0) {
            below.push_back(p);
        }
        if (here >= 0) {
            above.push_back(p);
        }
        if ((here < 0 && there > 0) || (here > 0 && there < 0)) {
            const Point on_line = between(p, q, here / (here - there));
            below.push_back(on_line);
            above.push_back(on_line);
        }
        here = there;
    }
    if (!any_above) {
        above.clear();
    } else if (!any_below) {
        below.clear();
    }
}

struct SideRegion {
    std::size_t side = 0;
    Convex where;
};

/// Each side's region by itself, cut free from all other sides.
std::vector<SideRegion> regions_one_by_one(const Convex& ring, std::span<const PanelSide> sides,
                                           double noise) {
    std::vector<SideRegion> regions;
    Convex below;
    Convex above;
    for (std::size_t i = 0; i < sides.size(); ++i) {
        if (!sides[i].carries) {
            continue;
        }
        const WeightedDistance own(sides[i]);
        Convex region = ring;
        for (std::size_t j = 0; j < sides.size() && !region.empty(); ++j) {
            if (j != i && sides[j].carries) {
                const WeightedDistance other(sides[j]);
                cut_by(
                    region, [&](Point p) { return own.at(p) - other.at(p); }, noise, below, above);
                region.swap(below);
            }
        }
        if (!region.empty()) {
            regions.push_back({i, std::move(region)});
        }
    }
    return regions;
}

/// The same in more pieces: each further side takes its part from those before it, so that the areas add up
/// whatever rounding does to the borders.
std::vector<SideRegion> regions_in_turn(const Convex& ring, std::span<const PanelSide> sides, double noise) {
    std::vector<SideRegion> regions;
    Convex below;
    Convex above;
    for (std::size_t j = 0; j < sides.size(); ++j) {
        if (!sides[j].carries) {
            continue;
        }
        if (regions.empty()) {
            regions.push_back({j, ring});
            continue;
        }
        const WeightedDistance taking(sides[j]);
        const std::size_t before = regions.size();
        for (std::size_t r = 0; r < before; ++r) {
            const WeightedDistance holding(sides[regions[r].side]);
            cut_by(
                regions[r].where, [&](Point p) { return holding.at(p) - taking.at(p); }, noise, below, above);
            regions[r].where.swap(below);
            if (!above.empty()) {
                regions.push_back({j, above});
            }
        }
        std::erase_if(regions, [](const SideRegion& region) { return region.where.empty(); });
    }
    return regions;
}

double area_of(std::span<const SideRegion> regions) {
    Sum area;
    for (const SideRegion& region : regions) {
        area.add(signed_area(region.where));
    }
    return area.value();
}

double perimeter_of(const Convex& ring) {
    double perimeter = 0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        perimeter += distance(ring[i], ring[(i + 1) % ring.size()]);
    }
    return perimeter;
}

std::vector<SideRegion> regions_of(const Convex& ring, std::span<const PanelSide> sides, double noise) {
    std::vector<SideRegion> regions = regions_one_by_one(ring, sides, noise);
    // Between sides that are nearly in line the border is ill-defined, and two regions may see it apart.
    if (std::abs(area_of(regions) - signed_area(ring)) > noise * perimeter_of(ring)) {
        return regions_in_turn(ring, sides, noise);
    }
    return regions;
}

/// Without corners that lie on the line through their neighbours: they would only add levels.
Convex without_straight_corners(const Convex& ring, double noise) {
    Convex clean;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point before = clean.empty() ? ring[ring.size() - 1] : clean.back();
        const Point after = ring[(i + 1) % ring.size()];
        if (distance(before, ring[i]) > noise && distance_to_segment(ring[i], before, after) > noise) {
            clean.push_back(ring[i]);
        }
    }
    return clean;
}

/// A carrier's part of a side: its edges and where it lies on the side.
struct SideStretch {
    std::uint32_t carrier = none;
    bool with_border = true; ///< the carrier runs as the border does: the panel lies on its left
    double from = 0, to = 0; ///< m from the side's a
};

std::vector<SideStretch> stretches_of(const Panel& panel, const PanelSide& side) {
    std::vector<SideStretch> stretches;
    for (std::size_t k = 0; k < side.edge_count; ++k) {
        const PanelEdge& edge = panel.outer[(side.first_edge + k) % panel.outer.size()];
        const PanelEdge& next = panel.outer[(side.first_edge + k + 1) % panel.outer.size()];
        if (edge.carrier == none) {
            continue;
        }
        const double from = station_of(edge.from, side.a, side.b);
        const double to = station_of(next.from, side.a, side.b);
        if (!stretches.empty() && stretches.back().carrier == edge.carrier) {
            stretches.back().to = to;
        } else {
            stretches.push_back({edge.carrier, edge.station_from < edge.station_to, from, to});
        }
    }
    return stretches;
}

/// Turns regions of sides into cells.
class CellMaker {
public:
    CellMaker(const PanelDeck& deck, const Panel& panel, CarrierAxes& axes, Sharing& sharing)
        : deck_(deck), panel_(panel), axes_(axes), sharing_(sharing) {
        const Convex ring = ring_of(panel);
        const Box box = box_of(std::span<const Point>(ring));
        for (const Ring& opening : deck.openings) {
            if (box_of(std::span<const Point>(opening)).meets(box)) {
                openings_.push_back(&opening);
            }
        }
    }

    /// Among the carriers along the side by the foot of each point; in a gap between two, to the nearer.
    void add(const PanelSide& side, Convex region) {
        const std::vector<SideStretch> stretches = stretches_of(panel_, side);
        const double length = distance(side.a, side.b);
        const Point along = (1 / length) * (side.b - side.a);
        Convex below;
        Convex above;
        for (std::size_t k = 0; k + 1 < stretches.size() && !region.empty(); ++k) {
            const double level = (stretches[k].to + stretches[k + 1].from) / 2;
            cut_by(
                region, [&](Point p) { return dot(along, p - side.a) - level; }, deck_.tolerance.noise, below,
                above);
            add(stretches[k], below);
            region.swap(above);
        }
        add(stretches.back(), region);
    }

private:
    void add(const SideStretch& stretch, const Convex& where) {
        const std::uint32_t axes_index = axes_.of(stretch.carrier);
        StripAxes axes = sharing_.axes[axes_index];
        axes.origin = axes.origin - deck_.origin;
        const Convex region = without_straight_corners(to_axes(axes, where), deck_.tolerance.noise);
        if (region.size() < 3) {
            return;
        }
        openings_here_.clear();
        for (const Ring* opening : openings_) {
            openings_here_.push_back(to_axes(axes, *opening));
        }
        const LineCarrier& carrier = deck_.carriers[stretch.carrier];
        const double length = distance(carrier.from, carrier.to);
        for (const Gap& gap : sweep_strips(region, openings_here_, {}, deck_.tolerance.noise).gaps) {
            const StripPiece piece{
                gap.from, gap.to, {gap.low_start, gap.low_end, 0}, {gap.high_start, gap.high_end, 0}};
            push_by_stations(piece, stretch, length, axes_index);
        }
    }

    static Ring to_axes(const StripAxes& axes, const Ring& ring) {
        Ring turned;
        turned.reserve(ring.size());
        for (const Point& p : ring) {
            turned.push_back(axes.to_strip(p));
        }
        return turned;
    }

    /// Parts beyond the carrier's ends, by more than the drawing may be off, go there as to a point.
    void push_by_stations(StripPiece piece, const SideStretch& stretch, double length, std::uint32_t axes) {
        const double snap = deck_.tolerance.snap;
        if (piece.from < -snap) {
            const double level = std::min(piece.to, 0.0);
            push(level < piece.to ? between_levels(piece, piece.from, level) : piece, stretch, 0, 0, axes);
            if (!(level < piece.to)) {
                return;
            }
            piece = between_levels(piece, level, piece.to);
        }
        if (piece.to > length + snap) {
            const double level = std::max(piece.from, length);
            if (level > piece.from) {
                const StripPiece before = between_levels(piece, piece.from, level);
                push(before, stretch, before.from, level, axes);
            }
            push(level > piece.from ? between_levels(piece, level, piece.to) : piece, stretch, length, length,
                 axes);
            return;
        }
        push(piece, stretch, std::clamp(piece.from, 0.0, length), std::clamp(piece.to, 0.0, length), axes);
    }

    void push(const StripPiece& piece, const SideStretch& stretch, double station_from, double station_to,
              std::uint32_t axes) {
        Cell cell;
        cell.deck = deck_.index;
        cell.axes = axes;
        cell.from = piece.from;
        cell.to = piece.to;
        cell.low = piece.low;
        cell.high = piece.high;
        if (station_from < station_to) {
            Border& border = stretch.with_border ? cell.high : cell.low;
            if (std::max(std::abs(border.start), std::abs(border.end)) <= 2 * deck_.tolerance.snap) {
                cell.carrier_side = stretch.with_border ? Cell::CarrierSide::high : Cell::CarrierSide::low;
                settle(border.start);
                settle(border.end);
            }
        }
        sharing_.cells.push_back(cell);
        sharing_.transfers.push({deck_.carriers[stretch.carrier].number, station_from + 0.0, station_to, 1});
        sharing_.transfers.end_group();
    }

    /// On the carrier but for rounding: on it.
    void settle(double& along) const { along = std::abs(along) <= deck_.tolerance.noise ? 0 : along; }

    const PanelDeck& deck_;
    const Panel& panel_;
    CarrierAxes& axes_;
    Sharing& sharing_;
    std::vector<const Ring*> openings_; ///< that may reach into the panel
    std::vector<Ring> openings_here_;   ///< the same in a carrier's axes
};

/// Whether all points of the border between two of its corners lie within `snap` of the straight line.
bool is_straight(const Panel& panel, std::size_t first, std::size_t count, double snap) {
    const std::size_t n = panel.outer.size();
    const Point a = panel.outer[first % n].from;
    const Point b = panel.outer[(first + count) % n].from;
    for (std::size_t k = 1; k < count; ++k) {
        if (distance_to_segment(panel.outer[(first + k) % n].from, a, b) > snap) {
            return false;
        }
    }
    return true;
}

PanelSide side_of(const Panel& panel, std::size_t first, std::size_t count) {
    const std::size_t n = panel.outer.size();
    PanelSide side{
        panel.outer[first % n].from, panel.outer[(first + count) % n].from, first % n, count, false, true, 1};
    for (std::size_t k = 0; k < count; ++k) {
        const bool carried = panel.outer[(first + k) % n].carrier != none;
        side.carries = side.carries || carried;
        side.carries_whole = side.carries_whole && carried;
    }
    return side;
}

/// The farthest corner from the first: surely a corner of the whole.
std::size_t sharp_corner(const Panel& panel) {
    std::size_t best = 0;
    for (std::size_t i = 1; i < panel.outer.size(); ++i) {
        if (distance(panel.outer[i].from, panel.outer.front().from) >
            distance(panel.outer[best].from, panel.outer.front().from)) {
            best = i;
        }
    }
    return best;
}

/// Of a panel that is but a line: the longest edge that carries, else the longest.
PanelSide side_of_sliver(const Panel& panel) {
    PanelSide best;
    double longest = -1;
    for (std::size_t i = 0; i < panel.outer.size(); ++i) {
        const PanelSide side = side_of(panel, i, 1);
        const double length = distance(side.a, side.b);
        if (std::pair(side.carries, length) > std::pair(best.carries, longest)) {
            best = side;
            longest = length;
        }
    }
    return best;
}

} // namespace

std::uint32_t CarrierAxes::of(std::uint32_t carrier) {
    if (index_[carrier] == none) {
        index_[carrier] = static_cast<std::uint32_t>(sharing_.axes.size());
        sharing_.axes.push_back(axes_along(carriers_[carrier]));
    }
    return index_[carrier];
}

PanelDeck::PanelDeck(const FramedDeck& of_deck, std::uint32_t deck_index,
                     std::span<const LineCarrier> line_carriers, Point panel_origin, Tolerance deck_tolerance)
    : deck(of_deck), index(deck_index), carriers(line_carriers), origin(panel_origin),
      tolerance(deck_tolerance) {
    for (const Ring& opening : of_deck.openings) {
        openings.emplace_back();
        for (const Point& p : opening) {
            openings.back().push_back(p - origin);
        }
    }
}

PanelShape shape_of(const Panel& panel, double snap) {
    PanelShape shape;
    if (panel.area <= snap * perimeter_of(ring_of(panel)) / 2) {
        shape.sides.push_back(side_of_sliver(panel));
        return shape;
    }
    const std::size_t n = panel.outer.size();
    const std::size_t start = sharp_corner(panel);
    for (std::size_t done = 0; done < n;) {
        std::size_t count = 1;
        while (done + count < n && is_straight(panel, start + done, count + 1, snap)) {
            ++count;
        }
        shape.sides.push_back(side_of(panel, start + done, count));
        done += count;
    }
    for (std::size_t i = 0; i < shape.sides.size(); ++i) {
        const PanelSide& side = shape.sides[i];
        const PanelSide& next = shape.sides[(i + 1) % shape.sides.size()];
        if (!(cross(side.b - side.a, next.b - next.a) > 0)) {
            shape.not_convex = side.b;
        }
    }
    if (!panel.holes.empty()) {
        shape.not_convex = panel.holes.front().front().from;
    }
    return shape;
}

void share_convex_panel(const PanelDeck& deck, const Panel& panel, std::span<const PanelSide> sides,
                        CarrierAxes& axes, Sharing& sharing) {
    CellMaker cells(deck, panel, axes, sharing);
    for (SideRegion& region : regions_of(ring_of(panel), sides, deck.tolerance.noise)) {
        cells.add(sides[region.side], std::move(region.where));
    }
}

double area_without_openings(const PanelDeck& deck, const Panel& panel) {
    Sum area;
    for (const Gap& gap : sweep_strips(ring_of(panel), deck.openings, {}, deck.tolerance.noise).gaps) {
        area.add((gap.to - gap.from) * (gap.high_start - gap.low_start + gap.high_end - gap.low_end) / 2);
    }
    for (const std::vector<PanelEdge>& hole : panel.holes) {
        Ring ring;
        for (const PanelEdge& edge : hole) {
            ring.push_back(edge.from);
        }
        area.add(signed_area(ring));
    }
    return area.value();
}

RUNNEL_NAMESPACE_END
