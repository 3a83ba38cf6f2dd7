#include "framing/lifts.hpp"

#include "geometry/basic.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <limits>
#include <numeric>
#include <string>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Height {
    double foot = 0;
    double head = -std::numeric_limits<double>::infinity(); ///< of a column without a top: nowhere
};

Height height_of(const Plan& plan, const Framing& framing, std::size_t column) {
    const std::uint32_t base = framing.column_base[column];
    const std::uint32_t top = framing.column_top[column];
    if (top == none) {
        return {};
    }
    return {base == none ? plan.settings.ground_elevation : plan.levels[base].elevation,
            plan.levels[top].elevation};
}

Problem twins(const Plan& plan, const Column& first, const Column& second) {
    Problem problem = problem_at(
        ProblemCode::columns_coincide, second.origin, "columns",
        "Columns " + first.id + " and " + second.id + " stand " +
            length_text(distance(first.at, second.at), plan.units) + " apart at " +
            point_text(second.at, plan.units) + " between the same levels: within snap (" +
            length_text(plan.settings.snap, plan.units) + ") they are one, and only one could be loaded.",
        "Keep one, draw them apart, or let the second begin where the first ends.", {first.id, second.id});
    problem.point = second.at;
    return problem;
}

} // namespace

void refuse_twin_columns(const Plan& plan, const Framing& framing, ProblemList& problems) {
    std::vector<std::size_t> order(plan.columns.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    std::sort(order.begin(), order.end(), [&](std::size_t l, std::size_t r) {
        const Point a = plan.columns[l].at;
        const Point b = plan.columns[r].at;
        return a.x != b.x ? a.x < b.x : a.y != b.y ? a.y < b.y : l < r;
    });
    std::vector<std::pair<std::size_t, std::size_t>> pairs;
    for (std::size_t i = 0; i < order.size(); ++i) {
        const Height own = height_of(plan, framing, order[i]);
        const Point at = plan.columns[order[i]].at;
        for (std::size_t k = i + 1; k < order.size(); ++k) {
            const Point other_at = plan.columns[order[k]].at;
            if (other_at.x - at.x > plan.settings.snap) {
                break;
            }
            const Height other = height_of(plan, framing, order[k]);
            if (distance(at, other_at) <= plan.settings.snap &&
                std::max(own.foot, other.foot) < std::min(own.head, other.head)) {
                pairs.emplace_back(std::min(order[i], order[k]), std::max(order[i], order[k]));
            }
        }
    }
    std::sort(pairs.begin(), pairs.end()); // in the order of the plan
    for (const auto& [first, second] : pairs) {
        const Column& a = plan.columns[first];
        const Column& b = plan.columns[second];
        problems.add(ProblemCode::columns_coincide, [&plan, &a, &b] { return twins(plan, a, b); });
    }
}

RUNNEL_NAMESPACE_END
