#include "deck/nearest.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <array>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t most_edges = 12; // beyond, all pairs of edges cost more than a diagram

/// A convex bay in local coordinates, and which carrier each edge lies on.
struct ConvexBay {
    std::array<Point, most_edges> corner, direction;
    std::array<std::uint32_t, most_edges> carrier{};
    std::array<bool, most_edges> runs_on{}; ///< the next edge goes on in the same line
    std::size_t count = 0;
    double rounding = 0;

    [[nodiscard]] std::size_t next(std::size_t i) const { return i + 1 < count ? i + 1 : 0; }
    [[nodiscard]] double inside_of(std::size_t edge, Point p) const {
        return cross(direction[edge], p - corner[edge]);
    }
};

bool is_convex(const FramedDeck& deck, ConvexBay& bay) {
    bay.count = deck.outline.size();
    double extent = 0;
    for (std::size_t i = 0; i < bay.count; ++i) {
        bay.corner[i] = deck.outline[i] - deck.outline.front();
        extent = std::max({extent, std::abs(bay.corner[i].x), std::abs(bay.corner[i].y)});
    }
    bay.rounding = noise_of(extent);
    for (std::size_t i = 0; i < bay.count; ++i) {
        const Point d = bay.corner[bay.next(i)] - bay.corner[i];
        const double length = norm(d);
        if (length <= bay.rounding) {
            return false;
        }
        bay.direction[i] = (1 / length) * d;
    }
    double turned = 0;
    for (std::size_t i = 0; i < bay.count; ++i) {
        const std::size_t j = bay.next(i);
        const double turn = cross(bay.direction[i], bay.direction[j]);
        const double run = distance(bay.corner[j], bay.corner[bay.next(j)]);
        bay.runs_on[i] = std::abs(turn) * run <= bay.rounding;
        const bool turns_back = bay.runs_on[i] && dot(bay.direction[i], bay.direction[j]) < 0;
        if (turns_back || (!bay.runs_on[i] && turn < 0)) {
            return false;
        }
        turned += std::atan2(turn, dot(bay.direction[i], bay.direction[j]));
    }
    return turned < 7; // once around, not twice
}

/// Whether all carriers near are along edges or touch the bay from outside, and every edge has its own.
bool find_carriers(std::span<const LineCarrier> near, Point origin, Tolerance tolerance, ConvexBay& bay) {
    bay.carrier.fill(none);
    for (std::uint32_t c = 0; c < near.size(); ++c) {
        const Point a = near[c].from - origin;
        const Point b = near[c].to - origin;
        bool on_edge = false;
        for (std::size_t i = 0; i < bay.count; ++i) {
            if (distance_to_segment(bay.corner[i], a, b) <= tolerance.noise &&
                distance_to_segment(bay.corner[bay.next(i)], a, b) <= tolerance.noise) {
                if (bay.carrier[i] == none) {
                    bay.carrier[i] = c;
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
    return std::none_of(bay.carrier.begin(), bay.carrier.begin() + static_cast<std::ptrdiff_t>(bay.count),
                        [](std::uint32_t c) { return c == none; });
}

/// A convex polygon of few corners.
struct Corners {
    std::array<Point, 2 * most_edges + 4> at;
    std::size_t count = 0;

    void add(Point p) { at[count++] = p; }
};

/// What of `polygon` has value(p) >= 0; value is linear.
template <class Value>
Corners cut_off(const Corners& polygon, double rounding, Value value) {
    Corners kept;
    const auto clean = [&](Point p) {
        const double v = value(p);
        return std::abs(v) <= rounding ? 0.0 : v;
    };
    double here = clean(polygon.at[0]);
    for (std::size_t i = 0; i < polygon.count; ++i) {
        const Point p = polygon.at[i];
        const Point q = polygon.at[i + 1 < polygon.count ? i + 1 : 0];
        const double there = clean(q);
        if (here >= 0) {
            kept.add(p);
        }
        if ((here > 0 && there < 0) || (here < 0 && there > 0)) {
            kept.add(between(p, q, here / (here - there)));
        }
        here = there;
    }
    return kept;
}

/// The part of the bay nearest to an edge; its corners begin with the edge's own.
Corners region_of(const ConvexBay& bay, std::size_t edge) {
    Corners region;
    for (std::size_t k = 0; k < bay.count; ++k) {
        region.add(bay.corner[(edge + k) % bay.count]);
    }
    const std::size_t before = edge > 0 ? edge - 1 : bay.count - 1;
    const Point along = bay.direction[edge];
    if (bay.runs_on[before]) {
        region = cut_off(region, bay.rounding, [&](Point p) { return dot(p - bay.corner[edge], along); });
    }
    if (bay.runs_on[edge]) {
        region = cut_off(region, bay.rounding,
                         [&](Point p) { return dot(bay.corner[bay.next(edge)] - p, along); });
    }
    for (std::size_t other = 0; other < bay.count; ++other) {
        const bool same_line = std::abs(bay.inside_of(edge, bay.corner[other])) <= bay.rounding &&
                               std::abs(bay.inside_of(edge, bay.corner[bay.next(other)])) <= bay.rounding;
        if (!same_line) {
            region = cut_off(region, bay.rounding,
                             [&](Point p) { return bay.inside_of(other, p) - bay.inside_of(edge, p); });
        }
    }
    return region;
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
    if (!deck.openings.empty() || deck.outline.size() < 3 || deck.outline.size() > most_edges) {
        return false;
    }
    ConvexBay bay;
    const Point origin = deck.outline.front();
    if (!is_convex(deck, bay) || !find_carriers(near, origin, tolerance, bay)) {
        return false;
    }
    Cell model;
    model.deck = index;
    for (std::size_t i = 0; i < bay.count; ++i) {
        push_region(region_of(bay, i), near[bay.carrier[i]], origin, model, bay.rounding, cells);
    }
    return true;
}

RUNNEL_NAMESPACE_END
