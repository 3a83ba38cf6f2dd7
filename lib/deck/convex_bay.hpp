#pragma once

#include "geometry/basic.hpp"

#include <runnel/geometry.hpp>

#include <array>
#include <cstddef>

RUNNEL_NAMESPACE_BEGIN

/// A convex polygon of few edges, all of which carry: a bay with beams all round. Counter-clockwise, about a
/// local origin.
struct ConvexBay {
    static constexpr std::size_t most_edges = 12; ///< beyond, all pairs of edges cost more than a diagram

    std::array<Point, most_edges> corner, direction;
    std::array<bool, most_edges> runs_on{};        ///< the next edge goes on in the same line
    std::array<std::size_t, most_edges> line_of{}; ///< by edge: the same for those in one line
    std::size_t count = 0;
    double rounding = 0;

    [[nodiscard]] std::size_t next(std::size_t i) const { return i + 1 < count ? i + 1 : 0; }
    /// Distance of a point from an edge's line, positive inside.
    [[nodiscard]] double inside_of(std::size_t edge, Point p) const {
        return cross(direction[edge], p - corner[edge]);
    }
    /// Finds directions from corners and count; `noise` is what rounding did to the corners, in m. False: it
    /// is not convex, has an edge without length or edges that make all but a straight line.
    [[nodiscard]] bool close(double noise);
};

/// A convex polygon of few corners.
struct Corners {
    std::array<Point, 2 * ConvexBay::most_edges + 4> at;
    std::size_t count = 0;

    void add(Point p) { at[count++] = p; }
};

/// The part of the bay that is nearest to an edge; its corners begin with the edge's own two.
[[nodiscard]] Corners region_of(const ConvexBay& bay, std::size_t edge);

RUNNEL_NAMESPACE_END
