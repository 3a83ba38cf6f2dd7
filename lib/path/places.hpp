#pragma once

#include "geometry/basic.hpp"

#include <runnel/framing.hpp>
#include <runnel/plan.hpp>

RUNNEL_NAMESPACE_BEGIN

/// The axis of a member or wall; a column's is a point.
struct Axis {
    Point from;
    Point direction; ///< unit length; nothing for a column

    [[nodiscard]] Point at(double station) const { return from + station * direction; }
};

[[nodiscard]] inline Axis axis_between(Point from, Point to) {
    const double length = distance(from, to);
    return {from, length > 0 ? (1 / length) * (to - from) : Point{}};
}

[[nodiscard]] inline Axis axis_of(const Plan& plan, const FramedLevel& level, Carrier carrier) {
    switch (carrier.kind) {
    case CarrierKind::member:
        return axis_between(level.members[carrier.index].from, level.members[carrier.index].to);
    case CarrierKind::wall:
        return axis_between(plan.walls[carrier.index].from, plan.walls[carrier.index].to);
    case CarrierKind::column:
        break;
    }
    return {plan.columns[carrier.index].at, {}};
}

[[nodiscard]] inline double length_of(const Wall& wall) {
    return distance(wall.from, wall.to);
}

RUNNEL_NAMESPACE_END
