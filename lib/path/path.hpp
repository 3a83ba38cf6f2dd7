#pragma once

#include <runnel/takedown.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// What the load path is made of, by level of the framing: the result of the engines before it.
struct PathInput {
    std::vector<Sharing> sharing;
    std::vector<LevelLoads> loads;
    std::vector<CarrierAreas> areas;
};

/// Carries the loads of all levels down: the part of take_down that needs no deck any more.
///
/// `framing` must have bearings and an order that hold. A member that cannot stand in spite of that is the
/// error `mechanism`, and the takedown is not complete.
[[nodiscard]] Takedown pass_down(Plan plan, Framing framing, PathInput input);

RUNNEL_NAMESPACE_END
