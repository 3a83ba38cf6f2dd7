#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Makes members of the lines: those of the list as they are; joists cut where their field asks for it, and
/// without what lies along a member or wall (a note) or wholly inside an opening. `room` is how many members
/// the plan may still have; a field whose pieces want more is the problem too-much.
void make_members(LevelDraft& draft, std::size_t& room);

/// Whether an axis lies wholly inside a ring (an opening); along its edge is not inside.
[[nodiscard]] bool lies_inside(const Axis& axis, const Ring& ring, double reach);

RUNNEL_NAMESPACE_END
