#pragma once

#include <runnel/geometry.hpp>

#include <algorithm>
#include <cmath>
#include <limits>
#include <span>

RUNNEL_NAMESPACE_BEGIN

inline Point operator+(Point a, Point b) {
    return {a.x + b.x, a.y + b.y};
}
inline Point operator-(Point a, Point b) {
    return {a.x - b.x, a.y - b.y};
}
inline Point operator*(double k, Point a) {
    return {k * a.x, k * a.y};
}
inline double dot(Point a, Point b) {
    return a.x * b.x + a.y * b.y;
}
inline double cross(Point a, Point b) {
    return a.x * b.y - a.y * b.x;
}
inline double norm(Point a) {
    return std::sqrt(dot(a, a));
}
inline double distance(Point a, Point b) {
    return norm(b - a);
}

/// Point at fraction t from a to b; exact at both ends.
inline Point between(Point a, Point b, double t) {
    return {(1 - t) * a.x + t * b.x, (1 - t) * a.y + t * b.y};
}

/// Station of the foot of p on the line from a to b, in m from a; not limited to the segment.
inline double station_of(Point p, Point a, Point b) {
    return dot(p - a, b - a) / distance(a, b);
}

/// Distance of p from the segment from a to b.
inline double distance_to_segment(Point p, Point a, Point b) {
    const Point d = b - a;
    const double square = dot(d, d);
    const double t = square > 0 ? std::clamp(dot(p - a, d) / square, 0.0, 1.0) : 0.0;
    return distance(p, between(a, b, t));
}

/// Sum that keeps what rounding would lose (Neumaier 1974).
class Sum {
public:
    void add(double value) {
        const double t = sum_ + value;
        correction_ += std::abs(sum_) >= std::abs(value) ? (sum_ - t) + value : (value - t) + sum_;
        sum_ = t;
    }
    [[nodiscard]] double value() const { return sum_ + correction_; }

private:
    double sum_ = 0;
    double correction_ = 0;
};

/// Signed area of a ring, positive counter-clockwise; about its first point, so that far plans lose nothing.
inline double signed_area(std::span<const Point> ring) {
    Sum twice;
    for (std::size_t i = 1; i + 1 < ring.size(); ++i) {
        twice.add(cross(ring[i] - ring[0], ring[i + 1] - ring[0]));
    }
    return twice.value() / 2;
}

/// Two meanings kept apart: what rounding does to coordinates, and what the user takes as the same point.
struct Tolerance {
    double noise = 0; ///< m: a few ulps of the plan's largest coordinate
    double snap = 0;  ///< m
};

/// Turning and projecting a coordinate loses a few ulps; 32 of them cover the longest chain of operations
/// here.
inline double noise_of(double largest_coordinate) {
    constexpr double ulps = 32;
    return ulps * std::numeric_limits<double>::epsilon() * std::max(largest_coordinate, 1.0);
}

RUNNEL_NAMESPACE_END
