#pragma once

#include "geometry/basic.hpp"
#include "path/influence_pieces.hpp"
#include "path/level_path.hpp"

#include <runnel/takedown.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The influence areas of a level's carriers, m2, by carrier as numbered in Sharing: the floor on which a
/// load is felt by the carrier. It is a set of pieces of floor, so that none counts twice.
///
/// Of a member: the pieces beside it, and for each member that bears on it, what that one brings over its
/// spans on both sides of the bearing (an overhang is a span here): the pieces beside those spans, and in the
/// same way what bears on them. Of a column or wall: the pieces beside it, and what the members that bear on
/// it bring. Columns and walls above bring nothing: each level has its own.
///
/// What bears on a member right over a bearing of that member is felt there, and not at its next bearings.
/// Cost: O(n log n) for n pieces and members, times the number of members on the way down from each.
[[nodiscard]] std::vector<double> influence_areas(const FramedLevel& framed, const Sharing& sharing,
                                                  const LevelPath& path, const FloorPieces& pieces,
                                                  Tolerance tolerance);

RUNNEL_NAMESPACE_END
