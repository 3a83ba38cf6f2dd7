#pragma once

#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"

#include <runnel/geometry.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A piece of area in strip axes between two levels of `across` and two borders (low nowhere above high),
/// each straight or a parabola: what cells, and what of a load zone lies on them, are made of.
///
/// Dividing pieces by straight lines gives pieces again, and both sides of a cut use the same numbers, so
/// that areas and forces add up whatever rounding does to the cut itself.
struct StripPiece {
    double from = 0, to = 0; ///< across
    Border low, high;        ///< along

    /// Where a level lies between `from` (0) and `to` (1).
    [[nodiscard]] double fraction(double across) const noexcept {
        return to > from ? (across - from) / (to - from) : 0;
    }
};

/// The stretch of a border between two fractions of it; exact at both.
[[nodiscard]] Border stretch_of(const Border& border, double x_from, double x_to) noexcept;

/// The part of a piece between two levels, which lie within it.
[[nodiscard]] StripPiece between_levels(const StripPiece& piece, double from, double to) noexcept;

/// Area of a piece, signed.
[[nodiscard]] double area_of(const StripPiece& piece) noexcept;

/// Area, and first moments about the axes' origin (moment.x: integral of along, moment.y: of across); exact.
[[nodiscard]] AreaMoments moments_of(const StripPiece& piece) noexcept;

/// A pressure that varies over a plane, in strip axes, kN/m2: q + by_along u + by_across v.
struct Intensity {
    double q = 0;
    double by_along = 0; ///< kN/m3
    double by_across = 0;

    [[nodiscard]] double at(Point p) const noexcept { return q + by_along * p.x + by_across * p.y; }
};

/// Force and first moments (about the axes' origin) of a pressure on a piece; exact.
[[nodiscard]] AreaMoments moments_of(const StripPiece& piece, const Intensity& intensity) noexcept;

/// Divides a piece by a convex window, appending the parts inside and outside it (either may be null).
/// Corners and crossings within `noise` of a level that is there already count as on it.
void divide(const StripPiece& piece, const Convex& window, double noise, std::vector<StripPiece>* inside,
            std::vector<StripPiece>* outside);

/// The fractions in 0..1, rising, at which a border's along coordinate equals that of a straight line which
/// goes from `start` to `end` over the same levels.
[[nodiscard]] std::vector<double> crossings_of(const Border& border, double start, double end);

/// A convex polygon as pieces between the levels of its corners.
[[nodiscard]] std::vector<StripPiece> pieces_of(const Convex& polygon, double noise);

/// The smallest upright rectangle in strip axes (x along, y across) around a piece.
[[nodiscard]] Box box_of(const StripPiece& piece) noexcept;

RUNNEL_NAMESPACE_END
