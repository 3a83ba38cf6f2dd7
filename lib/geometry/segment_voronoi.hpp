#pragma once

#include "geometry/grid_noding.hpp"

#include <runnel/geometry.hpp>

#include <array>
#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The Voronoi diagram of noded lines and points. A site is a piece of a line without its ends, or a node:
/// site i is pieces[i], or nodes[i - pieces.size()].
struct VoronoiDiagram {
    /// What separates two sites: a straight line, or a parabola between a piece and a node. `left` lies on
    /// the left of the way from one vertex to the other.
    struct Arc {
        std::uint32_t left = 0, right = 0;
        std::uint32_t from = 0, to = 0; ///< vertices
    };
    std::vector<Point> vertices;
    std::vector<Arc> arcs; ///< none between a piece and its own end, none without length
    bool trusted = true;   ///< false: arcs run backwards or to infinity, so that areas will not close
};

/// Builds the diagram on the grid (Boost.Polygon, after Fortune 1987) for its topology, and places each
/// vertex anew in double precision from the sites around it. Arcs that come out backwards, since the grid
/// bends lines by a step, are drawn together to a point; so are those no longer than `noise`.
///
/// The outermost sites must be points: arcs to infinity are left out, and trusted only between `open` points
/// (indices into the nodes).
[[nodiscard]] VoronoiDiagram segment_voronoi(std::span<const AxisLine> lines, const NodedLines& noded,
                                             const Grid& grid, std::span<const std::uint32_t> open,
                                             double noise);

/// The diagram as built on the grid.
struct GridVoronoi {
    static constexpr std::uint32_t nobody = 0xffffffff;
    struct Vertex {
        double x = 0, y = 0;                                                ///< in grid steps
        std::array<std::uint32_t, 4> sites{nobody, nobody, nobody, nobody}; ///< around it, the first four
    };
    std::vector<Vertex> vertices;
    std::vector<VoronoiDiagram::Arc> arcs;
    std::vector<std::uint32_t> infinite; ///< sites with arcs to infinity
};
[[nodiscard]] GridVoronoi grid_voronoi(const NodedLines& noded);

RUNNEL_NAMESPACE_END
