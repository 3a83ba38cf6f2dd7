#pragma once

#include "framing/contacts.hpp"
#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Finds who bears on whom, by the rules of the trade:
/// (1) what meets or crosses over a column or wall bears on it, and not on each other there;
/// (2) what ends on a member that runs through bears on it; of ends that meet with nothing running through,
/// the
///     lower roles bear on the highest;
/// (3) of two that cross, the lower role bears on the higher and runs on;
/// and a member with `bears_on` bears on what it names and on nothing else.
/// Fills in the level's bearings.
void find_bearings(LevelDraft& draft, const Contacts& contacts);

RUNNEL_NAMESPACE_END
