#include "framing/expand.hpp"

#include <algorithm>
#include <cstdint>
#include <string_view>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

namespace {

Origin origin_or(const Origin& given, std::size_t level, std::size_t index) {
    Origin origin = given;
    if (origin.index == Origin::nowhere) {
        origin.level = static_cast<std::uint32_t>(level);
        origin.index = static_cast<std::uint32_t>(index);
    }
    return origin;
}

/// Own objects take the place of repeated ones with the same id; the others follow.
template <class T>
void lay_over(std::vector<Listed<T>>& list, const std::vector<T>& own, std::size_t level) {
    std::unordered_map<std::string_view, std::size_t> repeated;
    for (std::size_t i = 0; i < list.size(); ++i) {
        repeated.emplace(list[i].what->id, i);
    }
    list.reserve(list.size() + own.size());
    for (std::size_t i = 0; i < own.size(); ++i) {
        const Listed<T> listed{&own[i], origin_or(own[i].origin, level, i)};
        const auto same = repeated.find(own[i].id);
        if (same == repeated.end()) {
            list.push_back(listed);
        } else {
            list[same->second] = listed;
        }
    }
}

template <class T>
void take_loads(std::vector<T>& list, const std::vector<T>& own, bool stands_instead, std::size_t level) {
    if (own.empty() && !stands_instead) {
        return;
    }
    list = own;
    for (std::size_t i = 0; i < list.size(); ++i) {
        list[i].origin = origin_or(list[i].origin, level, i);
    }
}

void lay_own_over(LevelLists& lists, const Level& own, std::size_t level) {
    lay_over(lists.members, own.members, level);
    lay_over(lists.joist_fields, own.joist_fields, level);
    lay_over(lists.decks, own.decks, level);
    take_loads(lists.area_loads, own.area_loads, own.own_area_loads, level);
    take_loads(lists.line_loads, own.line_loads, own.own_line_loads, level);
    take_loads(lists.point_loads, own.point_loads, own.own_point_loads, level);
}

} // namespace

std::vector<LevelLists> expand_levels(const Plan& plan) {
    std::unordered_map<std::string_view, std::size_t> level_of;
    for (std::size_t i = 0; i < plan.levels.size(); ++i) {
        level_of.emplace(plan.levels[i].id, i);
    }
    std::vector<LevelLists> lists(plan.levels.size());
    enum class State { waiting, opened, done };
    std::vector<State> state(plan.levels.size(), State::waiting);
    std::vector<std::size_t> chain;
    for (std::size_t start = 0; start < plan.levels.size(); ++start) {
        // Down the chain of `like` to a level that repeats nothing more, then back up.
        chain.clear();
        std::size_t level = start;
        while (state[level] == State::waiting) {
            state[level] = State::opened;
            chain.push_back(level);
            const auto base = level_of.find(plan.levels[level].like);
            if (base == level_of.end()) {
                break;
            }
            level = base->second;
        }
        for (auto own = chain.rbegin(); own != chain.rend(); ++own) {
            const auto base = level_of.find(plan.levels[*own].like);
            if (base != level_of.end() && state[base->second] == State::done) {
                lists[*own] = lists[base->second];
            }
            lay_own_over(lists[*own], plan.levels[*own], *own);
            state[*own] = State::done;
        }
    }
    return lists;
}

RUNNEL_NAMESPACE_END
