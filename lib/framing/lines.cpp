#include "framing/lines.hpp"

#include <numbers>

RUNNEL_NAMESPACE_BEGIN

Point direction_at(double degrees) {
    const double turn = std::remainder(degrees, 360.0);
    if (turn == 0) {
        return {1, 0};
    }
    if (turn == 90) {
        return {0, 1};
    }
    if (turn == -90) {
        return {0, -1};
    }
    if (std::abs(turn) == 180) {
        return {-1, 0};
    }
    const double angle = turn * (std::numbers::pi / 180);
    return {std::cos(angle), std::sin(angle)};
}

void draw_members(LevelDraft& draft) {
    draft.lines.reserve(draft.lists.members.size());
    for (std::uint32_t i = 0; i < draft.lists.members.size(); ++i) {
        const Member& member = *draft.lists.members[i].what;
        Line line;
        line.axis = {member.from, member.to};
        line.source = i;
        line.role = member.role;
        draft.lines.push_back(line);
    }
}

namespace {

/// How far around a line its neighbours are kept: an end may move by `snap`, so may the axis it is near, and
/// what is then within `snap` must have been found before.
constexpr double snaps_kept_around = 3;

/// The direction in which most of the level's members run: that of the field with the most joists or, without
/// fields, of the longest member.
Point main_direction(const LevelDraft& draft) {
    std::vector<std::size_t> joists(draft.lists.joist_fields.size(), 0);
    const Line* longest = nullptr;
    for (const Line& line : draft.lines) {
        if (line.field != none) {
            ++joists[line.field];
        } else if (!longest || line.axis.length > longest->axis.length) {
            longest = &line;
        }
    }
    const auto most = std::max_element(joists.begin(), joists.end());
    if (most != joists.end() && *most > 0) {
        const auto field = static_cast<std::size_t>(most - joists.begin());
        return direction_at(draft.lists.joist_fields[field].what->direction);
    }
    if (longest && longest->axis.length > 0) {
        return (1 / longest->axis.length) * (longest->axis.to - longest->axis.from);
    }
    return {1, 0};
}

std::vector<Axis> axes_of_elements(const LevelDraft& draft) {
    std::vector<Axis> axes;
    axes.reserve(draft.elements.count());
    for (const Line& line : draft.lines) {
        axes.push_back(line.axis);
    }
    for (const std::uint32_t wall : draft.level.walls) {
        axes.push_back(draft.wall_axis(wall));
    }
    for (const std::uint32_t column : draft.level.columns) {
        axes.emplace_back(draft.plan.columns[column].at, draft.plan.columns[column].at, 0);
    }
    return axes;
}

} // namespace

void find_surroundings(LevelDraft& draft) {
    draft.elements.lines = static_cast<std::uint32_t>(draft.lines.size());
    draft.elements.walls = static_cast<std::uint32_t>(draft.level.walls.size());
    draft.elements.columns = static_cast<std::uint32_t>(draft.level.columns.size());
    draft.surroundings = Surroundings(axes_of_elements(draft), main_direction(draft), draft.tolerance.noise);
    const double around = snaps_kept_around * draft.reach();
    std::vector<std::uint32_t> found;
    for (std::uint32_t i = 0; i < draft.lines.size(); ++i) {
        found.clear();
        draft.surroundings.find(draft.lines[i].axis.from, draft.lines[i].axis.to, around, found);
        for (const std::uint32_t element : found) {
            if (element != i) {
                draft.near.push(element);
            }
        }
        draft.near.end_group();
    }
}

void refuse_short_lines(LevelDraft& draft) {
    for (Line& line : draft.lines) {
        if (line.axis.length > draft.reach()) {
            continue;
        }
        line.usable = false;
        if (line.field != none) {
            continue;
        }
        const Listed<Member>& member = draft.lists.members[line.source];
        draft.problems.add(ProblemCode::zero_length, [&] {
            Problem problem = problem_at(
                ProblemCode::zero_length, member.origin, "members",
                "Member " + member.what->id + " is " + length_text(line.axis.length, draft.plan.units) +
                    " long: with points within snap (" + length_text(draft.tolerance.snap, draft.plan.units) +
                    ") taken as one, its ends are the same point.",
                "Check its ends, or set a smaller snap.", {member.what->id});
            problem.point = line.axis.from;
            return problem;
        });
    }
}

RUNNEL_NAMESPACE_END
