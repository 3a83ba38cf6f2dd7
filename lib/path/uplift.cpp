#include "path/uplift.hpp"

#include <cmath>
#include <limits>

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

void add_bearings(const Takedown& takedown, std::uint32_t level, const CaseMeasure& measure,
                  std::vector<Uplift>& lifts) {
    const Grouped<Bearing>& bearings = takedown.framing.levels[level].bearings;
    const std::span<const double> reactions = takedown.levels[level].reactions;
    const std::size_t cases = takedown.plan.cases.size();
    for (std::uint32_t m = 0; m < bearings.size(); ++m) {
        const auto own = reactions.subspan(bearings.first(m) * cases, bearings[m].size() * cases);
        const double noise = rounding * magnitude(own);
        for (std::uint32_t b = 0; b < bearings[m].size(); ++b) {
            const double value = measure(own.subspan(b * cases, cases));
            if (value < -noise) {
                lifts.push_back({level, m, b, bearings[m][b].on, value, {}});
            }
        }
    }
}

/// What a column or wall brings to its foot, by case.
std::span<const double> total_at_foot(const Takedown& takedown, Carrier upper) {
    if (upper.kind == CarrierKind::column) {
        const std::vector<Lift>& lifts = takedown.columns[upper.index].lifts;
        return lifts.empty() ? std::span<const double>{} : std::span<const double>(lifts.back().total);
    }
    const std::vector<WallLift>& lifts = takedown.walls[upper.index].lifts;
    return lifts.empty() ? std::span<const double>{} : std::span<const double>(lifts.back().total);
}

void add_feet(const Takedown& takedown, std::uint32_t level, double noise, const CaseMeasure& measure,
              std::vector<Uplift>& lifts) {
    Carrier last;
    for (const Foot& foot : takedown.framing.levels[level].feet) {
        if (foot.upper == last) {
            continue;
        }
        last = foot.upper;
        const double value = measure(total_at_foot(takedown, foot.upper));
        if (value < -noise) {
            lifts.push_back({level, none, none, foot.lower, value, foot.upper});
        }
    }
}

} // namespace

std::vector<Uplift> lifts_by(const Takedown& takedown, const CaseMeasure& measure) {
    // What the ground carries in all measures the rounding in each column: one that carries nothing has none
    // of its own.
    double all = 0;
    for (const Foundation& foundation : takedown.foundations) {
        all += magnitude(foundation.reactions);
    }
    const double noise = rounding * all;
    std::vector<Uplift> lifts;
    for (std::uint32_t l = 0; l < takedown.levels.size(); ++l) {
        add_bearings(takedown, l, measure, lifts);
        add_feet(takedown, l, noise, measure, lifts);
    }
    for (const Foundation& foundation : takedown.foundations) {
        const double value = measure(foundation.reactions);
        if (value < -noise) {
            lifts.push_back({none, none, none, foundation.under, value, {}});
        }
    }
    return lifts;
}

RUNNEL_NAMESPACE_END
