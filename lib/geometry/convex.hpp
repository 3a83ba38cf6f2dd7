#pragma once

#include <runnel/geometry.hpp>

#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A convex polygon, counter-clockwise. Empty: nothing.
using Convex = std::vector<Point>;

/// Area and first moments of a polygon about `about`.
struct AreaMoments {
    double area = 0;
    Point moment; ///< integral of (p - about)
};
[[nodiscard]] AreaMoments moments_of(std::span<const Point> polygon, Point about);

/// Cuts a convex polygon along the line from a to b. Both sides use the same cutting points, so that no area
/// is lost; corners within `noise` of the line count as on it.
void cut(const Convex& polygon, Point a, Point b, double noise, Convex& left, Convex& right);

/// The part of `polygon` inside `window`.
[[nodiscard]] Convex clipped(Convex polygon, const Convex& window, double noise);

/// A ring with openings in convex pieces (trapezoids), by one sweep. Any ring that does not cross itself.
[[nodiscard]] std::vector<Convex> convex_pieces(std::span<const Point> outline,
                                                std::span<const Ring> openings, double noise);

RUNNEL_NAMESPACE_END
