#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Draws the axes of the members in the list.
void draw_members(LevelDraft& draft);

/// Lays out the joists of all fields, not yet cut: every stretch that a joist line has inside its field's
/// outline (a closed set: a line on an edge is inside). `room` is how many members the plan may still have;
/// a field that wants more is the problem too-much and is not laid out.
void lay_joists(LevelDraft& draft, std::size_t& room);

/// Finds for every line the elements near it: one search that all later phases use.
void find_surroundings(LevelDraft& draft);

/// Unit vector at an angle in degrees from +x; exact at multiples of 90.
[[nodiscard]] Point direction_at(double degrees);

/// Reports lines whose ends are one point, and takes them out of use.
void refuse_short_lines(LevelDraft& draft);

RUNNEL_NAMESPACE_END
