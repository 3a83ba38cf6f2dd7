#include "report/some_cases.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <span>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Rounding of a reaction beside the loads that made it, after as many sums as a building has.
constexpr double rounding = 4096 * std::numeric_limits<double>::epsilon();

double magnitude(std::span<const double> values) {
    double sum = 0;
    for (const double value : values) {
        sum += std::abs(value);
    }
    return sum;
}

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

void add_bearings(const Takedown& takedown, std::uint32_t level, std::vector<Uplift>& lifts) {
    const Grouped<Bearing>& bearings = takedown.framing.levels[level].bearings;
    const std::span<const double> reactions = takedown.levels[level].reactions;
    const std::size_t cases = takedown.plan.cases.size();
    const std::size_t members = takedown.framing.levels[level].members.size();
    for (std::uint32_t m = 0; m < members; ++m) {
        const auto own = reactions.subspan(bearings.first(m) * cases, bearings[m].size() * cases);
        const double noise = rounding * magnitude(own);
        for (std::uint32_t b = 0; b < bearings[m].size(); ++b) {
            const double value = least(own.subspan(b * cases, cases), takedown.plan.cases);
            if (value < -noise) {
                lifts.push_back({level, m, b, bearings[m][b].on, value, {}});
            }
        }
    }
}

} // namespace

std::vector<Uplift> lifts_with_some_cases(const Takedown& takedown) {
    std::vector<Uplift> lifts;
    for (std::uint32_t l = 0; l < takedown.levels.size(); ++l) {
        add_bearings(takedown, l, lifts);
    }
    double all = 0; // what the ground carries in all measures the rounding under each of its parts
    for (const Foundation& foundation : takedown.foundations) {
        all += magnitude(foundation.reactions);
    }
    for (const Foundation& foundation : takedown.foundations) {
        const double value = least(foundation.reactions, takedown.plan.cases);
        if (value < -rounding * all) {
            lifts.push_back({none, none, none, foundation.under, value, {}});
        }
    }
    std::stable_sort(lifts.begin(), lifts.end(),
                     [](const Uplift& a, const Uplift& b) { return a.value < b.value; });
    return lifts;
}

RUNNEL_NAMESPACE_END
