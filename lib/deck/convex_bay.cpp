#include "deck/convex_bay.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

bool ConvexBay::close(double noise) {
    double extent = 0;
    for (std::size_t i = 0; i < count; ++i) {
        extent = std::max({extent, std::abs(corner[i].x), std::abs(corner[i].y)});
    }
    rounding = noise_of(extent);
    const double in_line = std::max(rounding, noise);
    for (std::size_t i = 0; i < count; ++i) {
        const Point d = corner[next(i)] - corner[i];
        const double length = norm(d);
        if (length <= in_line) {
            return false;
        }
        direction[i] = (1 / length) * d;
    }
    double turned = 0;
    for (std::size_t i = 0; i < count; ++i) {
        const std::size_t j = next(i);
        const double turn = cross(direction[i], direction[j]);
        // A corner that is off by rounding turns short edges most.
        const double run = std::min(distance(corner[i], corner[j]), distance(corner[j], corner[next(j)]));
        runs_on[i] = std::abs(turn) * run <= in_line;
        const bool turns_back = runs_on[i] && dot(direction[i], direction[j]) < 0;
        // A bisector is off by rounding over the sine of the turn: flatter corners than this would cost more
        // than five digits, and go to the diagram.
        constexpr double all_but_straight = 1e-5;
        if (turns_back || (!runs_on[i] && turn < all_but_straight)) {
            return false;
        }
        turned += std::atan2(turn, dot(direction[i], direction[j]));
    }
    const auto before = [this](std::size_t i) { return i > 0 ? i - 1 : count - 1; };
    std::size_t first = 0; // of the edges in its line
    while (first + 1 < count && runs_on[before(first)]) {
        ++first;
    }
    for (std::size_t k = 0; k < count; ++k) {
        const std::size_t i = (first + k) % count;
        line_of[i] = k > 0 && runs_on[before(i)] ? line_of[before(i)] : i;
    }
    constexpr double once_and_a_bit = 7; // radians: a ring that turns twice is not convex
    return turned > 0 && turned < once_and_a_bit;
}

namespace {

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

} // namespace

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
        if (bay.line_of[other] != bay.line_of[edge]) {
            region = cut_off(region, bay.rounding,
                             [&](Point p) { return bay.inside_of(other, p) - bay.inside_of(edge, p); });
        }
    }
    return region;
}

RUNNEL_NAMESPACE_END
