#include "geometry/basic.hpp"
#include "path/level_path.hpp"
#include "path/member_names.hpp"
#include "path/member_path.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Load columns in the order of the path; put into the order of members at the end.
struct ColumnsInPathOrder {
    std::vector<ReactionColumn> items;
    std::vector<std::size_t> begin; ///< by member
    std::vector<std::size_t> count;
};

void find_spans(LevelTakedown& level, const FramedLevel& framed, double snap) {
    level.spans.reserve(framed.members.size(), framed.bearings.items().size());
    for (std::uint32_t m = 0; m < framed.members.size(); ++m) {
        push_spans(framed.members[m], framed.bearings[m], snap, level.spans);
    }
}

/// Totals by bearing and case: sums over the columns in their order, compensated, since many may meet.
void add_up(std::span<const ReactionColumn> columns, std::span<const double> values, std::size_t bearings,
            std::size_t cases, std::span<double> totals) {
    for (std::size_t b = 0; b < bearings; ++b) {
        for (std::size_t k = 0; k < columns.size();) {
            const std::uint32_t load_case = columns[k].load_case;
            Sum sum;
            for (; k < columns.size() && columns[k].load_case == load_case; ++k) {
                sum.add(values[k * bearings + b]);
            }
            totals[b * cases + load_case] = sum.value();
        }
    }
}

void turn_moments_of_to_ends(const FramedMember& member, std::span<const Bearing> bearings, std::size_t cases,
                             std::span<double> moments) {
    for (std::size_t b = 0; b < bearings.size(); ++b) {
        if (holds_falling(member, bearings, b)) {
            for (double& moment : moments.subspan(b * cases, cases)) {
                moment = moment == 0 ? 0 : -moment;
            }
        }
    }
}

void keep(LevelTakedown& level, const FramedLevel& framed, std::uint32_t member, std::size_t cases,
          const MemberPath& worked, ColumnsInPathOrder& columns) {
    const std::span<const Bearing> bearings = framed.bearings[member];
    const std::size_t first = framed.bearings.first(member) * cases;
    const std::size_t size = bearings.size() * cases;
    add_up(worked.columns(), worked.reactions(), bearings.size(), cases,
           std::span<double>(level.reactions).subspan(first, size));
    if (!worked.moments().empty()) {
        const auto moments = std::span<double>(level.fixed_moments).subspan(first, size);
        add_up(worked.columns(), worked.moments(), bearings.size(), cases, moments);
        turn_moments_of_to_ends(framed.members[member], bearings, cases, moments);
    }
    level.column_start[member] = level.column_reactions.size();
    level.column_reactions.insert(level.column_reactions.end(), worked.reactions().begin(),
                                  worked.reactions().end());
    columns.begin[member] = columns.items.size();
    columns.count[member] = worked.columns().size();
    columns.items.insert(columns.items.end(), worked.columns().begin(), worked.columns().end());
}

Problem cannot_stand(const Framing& framing, std::uint32_t level, std::uint32_t index) {
    const FramedLevel& framed = framing.levels[level];
    const FramedMember& member = framed.members[index];
    const std::string name = MemberNames(framing).of(level, index);
    const auto counted = [](std::size_t count, const char* what) {
        return std::to_string(count) + ' ' + what + (count == 1 ? "" : "s");
    };
    Problem problem = problem_at(
        ProblemCode::mechanism, member.origin, member.from_field ? "joist_fields" : "members",
        "Member " + name + " moves freely: it has " + counted(framed.bearings[index].size(), "bearing") +
            " and " + counted(member.hinges.size(), "hinge") + '.',
        "Take out a hinge, or add a bearing.", {name});
    problem.point = member.from;
    return problem;
}

void order_columns(LevelTakedown& level, const ColumnsInPathOrder& columns) {
    level.columns.reserve(columns.begin.size(), columns.items.size());
    const std::span<const ReactionColumn> items = columns.items;
    for (std::size_t m = 0; m < columns.begin.size(); ++m) {
        level.columns.push_group(items.subspan(columns.begin[m], columns.count[m]));
    }
}

} // namespace

void pass_members(Takedown& takedown, std::uint32_t level_index, const LevelPath& path) {
    const FramedLevel& framed = takedown.framing.levels[level_index];
    LevelTakedown& level = takedown.levels[level_index];
    const std::size_t cases = takedown.plan.cases.size();
    const std::size_t members = framed.members.size();
    const std::span<const Bearing> bearings = framed.bearings.items();
    const bool any_fixed =
        std::any_of(bearings.begin(), bearings.end(), [](const Bearing& bearing) { return bearing.fixed; });

    find_spans(level, framed, takedown.plan.settings.snap);
    level.reactions.assign(bearings.size() * cases, 0.0);
    level.fixed_moments.assign(any_fixed ? bearings.size() * cases : 0, 0.0);
    level.column_start.assign(members, 0);
    level.column_reactions.reserve(level.lines.items().size() * 2);
    ColumnsInPathOrder columns;
    columns.items.reserve(level.lines.items().size());
    columns.begin.assign(members, 0);
    columns.count.assign(members, 0);

    MemberPath worked(noise_of(takedown.framing.largest_coordinate), takedown.plan.settings.snap);
    std::vector<CarrierPoint> points;
    for (const std::uint32_t m : framed.order.items()) {
        points.clear();
        gather_points(level, framed, path, m, cases, points);
        const bool stands =
            worked.work_out(framed.members[m], framed.bearings[m], std::as_const(level.spans)[m],
                            std::as_const(level.lines)[m], points);
        if (stands) {
            keep(level, framed, m, cases, worked, columns);
        } else {
            takedown.problems.push_back(cannot_stand(takedown.framing, level_index, m));
        }
    }
    order_columns(level, columns);
}

RUNNEL_NAMESPACE_END
