#pragma once

#include "path/level_path.hpp"

#include <runnel/takedown.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Floor area on its way down: of this level, and of the levels above with the number of them that bring any.
struct AreaBrought {
    double own = 0;           ///< m2, of this level
    double above = 0;         ///< m2, by columns and walls that end on this level's carriers
    std::uint32_t floors = 0; ///< above

    void add(const AreaBrought& other, double part = 1) {
        own += part * other.own;
        above += part * other.above;
        floors = other.floors > floors ? other.floors : floors;
    }
};

/// Passes areas down the members of a level in the order of the path: each member's area is divided at the
/// middle of its spans, an overhang goes whole to its bearing; what lies at a middle goes to both sides by
/// halves. Fills region_area and tributary_area of the level, and returns what arrives at each carrier
/// (numbered as in Sharing), its own regions included.
[[nodiscard]] std::vector<AreaBrought> pass_areas(Takedown& takedown, std::uint32_t level,
                                                  const LevelPath& path, const CarrierAreas& areas);

RUNNEL_NAMESPACE_END
