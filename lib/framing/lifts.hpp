#pragma once

#include "framing/problem_list.hpp"

#include <runnel/framing.hpp>
#include <runnel/plan.hpp>

RUNNEL_NAMESPACE_BEGIN

/// Fills in what follows from elevations: the levels from the top down, and the foot and head of columns and
/// walls.
void set_lifts(const Plan& plan, Framing& framing);

/// Fills in the columns and walls that are a bearing at a level: above their base, up to and including their
/// top.
void set_supports(const Plan& plan, const Framing& framing, FramedLevel& level);

/// The largest coordinate of anything in the plan, m.
[[nodiscard]] double largest_coordinate_of(const Plan& plan);

/// Columns within `snap` of each other between the same levels: an error, since what comes there cannot tell
/// them apart.
void refuse_twin_columns(const Plan& plan, const Framing& framing, ProblemList& problems);

RUNNEL_NAMESPACE_END
