#pragma once

#include "deck/one_way.hpp"
#include "geometry/basic.hpp"
#include "geometry/strip_sweep.hpp"

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A stretch of a carrier as the sweep sees it, with the stations of its ends on the carrier.
struct CarrierMark {
    Mark line;                    ///< in strip axes
    std::uint32_t carrier = none; ///< index in the list of carriers given
    double station_a = 0;
    double station_b = 0;
};

/// The carriers of a deck in strip axes, fitted to its edges where the drawing is off by no more than `snap`:
/// a stretch that runs along an edge lies on it, an end beside an edge ends on it. What is off by rounding
/// alone stays as it is. Carriers that run along the strips are left out: they take nothing from them.
[[nodiscard]] std::vector<CarrierMark> fit_marks(const Ring& outline, const std::vector<Ring>& openings,
                                                 std::span<const LineCarrier> carriers, const StripAxes& axes,
                                                 Tolerance tolerance);

RUNNEL_NAMESPACE_END
