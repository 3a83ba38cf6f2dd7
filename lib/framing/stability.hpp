#pragma once

#include "framing/draft.hpp"
#include "framing/near_miss.hpp"

#include <span>

RUNNEL_NAMESPACE_BEGIN

/// Builds ends in where members ask for it, and gives members their hinges, those of `cut` included.
void set_fixity(LevelDraft& draft);

/// Reports members that cannot stand: too few bearings, or a mechanism by their hinges.
void check_stability(LevelDraft& draft, const NearMisses& near_misses);

/// The note on members that run on over bearings.
void note_continuous(LevelDraft& draft);

/// A stretch of a member between hinges that can move, and in how many ways the whole member can.
struct FreeMotion {
    int ways = 0;
    Stretch piece;
};

/// In how many independent ways a member on bearings, with hinges, can move without bending: 0 for one that
/// stands. Stations within `reach` of each other are one.
[[nodiscard]] FreeMotion free_motion(double length, std::span<const Bearing> bearings,
                                     std::span<const double> hinges, double reach);

RUNNEL_NAMESPACE_END
