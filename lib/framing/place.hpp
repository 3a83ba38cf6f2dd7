#pragma once

#include <runnel/plan.hpp>

#include <string>

RUNNEL_NAMESPACE_BEGIN

/// Where a point is, for sentences: "(4.5, 1) m", and " at B/3" where it lies within `snap` of the crossing
/// grid lines B and 3.
[[nodiscard]] std::string place_text(const Plan& plan, Point point);

RUNNEL_NAMESPACE_END
