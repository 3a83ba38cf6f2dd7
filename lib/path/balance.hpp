#pragma once

#include <runnel/takedown.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// What a sum of loads may be off by, beside the sum of |P|: far above rounding, far below what anybody
/// reads.
inline constexpr double closing = 1e-9;

/// Fills level_balance and balance.
///
/// Loads count where they stand. A reaction that leaves a member is taken by its carrier up to `snap` beside
/// it, and so is a column that stands on something; first moments about the plan's origin jump there by P
/// times the gap. So that the sums close to rounding, and the gap does not hide an error, arrivals count
/// where they came from: at a level at the member that rests on the support, in the building with the sum of
/// all gaps on the way taken off. A moment that a built-in end holds leaves the path and counts as a vector
/// along its member.
void balance_levels_and_building(Takedown& takedown);

/// The length that moments are measured by: the plan's largest coordinate, since they are about its origin.
[[nodiscard]] double plan_size(const Takedown& takedown);

/// True where a disagreement of forces and moments is rounding beside the sum of |P|.
[[nodiscard]] bool is_closed(double force, Point moment, double magnitude, double size);

RUNNEL_NAMESPACE_END
