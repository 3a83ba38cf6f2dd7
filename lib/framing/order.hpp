#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Orders the level's members so that each comes after all that bear on it (Kahn 1962). A loop is reported
/// with its ids in order; its members then stand last, so that the order still holds every member.
void order_load_path(LevelDraft& draft);

RUNNEL_NAMESPACE_END
