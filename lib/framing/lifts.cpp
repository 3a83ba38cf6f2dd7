#include "framing/lifts.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>
#include <string_view>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

namespace {

using LevelNumbers = std::unordered_map<std::string_view, std::uint32_t>;

std::uint32_t level_or_ground(const LevelNumbers& numbers, std::string_view id) {
    const auto found = numbers.find(id);
    return found == numbers.end() ? none : found->second;
}

double base_elevation(const Plan& plan, std::uint32_t base) {
    return base == none ? plan.settings.ground_elevation : plan.levels[base].elevation;
}

std::vector<std::uint32_t> reaching(const Plan& plan, const std::vector<std::uint32_t>& bases,
                                    const std::vector<std::uint32_t>& tops, double elevation) {
    std::vector<std::uint32_t> found;
    for (std::uint32_t i = 0; i < bases.size(); ++i) {
        if (tops[i] != none && base_elevation(plan, bases[i]) < elevation &&
            elevation <= plan.levels[tops[i]].elevation) {
            found.push_back(i);
        }
    }
    return found;
}

} // namespace

void set_lifts(const Plan& plan, Framing& framing) {
    LevelNumbers numbers;
    for (std::uint32_t i = 0; i < plan.levels.size(); ++i) {
        numbers.emplace(plan.levels[i].id, i);
    }
    framing.top_down.resize(plan.levels.size());
    std::iota(framing.top_down.begin(), framing.top_down.end(), 0U);
    std::stable_sort(framing.top_down.begin(), framing.top_down.end(), [&](std::uint32_t a, std::uint32_t b) {
        return plan.levels[a].elevation > plan.levels[b].elevation;
    });
    for (const Column& column : plan.columns) {
        framing.column_base.push_back(level_or_ground(numbers, column.base));
        framing.column_top.push_back(level_or_ground(numbers, column.top));
    }
    for (const Wall& wall : plan.walls) {
        framing.wall_base.push_back(level_or_ground(numbers, wall.base));
        framing.wall_top.push_back(level_or_ground(numbers, wall.top));
    }
}

void set_supports(const Plan& plan, const Framing& framing, FramedLevel& level) {
    level.columns = reaching(plan, framing.column_base, framing.column_top, level.elevation);
    level.walls = reaching(plan, framing.wall_base, framing.wall_top, level.elevation);
}

double largest_coordinate_of(const Plan& plan) {
    double largest = 0;
    const auto see = [&](Point p) { largest = std::max({largest, std::abs(p.x), std::abs(p.y)}); };
    const auto see_ring = [&](const Ring& ring) { std::for_each(ring.begin(), ring.end(), see); };
    const auto see_both = [&](const auto& line) {
        see(line.from);
        see(line.to);
    };
    for (const Column& column : plan.columns) {
        see(column.at);
    }
    std::for_each(plan.walls.begin(), plan.walls.end(), see_both);
    for (const Level& level : plan.levels) {
        std::for_each(level.members.begin(), level.members.end(), see_both);
        std::for_each(level.line_loads.begin(), level.line_loads.end(), see_both);
        for (const JoistField& field : level.joist_fields) {
            see_ring(field.outline);
        }
        for (const Deck& deck : level.decks) {
            see_ring(deck.outline);
            std::for_each(deck.openings.begin(), deck.openings.end(), see_ring);
        }
        for (const AreaLoad& load : level.area_loads) {
            see_ring(load.outline);
        }
        for (const PointLoad& load : level.point_loads) {
            see(load.at);
        }
    }
    return largest;
}

RUNNEL_NAMESPACE_END
