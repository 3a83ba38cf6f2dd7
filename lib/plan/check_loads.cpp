#include "plan/check_levels.hpp"

#include "geometry/basic.hpp"
#include "plan/problems.hpp"
#include "plan/words.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

void check_on(CheckContext& context, const LevelIndex& index, std::size_t level, const std::string& on,
              const Subject& subject) {
    if (on.empty() || context.is_unread(on)) {
        return;
    }
    const std::optional<std::string_view> id = index.local_id(level, on);
    const Wall* wall = id ? context.walls.find(*id) : nullptr;
    if (wall != nullptr && context.bears_at(*wall, context.plan.levels[level].elevation)) {
        return;
    }
    if ((id && (index.member(level, *id) != nullptr || index.is_joist(level, *id))) ||
        context.doubts.supports) {
        return;
    }
    const bool is_column = id && context.columns.find(*id) != nullptr;
    context.refuse_reference(on, "member or wall on this level", subject, "/on",
                             is_column ? "A load on a column needs no `on`: it stands where the column is."
                                       : "");
}

void check_plane(CheckContext& context, const PlaneOfLoad& plane, const Subject& subject) {
    bool good = true;
    for (std::size_t i = 0; i < plane.at.size(); ++i) {
        good = context.good_point(plane.at[i], subject, "/q/at/" + std::to_string(i)) && good;
        context.good_number(plane.values[i], subject, "/q/values/" + std::to_string(i), dimension::area_load);
    }
    if (!good) {
        return;
    }
    const double longest = std::max({distance(plane.at[0], plane.at[1]), distance(plane.at[1], plane.at[2]),
                                     distance(plane.at[2], plane.at[0])});
    const double twice_area = std::abs(cross(plane.at[1] - plane.at[0], plane.at[2] - plane.at[0]));
    if (twice_area <= context.snap * longest) {
        context
            .report(subject, ProblemCode::plane_undefined, "/q/at",
                    "The three points of " + subject.name() + " lie on one line (within `snap`, " +
                        context.lengths(context.snap) + ") and give no plane.")
            .point = plane.at[0];
    }
}

void check_case(CheckContext& context, const std::string& id, const Subject& subject) {
    (void)context.refer(id, context.cases, "case", context.doubts.cases, subject, "/case");
}

void check_area_load(CheckContext& context, const LevelIndex& index, std::size_t level, const AreaLoad& load,
                     const Subject& subject) {
    check_case(context, load.case_id, subject);
    if (load.plane) {
        check_plane(context, *load.plane, subject);
    } else {
        context.good_number(load.q, subject, "/q", dimension::area_load);
    }
    const Ring outline = load.outline.empty() ? Ring{} : context.good_ring(load.outline, subject, "/outline");
    if (load.outline.empty() && !load.openings.empty() && !context.from_text) { // else told when it was read
        context.report(subject, ProblemCode::conflicting_keys, "/openings",
                       "`openings` of " + subject.name() + " needs an `outline`, in which it leaves holes.");
    }
    check_openings(context, load.openings, outline, subject, ProblemCode::opening_outside_zone);
    for (std::size_t k = 0; k < load.decks.size(); ++k) {
        const std::string& name = load.decks[k];
        const std::optional<std::string_view> id = index.local_id(level, name);
        if (!context.is_unread(name) && (!id || index.deck(level, *id) == nullptr)) {
            context.refuse_reference(name, "deck on this level", subject, "/decks/" + std::to_string(k));
        }
    }
}

/// A load of the same intensity all along is read from `w`.
void check_line_load(CheckContext& context, const LevelIndex& index, std::size_t level, const LineLoad& load,
                     const Subject& subject) {
    check_case(context, load.case_id, subject);
    const bool from = context.good_number(load.w_from, subject, load.w_from == load.w_to ? "/w" : "/w_from",
                                          dimension::line_load);
    if (from && load.w_from != load.w_to) {
        context.good_number(load.w_to, subject, "/w_to", dimension::line_load);
    }
    context.good_line(load.from, load.to, subject);
    check_on(context, index, level, load.on, subject);
}

/// The levels on which a member of that id stands, repeated ones included; at most two, which is ambiguous.
std::vector<std::size_t> levels_with(const CheckContext& context, const LevelIndex& index,
                                     std::string_view id) {
    std::vector<std::size_t> found;
    for (std::size_t l = 0; l < context.plan.levels.size() && found.size() < 2; ++l) {
        if (index.member(l, id) != nullptr || index.is_joist(l, id)) {
            found.push_back(l);
        }
    }
    return found;
}

} // namespace

void check_loads(CheckContext& context, const LevelIndex& index, std::size_t level) {
    const Level& here = context.plan.levels[level];
    const auto number = static_cast<std::uint32_t>(level);
    for (std::size_t i = 0; i < here.area_loads.size(); ++i) {
        check_area_load(context, index, level, here.area_loads[i],
                        CheckContext::subject(here.area_loads[i], "area_loads", "area load", i, number));
    }
    for (std::size_t i = 0; i < here.line_loads.size(); ++i) {
        check_line_load(context, index, level, here.line_loads[i],
                        CheckContext::subject(here.line_loads[i], "line_loads", "line load", i, number));
    }
    for (std::size_t i = 0; i < here.point_loads.size(); ++i) {
        const PointLoad& load = here.point_loads[i];
        const Subject subject = CheckContext::subject(load, "point_loads", "point load", i, number);
        check_case(context, load.case_id, subject);
        context.good_number(load.p, subject, "/p", dimension::force);
        context.good_point(load.at, subject, "/at");
        check_on(context, index, level, load.on, subject);
    }
}

void check_later_references(CheckContext& context, const LevelIndex& index) {
    for (const LaterReference& reference : context.doubts.references) {
        Problem problem;
        problem.code = ProblemCode::unknown_id;
        problem.pointer = reference.pointer;
        problem.ids = {reference.id};
        const std::string lead = shown(reference.id) + ", cited by " + reference.owner + ", ";
        const std::size_t slash = reference.id.find('/');
        if (reference.to == LaterReference::To::load_case) {
            if (context.cases.find(reference.id) != nullptr || context.doubts.cases) {
                continue;
            }
            problem.message = lead + "is no case of the plan.";
            problem.hint = "A case's id, or `kind:` and a kind.";
        } else if (reference.to == LaterReference::To::column) {
            if (context.columns.find(reference.id) != nullptr || context.doubts.supports) {
                continue;
            }
            problem.message = lead + "is no column of the plan.";
        } else if (slash != std::string::npos) {
            const std::string_view id = std::string_view(reference.id).substr(slash + 1);
            const Level* level = context.levels.find(std::string_view(reference.id).substr(0, slash));
            if (level != nullptr && (index.member(context.levels.index_of(level), id) != nullptr ||
                                     index.is_joist(context.levels.index_of(level), id))) {
                continue;
            }
            problem.message = lead + "is no member of the plan.";
        } else {
            const std::vector<std::size_t> found = levels_with(context, index, reference.id);
            if (found.size() == 1) {
                continue;
            }
            problem.message = lead + "is no member of the plan.";
            if (found.size() > 1) {
                const std::string& first = context.plan.levels[found[0]].id;
                problem.code = ProblemCode::ambiguous_id;
                problem.message = lead + "stands on several levels: " + first + ", " +
                                  context.plan.levels[found[1]].id + '.';
                problem.hint = "Write " + first + '/' + reference.id + '.';
            }
        }
        problem.severity = kind_of(problem.code).severity;
        context.log.add_at(reference.at, std::move(problem));
    }
}

RUNNEL_NAMESPACE_END
