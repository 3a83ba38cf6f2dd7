#pragma once

#include "deck/convex_panel.hpp"
#include "geometry/convex.hpp"

#include <cmath>
#include <cstddef>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

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

/// What of a convex panel goes to one of its sides; convex.
struct SideRegion {
    std::size_t side = 0;
    Convex where;
};

/// Divides a convex ring (straight corners are let pass) among the sides that carry: each point to the side
/// from which its distance over the side's weight is least. Areas add up to the ring's, whatever rounding
/// does.
[[nodiscard]] std::vector<SideRegion> divide_among_sides(const Convex& ring, std::span<const PanelSide> sides,
                                                         double noise);

[[nodiscard]] double perimeter_of(const Convex& ring);

RUNNEL_NAMESPACE_END
