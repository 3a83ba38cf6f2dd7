#pragma once

#include <runnel/export.hpp>

#include <array>

RUNNEL_NAMESPACE_BEGIN

/// A stretch of line load along a carrier, exact: w(s) = sum of c[i] (s - from)^i, kN/m and m.
struct LinePiece {
    double from = 0; ///< station
    double to = 0;
    std::array<double, 5> c{};

    [[nodiscard]] RUNNEL_EXPORT double at(double station) const noexcept;
    /// Integral of w over the piece, kN.
    [[nodiscard]] RUNNEL_EXPORT double total() const noexcept;
    /// Integral of w (s - from) over the piece, kNm.
    [[nodiscard]] RUNNEL_EXPORT double first_moment() const noexcept;
    /// The part between two stations, re-based on its own start.
    [[nodiscard]] RUNNEL_EXPORT LinePiece between(double station_from, double station_to) const noexcept;
};

RUNNEL_NAMESPACE_END
