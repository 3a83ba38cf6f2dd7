#pragma once

#include <runnel/line_piece.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Sums stretches of line load that may overlap into stretches that do not, by rising station.
///
/// Stations within `noise` (m, rounding of coordinates) of the first of their cluster are one; a stretch that
/// is no longer than that vanishes. Neighbours that continue each other as the same polynomial, to rounding,
/// are joined; where the sum is exactly nothing there is no stretch. `changed` is raised to a bound of what
/// ordinates changed by, kN/m, where it is less.
/// Laws (tests/unit/path_line_pieces_test.cpp):
///   (1) sum    at every station the intensity is the sum of those given, but for what noise moves: joining
///              changes it by no more than 1e-9 of the largest on the stretch
///   (2) keep   force and first moment are those given, to rounding, however far the plan's origin
///   (3) order  the result does not depend on the order of `pieces`
/// Cost: O(n log n + n d) for n stretches of which at most d overlap.
[[nodiscard]] std::vector<LinePiece> merged(std::vector<LinePiece> pieces, double noise,
                                            double* changed = nullptr);

RUNNEL_NAMESPACE_END
