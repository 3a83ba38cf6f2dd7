#include "path/level_path.hpp"

#include <algorithm>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

LevelPath find_landings(const FramedLevel& level, const Sharing& sharing) {
    LevelPath path;
    const std::span<const Bearing> bearings = level.bearings.items();
    path.member_of.resize(bearings.size());
    for (std::uint32_t m = 0; m < level.bearings.size(); ++m) {
        const std::size_t first = level.bearings.first(m);
        for (std::size_t b = 0; b < level.bearings[m].size(); ++b) {
            path.member_of[first + b] = m;
        }
    }
    std::vector<std::pair<std::uint32_t, std::uint32_t>> pairs;
    pairs.reserve(bearings.size());
    for (std::uint32_t b = 0; b < bearings.size(); ++b) {
        pairs.emplace_back(sharing.number_of(bearings[b].on), b);
    }
    path.landings = Grouped<std::uint32_t>::from_pairs(sharing.carrier_count(), std::move(pairs));
    return path;
}

void complete_lines(LevelTakedown& level, const LevelPath& path) {
    if (path.foot_lines.items().empty()) {
        level.lines = level.loads.lines;
        return;
    }
    const std::size_t carriers = level.loads.lines.size();
    level.lines.reserve(carriers, level.loads.lines.items().size() + path.foot_lines.items().size());
    for (std::size_t c = 0; c < carriers; ++c) {
        // Both are sorted by case, and a wall comes after the sources that a level has of its own.
        const std::span<const CarrierLine> feet = path.foot_lines[c];
        std::size_t next = 0;
        for (const CarrierLine& own : std::as_const(level.loads.lines)[c]) {
            for (; next < feet.size() && feet[next].load_case < own.load_case; ++next) {
                level.lines.push(feet[next]);
            }
            level.lines.push(own);
        }
        for (; next < feet.size(); ++next) {
            level.lines.push(feet[next]);
        }
        level.lines.end_group();
    }
}

void gather_points(const LevelTakedown& level, const FramedLevel& framed, const LevelPath& path,
                   std::uint32_t carrier, std::size_t cases, std::vector<CarrierPoint>& points) {
    const std::span<const CarrierPoint> own = level.loads.points[carrier];
    const std::span<const std::uint32_t> landings = path.landings[carrier];
    const std::span<const CarrierPoint> feet = path.foot_points[carrier];
    if (landings.empty() && feet.empty()) {
        points.insert(points.end(), own.begin(), own.end());
        return;
    }
    const std::span<const Bearing> bearings = framed.bearings.items();
    std::size_t next_own = 0;
    std::size_t next_foot = 0;
    for (std::uint32_t load_case = 0; load_case < cases; ++load_case) {
        for (; next_own < own.size() && own[next_own].load_case == load_case; ++next_own) {
            points.push_back(own[next_own]);
        }
        for (const std::uint32_t b : landings) {
            const double reaction = level.reactions[b * cases + load_case];
            if (reaction != 0) {
                points.push_back(
                    {load_case, {SourceKind::member, path.member_of[b]}, bearings[b].on_station, reaction});
            }
        }
        for (; next_foot < feet.size() && feet[next_foot].load_case == load_case; ++next_foot) {
            points.push_back(feet[next_foot]);
        }
    }
}

void complete_points(LevelTakedown& level, const FramedLevel& framed, const LevelPath& path,
                     std::size_t cases) {
    const std::size_t carriers = level.loads.points.size();
    const auto brought = static_cast<std::size_t>(std::count_if(
        level.reactions.begin(), level.reactions.end(), [](double reaction) { return reaction != 0; }));
    std::vector<CarrierPoint> points;
    // Exactly what will be there: memory touched twice would cost more than all the rest of this.
    level.points.reserve(carriers,
                         level.loads.points.items().size() + path.foot_points.items().size() + brought);
    for (std::uint32_t c = 0; c < carriers; ++c) {
        points.clear();
        gather_points(level, framed, path, c, cases, points);
        level.points.push_group(points);
    }
}

RUNNEL_NAMESPACE_END
