#include "deck/pressure.hpp"
#include "path/balance.hpp"
#include "path/findings.hpp"
#include "path/level_path.hpp"
#include "path/path.hpp"

#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

void pass_level_down(Takedown& takedown, std::uint32_t index, const CarrierAreas& areas) {
    const FramedLevel& framed = takedown.framing.levels[index];
    LevelTakedown& level = takedown.levels[index];
    LevelPath path = find_landings(framed, level.sharing);
    stand_feet(takedown, index, path);
    complete_lines(level, path);
    pass_members(takedown, index, path);
    complete_points(level, framed, path, takedown.plan.cases.size());
    pass_areas_and_lifts(takedown, index, path, areas);
}

} // namespace

Takedown pass_down(Plan plan, Framing framing, PathInput input) {
    Takedown takedown;
    takedown.self_weight_case = own_weight_case(plan);
    takedown.plan = std::move(plan);
    takedown.framing = std::move(framing);
    takedown.columns.resize(takedown.plan.columns.size());
    takedown.walls.resize(takedown.plan.walls.size());
    takedown.levels.resize(takedown.framing.levels.size());
    for (std::size_t l = 0; l < takedown.levels.size(); ++l) {
        takedown.levels[l].sharing = std::move(input.sharing[l]);
        takedown.levels[l].loads = std::move(input.loads[l]);
    }
    for (const std::uint32_t level : takedown.framing.top_down) {
        pass_level_down(takedown, level, input.areas[level]);
    }
    if (has_errors(takedown.problems)) {
        return takedown;
    }
    gather_foundations(takedown);
    find_uplift(takedown);
    warn_of_fixed_moments(takedown);
    note_assumed_stiffness(takedown);
    balance_levels_and_building(takedown);
    std::vector<Problem> open = check_balance(takedown);
    takedown.problems.insert(takedown.problems.end(), std::make_move_iterator(open.begin()),
                             std::make_move_iterator(open.end()));
    takedown.complete = true;
    return takedown;
}

RUNNEL_NAMESPACE_END
