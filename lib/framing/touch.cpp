#include "framing/touch.hpp"

RUNNEL_NAMESPACE_BEGIN

NearPoint nearest_on(const Axis& axis, Point p) {
    if (axis.length <= 0) {
        return {0, distance(p, axis.from), axis.from};
    }
    const double station =
        std::clamp(dot(p - axis.from, axis.to - axis.from) / axis.length, 0.0, axis.length);
    const Point at = axis.at(station);
    return {station, distance(p, at), at};
}

namespace {

struct Crossing {
    double station, other_station;
};

/// Where the lines cross inside both axes.
std::optional<Crossing> crossing_of(const Axis& a, const Axis& b) {
    const Point da = a.to - a.from;
    const Point db = b.to - b.from;
    const double turn = cross(da, db);
    if (turn == 0) {
        return std::nullopt;
    }
    const Point gap = b.from - a.from;
    const double t = cross(gap, db) / turn;
    const double u = cross(gap, da) / turn;
    if (!(t >= 0 && t <= 1 && u >= 0 && u <= 1)) {
        return std::nullopt;
    }
    return Crossing{t * a.length, u * b.length};
}

std::optional<Touch> touch_of_ends(const Axis& a, const Axis& b, double reach) {
    std::optional<Touch> best;
    double least = reach;
    for (const double sa : {0.0, a.length}) {
        for (const double sb : {0.0, b.length}) {
            const Point pa = a.at(sa);
            const Point pb = b.at(sb);
            const double d = distance(pa, pb);
            if (d <= least) {
                least = d;
                best = Touch{sa, sb, pa, pb};
            }
        }
    }
    return best;
}

/// An end of `a` on `b`; the nearer end where both are.
std::optional<Touch> touch_of_end(const Axis& a, const Axis& b, double reach) {
    const NearPoint at_from = nearest_on(b, a.from);
    const NearPoint at_to = nearest_on(b, a.to);
    const bool from_end = at_from.distance <= at_to.distance;
    const NearPoint& near = from_end ? at_from : at_to;
    if (near.distance > reach) {
        return std::nullopt;
    }
    return Touch{from_end ? 0.0 : a.length, near.station, from_end ? a.from : a.to, near.at};
}

} // namespace

std::optional<Touch> touch_of(const Axis& a, const Axis& b, double reach) {
    if (auto touch = touch_of_ends(a, b, reach)) {
        return touch;
    }
    const auto a_ends = touch_of_end(a, b, reach);
    const auto b_ends = touch_of_end(b, a, reach);
    if (a_ends &&
        (!b_ends || distance(a_ends->at, a_ends->other_at) <= distance(b_ends->at, b_ends->other_at))) {
        return a_ends;
    }
    if (b_ends) {
        return Touch{b_ends->other_station, b_ends->station, b_ends->other_at, b_ends->at};
    }
    if (const auto crossing = crossing_of(a, b)) {
        return Touch{crossing->station, crossing->other_station, a.at(crossing->station),
                     b.at(crossing->other_station)};
    }
    return std::nullopt;
}

Gap gap_between(const Axis& a, const Axis& b) {
    if (const auto crossing = crossing_of(a, b)) {
        return {0, a.at(crossing->station), b.at(crossing->other_station)};
    }
    Gap gap{std::numeric_limits<double>::infinity(), {}, {}};
    for (const Point end : {a.from, a.to}) {
        const NearPoint near = nearest_on(b, end);
        if (near.distance < gap.distance) {
            gap = {near.distance, end, near.at};
        }
    }
    for (const Point end : {b.from, b.to}) {
        const NearPoint near = nearest_on(a, end);
        if (near.distance < gap.distance) {
            gap = {near.distance, near.at, end};
        }
    }
    return gap;
}

namespace {

/// The stretch in stations of `a`, which is the longer.
std::optional<Stretch> stretch_on_longer(const Axis& a, const Axis& b, double reach) {
    const Point u = (1 / a.length) * (a.to - a.from);
    const double s_from = dot(b.from - a.from, u);
    const double s_to = dot(b.to - a.from, u);
    const Stretch side_by_side{std::max(0.0, std::min(s_from, s_to)),
                               std::min(a.length, std::max(s_from, s_to))};
    if (!(side_by_side.length() > reach)) {
        return std::nullopt;
    }
    const double off_from = cross(u, b.from - a.from);
    const double off_to = cross(u, b.to - a.from);
    const auto off_at = [&](double station) {
        return off_from + (off_to - off_from) * ((station - s_from) / (s_to - s_from));
    };
    if (std::abs(off_at(side_by_side.from)) > reach || std::abs(off_at(side_by_side.to)) > reach) {
        return std::nullopt;
    }
    return side_by_side;
}

} // namespace

std::optional<Stretch> stretch_along(const Axis& a, const Axis& b, double reach) {
    if (a.length <= reach || b.length <= reach) {
        return std::nullopt;
    }
    // Judged on the longer of the two, so that it is the same question from both sides.
    if (a.length >= b.length) {
        return stretch_on_longer(a, b, reach);
    }
    const auto on_b = stretch_on_longer(b, a, reach);
    if (!on_b) {
        return std::nullopt;
    }
    const double s = nearest_on(a, b.at(on_b->from)).station;
    const double t = nearest_on(a, b.at(on_b->to)).station;
    return Stretch{std::min(s, t), std::max(s, t)};
}

RUNNEL_NAMESPACE_END
