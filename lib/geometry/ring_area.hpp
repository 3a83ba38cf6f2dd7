#pragma once

#include "geometry/box_tree.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/geometry.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// An edge in strip axes, running upwards.
struct LevelEdge {
    Point a, b;
    int step = 0; ///< what crossing it along the strips does to the depth inside

    [[nodiscard]] double at(double across) const {
        if (across <= a.y) {
            return a.x;
        }
        if (across >= b.y) {
            return b.x;
        }
        const double t = (across - a.y) / (b.y - a.y);
        return (1 - t) * a.x + t * b.x;
    }
};

/// The area on the left of rings (outlines counter-clockwise, openings clockwise), to clip pieces by.
///
/// Rings may touch each other and themselves. `noise` is what rounding did to what they share with pieces:
/// an edge so near a piece's border lies on it, and the piece ends at the edge, on whichever side of the
/// border that is; so that pieces on both sides of a border close. Coordinates need a local origin.
/// Laws (tests/unit/geometry_clip_test.cpp): parts of pieces that cover the area add up to it.
class RingArea {
public:
    /// `questions`: about how many pieces will be asked for.
    RingArea(const std::vector<Ring>& rings, double noise, std::size_t questions);

    enum class Place : std::uint8_t { inside, outside, edge };
    /// Where a box lies; `edge` if an edge may meet it.
    [[nodiscard]] Place place_of(const Box& box) const;
    [[nodiscard]] bool contains(Point p) const;

    struct Part {
        StripPiece piece;
        double out_below = 0; ///< m along the strips, at the middle, that lie outside between the part and
        double out_above = 0; ///< the low border of the whole piece, or its high border
    };
    /// The parts inside of a piece in `axes`, whose plan box is `box`. `parts` is cleared first.
    void clip(const StripPiece& piece, const StripAxes& axes, const Box& box, std::vector<Part>& parts);

    /// Length of the straight way from a to b that lies outside.
    [[nodiscard]] double length_outside(Point a, Point b);
    /// Lengths of a straight line from a to b: inside, and the longest stretch along one edge of the rings,
    /// no farther from it than `beside`.
    struct Shared {
        double inside = 0;
        double along_edge = 0;
    };
    [[nodiscard]] Shared shared_with(Point a, Point b, double beside);
    /// Whether an edge is no farther from p than `reach`.
    [[nodiscard]] bool is_beside_edge(Point p, double reach);

private:
    struct Edge {
        Point a, b;
    };
    struct Crossing {
        double along = 0;
        const LevelEdge* edge = nullptr;
    };

    void lay_grid(std::size_t questions);
    void mark_edge_cells();
    void mark_inside_cells();
    [[nodiscard]] std::size_t column_of(double x) const;
    [[nodiscard]] std::size_t row_of(double y) const;
    void find_edges(const StripPiece& piece, const StripAxes& axes, const Box& box);
    void find_levels(const StripPiece& piece);
    void find_crossings(const StripPiece& strip);
    [[nodiscard]] int depth_at_low(const StripPiece& strip, const StripAxes& axes) const;
    void clip_strip(const StripPiece& strip, const StripAxes& axes, std::vector<Part>& parts);
    void stop_at_edges(Point a, Point b);

    std::vector<Edge> edges_;
    Box extent_;
    double noise_ = 0;
    double rounding_ = 0;
    BoxFinder finder_;

    // A grid of squares over the extent, where many questions are worth it.
    std::size_t columns_ = 0, rows_ = 0;
    double width_ = 0, height_ = 0;
    std::vector<std::uint32_t> edges_before_; ///< by square: how many below and left of it have edges
    std::vector<bool> is_inside_;
    std::vector<std::vector<std::uint32_t>> edges_of_row_;

    // Reused from question to question.
    std::vector<std::uint32_t> near_;
    std::vector<LevelEdge> level_edges_;
    std::vector<const LevelEdge*> active_;
    std::vector<double> levels_;
    std::vector<Crossing> crossings_;
    std::vector<double> stops_;
};

RUNNEL_NAMESPACE_END
