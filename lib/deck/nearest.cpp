#include "deck/nearest.hpp"

#include "deck/acting.hpp"
#include "deck/lost_loads.hpp"
#include "geometry/basic.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

RUNNEL_NAMESPACE_BEGIN

double NearestCells::area() const {
    Sum sum;
    for (const Cell& cell : cells) {
        sum.add(area_of(StripPiece{cell.from, cell.to, cell.low, cell.high}));
    }
    return sum.value();
}

std::vector<Ring> local_rings(const FramedDeck& deck) {
    const Point origin = deck.outline.front();
    std::vector<Ring> rings;
    rings.reserve(1 + deck.openings.size());
    const auto add = [&](const Ring& ring) {
        Ring& local = rings.emplace_back();
        local.reserve(ring.size());
        for (const Point& p : ring) {
            local.push_back(p - origin);
        }
    };
    add(deck.outline);
    for (const Ring& opening : deck.openings) {
        add(opening);
    }
    return rings;
}

std::vector<LineCarrier> carriers_in_touch(const FramedDeck& deck, std::span<const LineCarrier> near,
                                           double snap, RingArea& area) {
    const Point origin = deck.outline.front();
    std::vector<LineCarrier> carriers;
    for (const LineCarrier& carrier : near) {
        const RingArea::Shared shared = area.shared_with(carrier.from - origin, carrier.to - origin, snap);
        // An edge of a length of snap or two lies beside whatever ends there.
        if (shared.inside > snap || shared.along_edge > 2 * snap) {
            carriers.push_back(carrier);
        }
    }
    return carriers;
}

namespace {

/// The part of a carrier inside a window; none if it misses it.
bool add_line(const LineCarrier& carrier, const Box& window, NearestCarriers& carriers) {
    AxisLine line;
    line.a = carrier.from - carriers.origin;
    line.b = carrier.to - carriers.origin;
    const Point d = line.b - line.a;
    const double length = norm(d);
    double from = 0;
    double to = 1;
    const auto limit = [&](double start, double rise, double low, double high) {
        if (rise == 0) {
            to = start < low || start > high ? -1 : to;
            return;
        }
        const double t0 = (low - start) / rise;
        const double t1 = (high - start) / rise;
        from = std::max(from, std::min(t0, t1));
        to = std::min(to, std::max(t0, t1));
    };
    limit(line.a.x, d.x, window.low.x, window.high.x);
    limit(line.a.y, d.y, window.low.y, window.high.y);
    if (!(to > from) || !(length > 0)) {
        return false;
    }
    line.origin = line.a;
    line.direction = (1 / length) * d;
    line.from = from * length;
    line.to = to * length;
    line.b = to < 1 ? between(line.origin, line.b, to) : line.b;
    line.a = from > 0 ? line.origin + line.from * line.direction : line.a;
    carriers.carriers.push_back(carrier);
    carriers.lines.push_back(line);
    return true;
}

struct Selection {
    NearestCarriers carriers;
    std::vector<std::uint32_t> idle; ///< members that lie in a deck on columns
    Box deck_box;                    ///< local
    double reach = 0;                ///< no point of the deck is farther from a carrier
};

/// Of a deck or a part of it, so far without carriers.
Selection selection_for(const FramedDeck& deck, double snap) {
    Selection selected;
    selected.carriers.origin = deck.outline.front();
    Ring outline = deck.outline;
    for (Point& p : outline) {
        p = p - selected.carriers.origin;
    }
    selected.deck_box = box_of(outline);
    selected.reach = distance(selected.deck_box.low, selected.deck_box.high) + 2 * snap;
    return selected;
}

Selection select(const Plan& plan, const FramedLevel& level, const FramedDeck& deck,
                 std::span<const LineCarrier> near, const Sharing& sharing, RingArea& area) {
    const double snap = plan.settings.snap;
    Selection selected = selection_for(deck, snap);
    const Box window = selected.deck_box.grown(2 * selected.reach);
    for (const LineCarrier& carrier : carriers_in_touch(deck, near, snap, area)) {
        if (deck.span == SpanKind::columns && carrier.number < sharing.members) {
            selected.idle.push_back(carrier.number);
        } else {
            add_line(carrier, window, selected.carriers);
        }
    }
    if (deck.span == SpanKind::columns) {
        for (const std::uint32_t c : level.columns) {
            const Point at = plan.columns[c].at - selected.carriers.origin;
            if (box_of(at, at).meets(selected.deck_box.grown(snap)) &&
                (area.contains(at) || area.is_beside_edge(at, snap))) {
                selected.carriers.points.push_back(at);
                selected.carriers.point_number.push_back(sharing.number_of({CarrierKind::column, c}));
            }
        }
    }
    return selected;
}

/// All carriers given, however far they are from the part.
Selection select_all(const FramedDeck& part, std::span<const LineCarrier> carriers, double snap) {
    Selection selected = selection_for(part, snap);
    const Point middle = between(selected.deck_box.low, selected.deck_box.high, 0.5);
    double nearest = std::numeric_limits<double>::infinity();
    for (const LineCarrier& carrier : carriers) {
        nearest = std::min(nearest, distance_to_segment(middle, carrier.from - selected.carriers.origin,
                                                        carrier.to - selected.carriers.origin));
    }
    const double half = distance(selected.deck_box.low, selected.deck_box.high) / 2;
    selected.reach = std::max(selected.reach, half + nearest + 2 * snap);
    const Box window = selected.deck_box.grown(2 * selected.reach);
    for (const LineCarrier& carrier : carriers) {
        add_line(carrier, window, selected.carriers);
    }
    return selected;
}

/// Cells by way of a Voronoi diagram on a grid turned by `radians`.
NearestCells split(const Selection& selected, NearestSplit how, double radians, RingArea& area) {
    // Four points far out, from which no point of the deck is nearest, close the cells of all others.
    const Point middle = between(selected.deck_box.low, selected.deck_box.high, 0.5);
    const double away = 6 * selected.reach;
    how.points = selected.carriers.points;
    for (const Point d : {Point{away, 0}, Point{0, away}, Point{-away, 0}, Point{0, -away}}) {
        how.points.push_back(middle + d);
    }
    const Grid grid(box_of(middle, middle).grown(away), radians);
    return nearest_cells(selected.carriers, grid, how, area);
}

/// Where rounding to the grid has upset the topology, a grid that is turned will hardly do the same.
NearestCells best_split(const Selection& selected, const NearestSplit& how, RingArea& area) {
    NearestCells best;
    double least = std::numeric_limits<double>::infinity();
    for (const double radians : {0.0, 0.3, 1.0, 2.2}) {
        NearestCells cells = split(selected, how, radians, area);
        const double open = std::abs(cells.area() - how.whole);
        const bool done = cells.sound && open <= closed_within * how.whole;
        if (done || open < least) {
            least = open;
            best = std::move(cells);
        }
        if (done) {
            break;
        }
    }
    return best;
}

void append(NearestCells&& cells, Sharing& sharing) {
    const auto first = static_cast<std::uint32_t>(sharing.axes.size());
    sharing.axes.insert(sharing.axes.end(), cells.axes.begin(), cells.axes.end());
    for (std::size_t c = 0; c < cells.cells.size(); ++c) {
        cells.cells[c].axes += first;
        sharing.transfers.push(cells.transfers[c]);
        sharing.transfers.end_group();
    }
    if (sharing.cells.empty()) {
        sharing.cells = std::move(cells.cells); // of one big deck there are many
    } else {
        sharing.cells.insert(sharing.cells.end(), cells.cells.begin(), cells.cells.end());
    }
}

void leave_unsupported(const FramedDeck& deck, std::uint32_t index, double noise, Sharing& sharing) {
    StripAxes axes;
    axes.origin = deck.outline.front();
    for (const StripPiece& piece : pieces_of_deck(deck, axes, noise)) {
        Cell cell;
        cell.deck = index;
        cell.axes = static_cast<std::uint32_t>(sharing.axes.size());
        cell.from = piece.from;
        cell.to = piece.to;
        cell.low = piece.low;
        cell.high = piece.high;
        sharing.cells.push_back(cell);
        sharing.transfers.end_group();
    }
    sharing.axes.push_back(axes);
}

} // namespace

void share_nearest(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                   std::uint32_t deck_index, std::span<const LineCarrier> near, LostLoads& lost,
                   Sharing& sharing) {
    const FramedLevel& level = framing.levels[level_index];
    const FramedDeck& deck = level.decks[deck_index];
    const double snap = plan.settings.snap;
    const double noise = noise_of(framing.largest_coordinate);
    if (NearestCells bay;
        deck.span == SpanKind::two_way && share_convex_bay(deck, deck_index, near, {noise, snap}, bay)) {
        append(std::move(bay), sharing);
        return;
    }
    RingArea area(local_rings(deck), noise, 4 * near.size());
    const Selection selected = select(plan, level, deck, near, sharing, area);
    report_near_misses(plan, level, deck_index, near, selected.carriers, area, sharing);
    if (!selected.idle.empty()) {
        report_idle_members(level, deck_index, selected.idle, sharing);
    }
    if (selected.carriers.lines.empty() && selected.carriers.points.empty()) {
        leave_unsupported(deck, deck_index, noise, sharing);
        report_no_carrier(plan, framing, {level_index, deck_index, deck, sharing.deck_area[deck_index]}, lost,
                          sharing);
        return;
    }
    const NearestSplit how{deck_index, sharing.deck_area[deck_index],  snap,
                           noise,      deck.span == SpanKind::two_way, {}};
    NearestCells cells = best_split(selected, how, area);
    report_way_leaves(plan, level, deck_index, cells.way_leaves, sharing);
    append(std::move(cells), sharing);
}

void share_part_nearest(const Plan& plan, const Framing& framing, std::uint32_t deck_index,
                        const FramedDeck& part, double whole, std::span<const LineCarrier> carriers,
                        GatheredArea& way_leaves, Sharing& sharing) {
    const double snap = plan.settings.snap;
    const double noise = noise_of(framing.largest_coordinate);
    if (NearestCells bay; share_convex_bay(part, deck_index, carriers, {noise, snap}, bay)) {
        append(std::move(bay), sharing);
        return;
    }
    RingArea area(local_rings(part), noise, 4 * carriers.size());
    const NearestSplit how{deck_index, whole, snap, noise, true, {}};
    NearestCells cells = best_split(select_all(part, carriers, snap), how, area);
    way_leaves.add(cells.way_leaves);
    append(std::move(cells), sharing);
}

RUNNEL_NAMESPACE_END
