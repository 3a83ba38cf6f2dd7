#pragma once

#include "support/random_support.hpp"

#include <runnel/plan.hpp>

namespace support {

/// How a drawn building is placed: turned, moved, its lists reversed.
struct Placing {
    double degrees = 0;
    runnel::Point shift;
    bool reversed = false;
};

/// A fictitious framed building of one to four storeys with everything the takedown knows: bays of joist
/// fields or single joists between girders and beams, overhangs, continuous and hinged members, walls,
/// columns that stand on girders, openings, zones, line and point loads. The same seed gives the same
/// building, however it is placed.
[[nodiscard]] runnel::Plan random_building(std::uint64_t seed, const Placing& placing = {});

} // namespace support
