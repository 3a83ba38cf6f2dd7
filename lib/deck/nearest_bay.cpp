#include "deck/convex_bay.hpp"
#include "deck/nearest.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <array>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Which carrier each edge of a bay lies on, as an index into those near.
using EdgeCarriers = std::array<std::uint32_t, ConvexBay::most_edges>;

/// Whether all carriers near are along edges or touch the bay from outside, and every edge has its own.
bool find_carriers(std::span<const LineCarrier> near, Point origin, Tolerance tolerance, const ConvexBay& bay,
                   EdgeCarriers& on) {
    on.fill(none);
    for (std::uint32_t c = 0; c < near.size(); ++c) {
        const Point a = near[c].from - origin;
        const Point b = near[c].to - origin;
        bool on_edge = false;
        for (std::size_t i = 0; i < bay.count; ++i) {
            if (distance_to_segment(bay.corner[i], a, b) <= tolerance.noise &&
                distance_to_segment(bay.corner[bay.next(i)], a, b) <= tolerance.noise) {
                if (on[i] == none) {
                    on[i] = c;
                }
                on_edge = true;
            }
        }
        if (on_edge) {
            continue;
        }
        // The stretch of it in the bay grown by `snap`: no more than what reaches in from outside.
        double from = 0;
        double to = 1;
        for (std::size_t i = 0; i < bay.count && from < to; ++i) {
            const double start = bay.inside_of(i, a) + tolerance.snap;
            const double end = bay.inside_of(i, b) + tolerance.snap;
            if (start < 0 && end < 0) {
                to = from;
            } else if (start < 0) {
                from = std::max(from, start / (start - end));
            } else if (end < 0) {
                to = std::min(to, start / (start - end));
            }
        }
        if ((to - from) * distance(a, b) > 2 * tolerance.snap) {
            return false;
        }
    }
    return std::none_of(on.begin(), on.begin() + static_cast<std::ptrdiff_t>(bay.count),
                        [](std::uint32_t c) { return c == none; });
}

/// The region between its edge and the chain of its other corners, in pieces between their levels.
void push_region(const Corners& region, const LineCarrier& carrier, Point origin, const Cell& model,
                 double rounding, NearestCells& cells) {
    const Point d = carrier.to - carrier.from;
    const double length = norm(d);
    const StripAxes axes{carrier.from - origin, d.y / length, -d.x / length};
    Cell cell = model;
    cell.axes = static_cast<std::uint32_t>(cells.axes.size());
    cells.axes.push_back({carrier.from, axes.cosine, axes.sine});
    const auto seen = [&](Point p) {
        Point q = axes.to_strip(p);
        q.x = std::abs(q.x) <= rounding ? 0 : q.x;
        return q;
    };
    const Point start = seen(region.at[0]);
    const Point end = seen(region.at[1]);
    const auto base_at = [&](double station) {
        return station == start.y ? start.x
               : station == end.y ? end.x
                                  : between(start, end, (station - start.y) / (end.y - start.y)).x;
    };
    const bool rising = end.y > start.y; // then the bay lies on the left of the carrier
    cell.carrier_side = rising ? Cell::CarrierSide::high : Cell::CarrierSide::low;
    Point before = end;
    for (std::size_t i = 2; i <= region.count; ++i) {
        const Point here = i < region.count ? seen(region.at[i]) : start;
        const Point low = rising ? here : before;
        const Point high = rising ? before : here;
        before = here;
        if (!(high.y > low.y)) {
            continue;
        }
        cell.from = low.y;
        cell.to = high.y;
        const Border chain{low.x, high.x, 0};
        const Border base{base_at(low.y), base_at(high.y), 0};
        cell.low = rising ? chain : base;
        cell.high = rising ? base : chain;
        cells.cells.push_back(cell);
        cells.transfers.push_back(
            {carrier.number, std::clamp(cell.from, 0.0, length), std::clamp(cell.to, 0.0, length), 1});
    }
}

} // namespace

bool share_convex_bay(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> near,
                      Tolerance tolerance, NearestCells& cells) {
    if (!deck.openings.empty() || deck.outline.size() < 3 || deck.outline.size() > ConvexBay::most_edges) {
        return false;
    }
    ConvexBay bay;
    const Point origin = deck.outline.front();
    EdgeCarriers on{};
    for (const Point& p : deck.outline) {
        bay.corner[bay.count++] = p - origin;
    }
    if (!bay.close(tolerance.noise) || !find_carriers(near, origin, tolerance, bay, on)) {
        return false;
    }
    Cell model;
    model.deck = index;
    for (std::size_t i = 0; i < bay.count; ++i) {
        push_region(region_of(bay, i), near[on[i]], origin, model, bay.rounding, cells);
    }
    return true;
}

RUNNEL_NAMESPACE_END
