#include "plan/plan_keys.hpp"

#include <algorithm>
#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::array plan_rows{KeyRow{"runnel", PlanKey::runnel, false},
                               KeyRow{"title", PlanKey::title, false},
                               KeyRow{"units", PlanKey::units, false},
                               KeyRow{"settings", PlanKey::settings, false},
                               KeyRow{"cases", PlanKey::cases, true},
                               KeyRow{"sections", PlanKey::sections, true},
                               KeyRow{"builds", PlanKey::builds, true},
                               KeyRow{"grid", PlanKey::grid, true},
                               KeyRow{"columns", PlanKey::columns, true},
                               KeyRow{"walls", PlanKey::walls, true},
                               KeyRow{"levels", PlanKey::levels, true},
                               KeyRow{"frames", PlanKey::frames, true},
                               KeyRow{"combinations", PlanKey::combinations, true},
                               KeyRow{"reductions", PlanKey::reductions, false}};
constexpr std::array level_rows{KeyRow{"id", PlanKey::id, false},
                                KeyRow{"elevation", PlanKey::elevation, false},
                                KeyRow{"like", PlanKey::like, false},
                                KeyRow{"moving_point", PlanKey::moving_point, false},
                                KeyRow{"members", PlanKey::members, true},
                                KeyRow{"joist_fields", PlanKey::joist_fields, true},
                                KeyRow{"decks", PlanKey::decks, true},
                                KeyRow{"area_loads", PlanKey::area_loads, true},
                                KeyRow{"line_loads", PlanKey::line_loads, true},
                                KeyRow{"point_loads", PlanKey::point_loads, true}};

const KeyRow* row_of(PlanKey key) {
    for (const std::span<const KeyRow> rows : {keys_of_plan(), keys_of_level()}) {
        for (const KeyRow& row : rows) {
            if (row.key == key) {
                return &row;
            }
        }
    }
    return nullptr;
}

} // namespace

std::span<const KeyRow> keys_of_plan() {
    return plan_rows;
}
std::span<const KeyRow> keys_of_level() {
    return level_rows;
}

const KeyRow* row_named(std::span<const KeyRow> rows, std::string_view name) {
    const auto it =
        std::find_if(rows.begin(), rows.end(), [&](const KeyRow& row) { return row.name == name; });
    return it == rows.end() ? nullptr : &*it;
}

std::string_view name_of_key(PlanKey key) {
    const KeyRow* row = row_of(key);
    return row == nullptr ? std::string_view{} : row->name;
}

bool is_list(PlanKey key) {
    const KeyRow* row = row_of(key);
    return row != nullptr && row->is_list;
}

std::string_view noun_of(PlanKey list) {
    switch (list) {
    case PlanKey::cases:
        return "case";
    case PlanKey::sections:
        return "section";
    case PlanKey::builds:
        return "build";
    case PlanKey::grid:
        return "grid line";
    case PlanKey::columns:
        return "column";
    case PlanKey::walls:
        return "wall";
    case PlanKey::levels:
        return "level";
    case PlanKey::frames:
        return "frame";
    case PlanKey::combinations:
        return "combination";
    case PlanKey::members:
        return "member";
    case PlanKey::joist_fields:
        return "joist field";
    case PlanKey::decks:
        return "deck";
    case PlanKey::area_loads:
        return "area load";
    case PlanKey::line_loads:
        return "line load";
    case PlanKey::point_loads:
        return "point load";
    default:
        return "plan";
    }
}

RUNNEL_NAMESPACE_END
