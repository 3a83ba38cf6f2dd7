#pragma once

#include <runnel/export.hpp>

#include <cstdint>
#include <span>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// Keys that stand at the top of a plan or in a level, as in the tables of plan_keys.cpp.
enum class PlanKey : std::uint8_t {
    runnel,
    title,
    units,
    settings,
    cases,
    sections,
    builds,
    grid,
    columns,
    walls,
    levels,
    frames,
    combinations,
    reductions,
    id,
    elevation,
    like,
    moving_point,
    members,
    joist_fields,
    decks,
    area_loads,
    line_loads,
    point_loads
};

struct KeyRow {
    std::string_view name;
    PlanKey key;
    bool is_list;
};

[[nodiscard]] std::span<const KeyRow> keys_of_plan();
[[nodiscard]] std::span<const KeyRow> keys_of_level();
[[nodiscard]] const KeyRow* row_named(std::span<const KeyRow> rows, std::string_view name);
[[nodiscard]] std::string_view name_of_key(PlanKey key);
[[nodiscard]] bool is_list(PlanKey key);
/// What one element of a list is called; "plan" where the key is no list.
[[nodiscard]] std::string_view noun_of(PlanKey list);

RUNNEL_NAMESPACE_END
