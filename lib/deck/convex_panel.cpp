#include "deck/convex_panel.hpp"

#include "deck/nearest.hpp"
#include "deck/panel_regions.hpp"
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
    CellMaker(const PanelDeck& deck, const Panel& panel, RingArea& area, CarrierAxes& axes,
              GatheredArea& way_leaves, Sharing& sharing)
        : deck_(deck), panel_(panel), area_(area), axes_(axes), way_leaves_(way_leaves), sharing_(sharing) {
        may_leave_ = std::any_of(panel.outer.begin(), panel.outer.end(),
                                 [](const PanelEdge& edge) { return edge.carrier == none; });
        const Convex ring = ring_of(panel);
        std::vector<std::uint32_t> near;
        deck.opening_finder.find(box_of(std::span<const Point>(ring)), near);
        for (const std::uint32_t opening : near) {
            openings_.push_back(&deck.openings[opening]);
        }
        may_leave_ = may_leave_ || !openings_.empty();
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
        if (may_leave_) {
            check_ways(piece, station_from, station_to, sharing_.axes[axes],
                       deck_.carriers[stretch.carrier].number);
        }
        sharing_.transfers.push({deck_.carriers[stretch.carrier].number, station_from + 0.0, station_to, 1});
        sharing_.transfers.end_group();
    }

    /// Judged at the middle of what lies between the levels of openings' corners: all that its ways cross is
    /// the same edges.
    void check_ways(const StripPiece& piece, double station_from, double station_to, const StripAxes& axes,
                    std::uint32_t carrier) {
        levels_.assign({piece.from, piece.to});
        for (const Ring& opening : openings_here_) {
            for (const Point& p : opening) {
                if (p.y > piece.from && p.y < piece.to) {
                    levels_.push_back(p.y);
                }
            }
        }
        std::sort(levels_.begin(), levels_.end());
        for (std::size_t i = 0; i + 1 < levels_.size(); ++i) {
            const StripPiece part = between_levels(piece, levels_[i], levels_[i + 1]);
            const double level = (part.from + part.to) / 2;
            const double t = piece.fraction(level);
            const Point middle = axes.to_plan({(part.low.at(0.5) + part.high.at(0.5)) / 2, level});
            const Point foot = axes.to_plan({0, (1 - t) * station_from + t * station_to});
            if (area_.length_outside(middle - deck_.origin, foot - deck_.origin) > deck_.tolerance.snap) {
                way_leaves_.add(area_of(part), middle, carrier);
            }
        }
    }

    /// On the carrier but for rounding: on it.
    void settle(double& along) const { along = std::abs(along) <= deck_.tolerance.noise ? 0 : along; }

    const PanelDeck& deck_;
    const Panel& panel_;
    RingArea& area_;
    CarrierAxes& axes_;
    GatheredArea& way_leaves_;
    Sharing& sharing_;
    bool may_leave_ = false;            ///< a way to a carrier may leave the deck
    std::vector<const Ring*> openings_; ///< that may reach into the panel
    std::vector<Ring> openings_here_;   ///< the same in a carrier's axes
    std::vector<double> levels_;
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
        panel.outer[first % n].from, panel.outer[(first + count) % n].from, first % n, count, false, 1};
    for (std::size_t k = 0; k < count; ++k) {
        side.carries = side.carries || panel.outer[(first + k) % n].carrier != none;
    }
    return side;
}

/// Where carriers fail along a side for more than `snap`.
std::optional<Point> gap_in(const Panel& panel, const PanelSide& side, double snap) {
    const std::size_t n = panel.outer.size();
    double length = 0;
    Point start;
    for (std::size_t k = 0; k < side.edge_count; ++k) {
        const PanelEdge& edge = panel.outer[(side.first_edge + k) % n];
        if (edge.carrier != none) {
            length = 0;
            continue;
        }
        start = length > 0 ? start : edge.from;
        length += distance(edge.from, panel.outer[(side.first_edge + k + 1) % n].from);
        if (length > snap) {
            return start;
        }
    }
    return std::nullopt;
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
    std::vector<Box> boxes;
    for (const Ring& opening : of_deck.openings) {
        openings.emplace_back();
        for (const Point& p : opening) {
            openings.back().push_back(p - origin);
        }
        boxes.push_back(box_of(std::span<const Point>(openings.back())));
    }
    opening_finder = BoxFinder(std::move(boxes));
}

PanelShape shape_of(const Panel& panel, std::uint32_t index, double snap) {
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
        if (const PanelSide& side = shape.sides.back(); side.carries && !shape.gap) {
            shape.gap = gap_in(panel, side, snap);
        }
        done += count;
    }
    for (std::size_t i = 0; i < shape.sides.size(); ++i) {
        const PanelSide& side = shape.sides[i];
        const PanelSide& next = shape.sides[(i + 1) % shape.sides.size()];
        if (cross(side.b - side.a, next.b - next.a) > 0) {
            continue;
        }
        // On a way along a carrier that ends inside, the panel lies on both sides.
        const bool on_way = panel.outer[(side.first_edge + side.edge_count - 1) % n].beyond == index &&
                            panel.outer[next.first_edge].beyond == index;
        (on_way ? shape.inside : shape.reflex) = side.b;
    }
    if (!panel.holes.empty()) {
        shape.inside = panel.holes.front().front().from;
    }
    return shape;
}

void share_convex_panel(const PanelDeck& deck, const Panel& panel, std::span<const PanelSide> sides,
                        RingArea& area, CarrierAxes& axes, GatheredArea& way_leaves, Sharing& sharing) {
    CellMaker cells(deck, panel, area, axes, way_leaves, sharing);
    for (SideRegion& region : divide_among_sides(ring_of(panel), sides, deck.tolerance.noise)) {
        cells.add(sides[region.side], std::move(region.where));
    }
}

RUNNEL_NAMESPACE_END
