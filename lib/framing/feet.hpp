#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Finds what the columns and walls whose base is this level stand on: a column on a column, a wall, or the
/// member of the highest role (of equal ones the first in the plan) at its place; a wall, by stretches, on
/// walls or members along its line.
void find_feet(LevelDraft& draft);

RUNNEL_NAMESPACE_END
