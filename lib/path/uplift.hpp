#pragma once

#include <runnel/takedown.hpp>

#include <functional>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// From the values by case, kN, of what comes to one bearing: the force that counts.
using CaseMeasure = std::function<double(std::span<const double>)>;

/// Every bearing that lifts by a measure beyond rounding: bearings of members level by level, then feet of
/// columns and walls on that level's carriers, at last foundations. A wall counts once, with what it lifts
/// off first.
[[nodiscard]] std::vector<Uplift> lifts_by(const Takedown& takedown, const CaseMeasure& measure);

RUNNEL_NAMESPACE_END
