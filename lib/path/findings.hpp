#pragma once

#include <runnel/takedown.hpp>

RUNNEL_NAMESPACE_BEGIN

/// Columns and walls that stand on the ground, in the order of the plan: columns, then walls.
void gather_foundations(Takedown& takedown);

/// Bearings and foundations whose reactions of all cases together, factor one, are negative beyond rounding.
void find_uplift(Takedown& takedown);

/// The warning `moment-not-carried-down` for each built-in bearing that holds a moment.
void warn_of_fixed_moments(Takedown& takedown);

/// The note `stiffness-assumed`, one a level, for statically indeterminate members without E and I.
void note_assumed_stiffness(Takedown& takedown);

RUNNEL_NAMESPACE_END
