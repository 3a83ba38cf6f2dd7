#pragma once

#include <runnel/geometry.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A segment that the sweep works on; runs upwards (a.y < b.y).
struct SweepEdge {
    Point a, b;
    std::uint32_t mark = 0xffffffff; ///< of the mark it is part of; else a boundary edge
    std::int8_t outline_step = 0;    ///< how the depth in the outline changes from its left to its right side
    std::int8_t opening_step = 0;
};

/// Distance of p from the line through the edge, positive on its left (towards falling x).
[[nodiscard]] double left_of(const SweepEdge& edge, Point p);

/// Splits edges where they cross inside both by more than `noise`; edges that only touch stay whole. False:
/// none crosses.
bool split_at_crossings(std::vector<SweepEdge>& edges, double noise);

RUNNEL_NAMESPACE_END
