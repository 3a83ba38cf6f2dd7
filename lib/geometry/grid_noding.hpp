#pragma once

#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"

#include <runnel/geometry.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A straight line between two stations of a longer one, its axis.
struct AxisLine {
    Point origin;    ///< of the axis: station 0
    Point direction; ///< unit vector
    Point a, b;      ///< the line's ends, exactly
    double from = 0; ///< station of a
    double to = 0;   ///< of b; rising

    [[nodiscard]] Point at(double station) const {
        return station == from ? a : station == to ? b : origin + station * direction;
    }
    [[nodiscard]] double station_of(Point p) const { return dot(p - origin, direction); }
    /// Signed distance from the axis, positive on the right of its direction.
    [[nodiscard]] double right_of(Point p) const {
        const Point d = p - origin;
        return d.x * direction.y - d.y * direction.x;
    }
    /// Unit vector to the right.
    [[nodiscard]] Point right() const { return {direction.y, -direction.x}; }
};

struct GridPoint {
    std::int32_t x = 0;
    std::int32_t y = 0;

    friend bool operator==(const GridPoint&, const GridPoint&) = default;
};

/// An integer grid over a window, maybe turned against it. Coordinates stay within 2^29, so that a product
/// of two differences fits 64 bits.
class Grid {
public:
    Grid(const Box& window, double radians);

    [[nodiscard]] GridPoint at(Point p) const;
    [[nodiscard]] Point place(double x, double y) const;
    [[nodiscard]] double step() const { return step_; } ///< m

private:
    Point origin_;
    double cosine_ = 1, sine_ = 0;
    double step_ = 1;
};

/// Lines cut where they meet, so that their pieces touch at nodes only: what a segment Voronoi diagram takes.
struct NodedLines {
    struct Node {
        GridPoint grid;
        Point place; ///< without the grid's rounding
    };
    struct Piece {
        std::uint32_t line = 0;
        std::uint32_t node_a = 0, node_b = 0;
        double from = 0, to = 0; ///< stations on the line's axis, of node_a and node_b
    };
    std::vector<Node> nodes;
    std::vector<Piece> pieces;
    std::vector<std::uint32_t> node_of_point;
    bool settled = true; ///< false: cutting at crossings went on making new ones
};

/// Nodes lines and points on a grid. A point or an end within a few grid steps of a line lies on it; those
/// within a few steps of each other are one node; of pieces that are the same the first line's stays.
///
/// Laws (tests/unit/geometry_voronoi_test.cpp): no two pieces share more than a node; the pieces of a line
/// follow each other from its one end to the other, but for those that an earlier line has.
/// Cost: O((n + k) log n) for n lines with k contacts.
[[nodiscard]] NodedLines node_on_grid(std::span<const AxisLine> lines, std::span<const Point> points,
                                      const Grid& grid);

RUNNEL_NAMESPACE_END
