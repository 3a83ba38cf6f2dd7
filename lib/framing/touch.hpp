#pragma once

#include "geometry/basic.hpp"

#include <optional>

RUNNEL_NAMESPACE_BEGIN

/// An axis between two points.
struct Axis {
    Point from, to;
    double length = 0;

    Axis() = default;
    Axis(Point a, Point b) : from(a), to(b), length(distance(a, b)) {}
    Axis(Point a, Point b, double known_length) : from(a), to(b), length(known_length) {}

    /// Exact at both ends.
    [[nodiscard]] Point at(double station) const {
        return station <= 0 ? from : station >= length ? to : between(from, to, station / length);
    }
    /// Whether a station is within `reach` of an end.
    [[nodiscard]] bool is_end(double station, double reach) const {
        return station <= reach || station >= length - reach;
    }
};

/// The point of an axis nearest to a point.
struct NearPoint {
    double station = 0;
    double distance = 0;
    Point at;
};
[[nodiscard]] NearPoint nearest_on(const Axis& axis, Point p);

/// Where two axes touch: within reach of each other, ends before insides.
struct Touch {
    double station = 0;
    double other_station = 0;
    Point at;       ///< on the first axis
    Point other_at; ///< on the other
};

/// Axes that do not lie along each other touch at one place at most. An end within `reach` of the other's end
/// goes first, then an end within `reach` of the other's inside, then a crossing.
[[nodiscard]] std::optional<Touch> touch_of(const Axis& a, const Axis& b, double reach);

/// Shortest distance between two axes, and where.
struct Gap {
    double distance = 0;
    Point at, other_at;
};
[[nodiscard]] Gap gap_between(const Axis& a, const Axis& b);

/// A stretch of stations.
struct Stretch {
    double from = 0, to = 0;
    [[nodiscard]] double length() const { return to - from; }
};

/// The stretch of `a` along which `b` lies: all that they have side by side is within `reach`, and it is
/// longer than `reach`.
[[nodiscard]] std::optional<Stretch> stretch_along(const Axis& a, const Axis& b, double reach);

RUNNEL_NAMESPACE_END
