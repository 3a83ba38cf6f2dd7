#pragma once

#include <runnel/plan.hpp>

#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// An object of the plan as it stands on a level: its own, or one that `like` repeats. The origin points at
/// the text that wrote it, also where the plan was built in code.
template <class T>
struct Listed {
    const T* what = nullptr;
    Origin origin;
};

/// The lists of a level after `like`.
struct LevelLists {
    std::vector<Listed<Member>> members;
    std::vector<Listed<JoistField>> joist_fields;
    std::vector<Listed<Deck>> decks;
    std::vector<AreaLoad> area_loads;
    std::vector<LineLoad> line_loads;
    std::vector<PointLoad> point_loads;
};

/// The lists of all levels: what `like` repeats first, own objects of the same id in their place, other own
/// ones after them; own lists of loads instead of repeated ones. A loop of `like` (refused by check_plan)
/// ends the repeating.
[[nodiscard]] std::vector<LevelLists> expand_levels(const Plan& plan);

RUNNEL_NAMESPACE_END
