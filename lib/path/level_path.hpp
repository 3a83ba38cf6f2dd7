#pragma once

#include <runnel/takedown.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// What the path needs of a level while it works there, and nobody afterwards. Bearings are counted through
/// the level (FramedLevel::bearings.items()), carriers as in Sharing.
struct LevelPath {
    std::vector<std::uint32_t> member_of; ///< by bearing: the member that rests
    Grouped<std::uint32_t> landings;      ///< by carrier: bearings on it, rising
    Grouped<CarrierLine> foot_lines;      ///< by carrier: what walls above put on it; sorted by case
    Grouped<CarrierPoint> foot_points; ///< by carrier: what columns and walls above put on it; sorted by case
};

/// Counts out who rests on whom at a level.
[[nodiscard]] LevelPath find_landings(const FramedLevel& level, const Sharing& sharing);

/// Puts the loads at the feet of columns and walls that end on this level's carriers onto those.
void stand_feet(const Takedown& takedown, std::uint32_t level, LevelPath& path);

/// The level's own line loads and those of walls above, by carrier.
void complete_lines(LevelTakedown& level, const LevelPath& path);

/// Points on a carrier, sorted by case and source: its own, reactions of the members that rest on it, and
/// feet. Members that rest on it must have their reactions. Appends to `points`.
void gather_points(const LevelTakedown& level, const FramedLevel& framed, const LevelPath& path,
                   std::uint32_t carrier, std::size_t cases, std::vector<CarrierPoint>& points);

/// Works out all members of a level in the order of the load path: spans, load columns, reactions, held
/// moments.
void pass_members(Takedown& takedown, std::uint32_t level, const LevelPath& path);

/// The points on every carrier of the level, after its members are worked out.
void complete_points(LevelTakedown& level, const FramedLevel& framed, const LevelPath& path,
                     std::size_t cases);

/// Passes areas down the members of a level, and adds its lift to each column and wall that is a bearing
/// there.
void pass_areas_and_lifts(Takedown& takedown, std::uint32_t level, const LevelPath& path,
                          const CarrierAreas& areas);

RUNNEL_NAMESPACE_END
