#pragma once

#include <runnel/deck.hpp>

RUNNEL_NAMESPACE_BEGIN

/// What a split shows and a drawing hides, as warnings: joists under a one-way deck that spans along them and
/// gives them nothing, and members that run across an opening of a deck they carry.
void find_doubtful_members(const Plan& plan, const FramedLevel& level, Sharing& sharing);

RUNNEL_NAMESPACE_END
