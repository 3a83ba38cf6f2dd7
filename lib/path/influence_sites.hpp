#pragma once

#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/segment_voronoi.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A column, or a place on a wall, in coordinates from the deck's first corner.
struct Site {
    Point at;
    std::uint32_t carrier = none;
};

/// The columns that cells of a deck go to, and places on the walls that they go to: a wall's ends, as far as
/// cells reach, and where it faces a column that no other support lies nearer to. Coordinates from `origin`;
/// `box` is the deck's.
[[nodiscard]] std::vector<Site> find_sites(const Plan& plan, const Sharing& sharing,
                                           std::span<const std::uint32_t> cells, Point origin, const Box& box,
                                           Tolerance tolerance);

/// The Voronoi diagram of lines and points; its sites are the nodes after the pieces of lines. Four nodes of
/// its own, far out, close the cells of all others. One that cannot be trusted is drawn anew on turned grids;
/// if none can be, the first stays.
struct ClosedDiagram {
    NodedLines noded;
    VoronoiDiagram voronoi;

    ClosedDiagram(std::span<const AxisLine> lines, std::vector<Point> points, const Box& box, double noise);
};

RUNNEL_NAMESPACE_END
