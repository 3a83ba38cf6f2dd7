#include "report/some_cases.hpp"

#include "geometry/basic.hpp"
#include "path/uplift.hpp"

#include <algorithm>
#include <span>

RUNNEL_NAMESPACE_BEGIN

namespace {

bool is_permanent(CaseKind kind) {
    return kind == CaseKind::dead || kind == CaseKind::superimposed_dead;
}

/// Permanent cases and the negative ones among the others.
double least(std::span<const double> reactions, const std::vector<LoadCase>& cases) {
    Sum sum;
    for (std::size_t c = 0; c < reactions.size(); ++c) {
        if (is_permanent(cases[c].kind) || reactions[c] < 0) {
            sum.add(reactions[c]);
        }
    }
    return sum.value();
}

} // namespace

std::vector<Uplift> lifts_with_some_cases(const Takedown& takedown) {
    std::vector<Uplift> lifts = lifts_by(takedown, [&takedown](std::span<const double> reactions) {
        return least(reactions, takedown.plan.cases);
    });
    std::stable_sort(lifts.begin(), lifts.end(),
                     [](const Uplift& a, const Uplift& b) { return a.value < b.value; });
    return lifts;
}

RUNNEL_NAMESPACE_END
