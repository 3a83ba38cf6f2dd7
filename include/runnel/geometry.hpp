#pragma once

#include <runnel/export.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A point of the plan, or a vector in it. Lengths in m; x, y right-handed, seen from above.
struct Point {
    double x = 0;
    double y = 0;

    friend bool operator==(const Point&, const Point&) = default;
};

/// A closed ring without a repeated last point. Outlines run counter-clockwise and openings clockwise once a
/// plan has been framed; on input either way round is accepted.
using Ring = std::vector<Point>;

/// Axes turned into the plan: `along` and, a quarter turn counter-clockwise from it, `across`. Pieces of deck
/// are described in them; for one-way decks along is the direction of the strips, for what goes to the
/// nearest line it is square to that line.
struct StripAxes {
    Point origin;      ///< in the plan
    double cosine = 1; ///< of the angle from +x to along
    double sine = 0;

    /// Plan point to (x = along, y = across).
    [[nodiscard]] Point to_strip(Point p) const noexcept {
        const double x = p.x - origin.x;
        const double y = p.y - origin.y;
        return {x * cosine + y * sine, y * cosine - x * sine};
    }
    [[nodiscard]] Point to_plan(Point p) const noexcept {
        return {origin.x + p.x * cosine - p.y * sine, origin.y + p.x * sine + p.y * cosine};
    }
};

/// A border of a piece of deck: its `along` coordinate as a function of x = (across - from) / (to - from), in
/// 0 to 1: (1 - x) start + x end - bulge x (1 - x). Straight where bulge is 0, else a parabola.
struct Border {
    double start = 0;
    double end = 0;
    double bulge = 0;

    [[nodiscard]] double at(double x) const noexcept {
        return (1 - x) * start + x * end - bulge * x * (1 - x);
    }
    friend bool operator==(const Border&, const Border&) = default;
};

RUNNEL_NAMESPACE_END
