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

RUNNEL_NAMESPACE_END
