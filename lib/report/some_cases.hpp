#pragma once

#include <runnel/takedown.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Bearings and foundations that would lift under the permanent cases (dead, superimposed dead) and only
/// those variable ones whose reaction there is negative, each with factor 1: the worst that leaving out whole
/// cases can do. The greatest uplift first, then in the order of levels, members and bearings, foundations
/// last.
[[nodiscard]] std::vector<Uplift> lifts_with_some_cases(const Takedown& takedown);

RUNNEL_NAMESPACE_END
