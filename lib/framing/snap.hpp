#pragma once

#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

/// Moves member ends that are meant to meet onto each other: an end joins the column, the wall's end or the
/// member's end of the highest rank within `snap` (column, wall, girder, beam, joist; of equal rank the
/// nearest, then by id), or else moves onto the axis of a wall or member within `snap`. Columns and walls
/// never move, and no point moves by more than `snap`.
///
/// Points are never joined in chains: a point joins one that itself stays, so that a row of points each
/// within `snap` of the next does not run together. Rejected: averaging (nothing would then stay where it was
/// drawn) and a grid (two points a hair apart may fall into different cells).
void snap_lines(LevelDraft& draft);

/// Copies decks into the level, outlines counter-clockwise and openings clockwise, with their vertices moved
/// onto columns, ends of walls and members, vertices of earlier decks, axes, and, for openings, the deck's
/// own edges within `snap`.
void snap_decks(LevelDraft& draft);

/// Puts member ends, columns and ends of walls that lie within `snap` of the inside of a deck's edge, and off
/// it by more than noise, into the ring: a strip along the edge then ends at the carrier that was meant.
void node_decks(LevelDraft& draft);

/// The note that says how many points were moved and how far.
void note_moves(LevelDraft& draft);

/// `target`, or where a point that may move by `snap` and no more gets on its way there.
[[nodiscard]] Point move_towards(Point target, Point drawn, double snap);

RUNNEL_NAMESPACE_END
