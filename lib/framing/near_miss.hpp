#pragma once

#include "framing/draft.hpp"

#include <set>
#include <string>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

/// What free ends miss by little.
struct NearMisses {
    std::unordered_map<std::uint32_t, std::string> by_member; ///< for the hint of the error that may follow
    std::set<std::uint32_t> columns, walls;                   ///< that ends miss
};

/// Warns of member ends without a bearing that lie farther than `snap` from a carrier, but not much farther.
[[nodiscard]] NearMisses find_near_misses(LevelDraft& draft);

/// Warns of columns and walls on which nothing bears at this level, and of what they miss by little. A deck
/// that is shared to columns, or that lies on a wall, bears on them.
void find_idle_supports(LevelDraft& draft, const NearMisses& reported);

RUNNEL_NAMESPACE_END
