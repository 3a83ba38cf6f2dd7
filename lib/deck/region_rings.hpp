#pragma once

#include <runnel/geometry.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Edges between numbered corners, each with what it bounds on its left. As many arrive at a corner as leave
/// it.
struct DirectedEdges {
    struct Edge {
        std::uint32_t tail = 0;
        std::uint32_t head = 0;
    };
    std::vector<Point> corners;
    std::vector<Edge> edges;
};

/// Joins directed edges to rings: outer ones counter-clockwise, holes clockwise, the largest first. Where
/// several edges leave a corner, the one that turns most to the left goes on, so that parts that meet in a
/// corner alone are rings of their own. Corners on the straight between their neighbours, within twice
/// `noise`, are left out. Cost: O(n log n).
[[nodiscard]] std::vector<Ring> trace_rings(const DirectedEdges& edges, double noise);

RUNNEL_NAMESPACE_END
