#pragma once

#include "geometry/basic.hpp"

#include <runnel/grouped.hpp>

#include <cstdint>
#include <span>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A straight line to be drawn into a planar map.
struct MapLine {
    Point a, b;
    /// Keeps its course: ends and crossings of other lines within `snap` of it come to it.
    bool firm = false;
};

/// What a set of straight lines divides the plane into: nodes, pieces of line between them, and faces.
struct PlanarMap {
    static constexpr std::uint32_t unbounded = 0; ///< index of the face without end
    /// A straight piece between two nodes, a < b. Half of it, h = 2 p, runs from a to b with one face on its
    /// left; the other, h = 2 p + 1, runs back with the face on the other side on its left.
    struct Piece {
        std::uint32_t a = 0, b = 0;
    };
    struct LineOnPiece {
        std::uint32_t line = 0;
        bool backwards = false; ///< runs from the piece's b to its a
    };
    /// A face with its borders as chains of half pieces, each with the face on its left.
    struct Face {
        std::vector<std::uint32_t> outer; ///< counter-clockwise; empty for the unbounded face
        std::vector<std::vector<std::uint32_t>>
            holes;       ///< what floats in it; may be a mere line, there and back
        double area = 0; ///< holes taken off
    };

    std::vector<Point> nodes;
    std::vector<Piece> pieces;
    Grouped<LineOnPiece> lines;                                     ///< by piece, rising
    std::vector<std::pair<std::uint32_t, std::uint32_t>> line_ends; ///< by line: the nodes of its a and its b
    std::vector<Face> faces;                                        ///< the first is the unbounded one
    std::vector<std::uint32_t> face_left;                           ///< by half piece

    [[nodiscard]] std::uint32_t start(std::uint32_t half) const {
        return half % 2 == 0 ? pieces[half / 2].a : pieces[half / 2].b;
    }
    [[nodiscard]] std::uint32_t end(std::uint32_t half) const { return start(half ^ 1U); }
};

/// Draws lines into a map. Points within `snap` of each other are one node, nodes within `snap` of a line lie
/// on it; lines that fall together are one piece.
///
/// Coordinates should have a local origin. Laws (tests/unit/deck_panels_test.cpp):
///   (1) cover  the areas of a connected map's bounded faces add up to what its outer border encloses, since
///              each piece has one face on either side, whatever rounding does
/// Cost: O((n + k) log n) for n lines whose boxes meet k times.
[[nodiscard]] PlanarMap map_of(std::span<const MapLine> lines, Tolerance tolerance);

RUNNEL_NAMESPACE_END
