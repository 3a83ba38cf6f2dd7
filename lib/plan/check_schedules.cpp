#include "plan/check_context.hpp"

#include <runnel/plan.hpp>

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

namespace {

template <class Item>
void check_ids(CheckContext& context, IdIndex<Item>& index, const std::vector<Item>& items,
               std::string_view list, std::string_view noun) {
    for (std::size_t i = 0; i < items.size(); ++i) {
        const Subject subject = CheckContext::subject(items[i], list, noun, i);
        if (context.good_id(subject)) {
            if (const Item* first = index.insert(i)) {
                context.taken(subject, first->origin, noun);
            }
        }
    }
}

void check_section(CheckContext& context, const Section& section, const Subject& subject) {
    context.good_number(section.E, subject, "/E", dimension::stress, Range::positive);
    context.good_number(section.I, subject, "/I", dimension::second_moment, Range::positive);
    context.good_number(section.A, subject, "/A", dimension::area, Range::positive);
    context.good_number(section.depth, subject, "/depth", dimension::length, Range::positive);
    context.good_number(section.self_weight, subject, "/self_weight", dimension::line_load,
                        Range::not_negative);
    context.good_number(section.density, subject, "/density", dimension::density, Range::not_negative);
}

void check_layer(CheckContext& context, const BuildLayer& layer, const Subject& subject,
                 const std::string& inside) {
    context.good_number(layer.thickness, subject, inside + "/thickness", dimension::length,
                        Range::not_negative);
    context.good_number(layer.density, subject, inside + "/density", dimension::density, Range::not_negative);
    context.good_number(layer.q, subject, inside + "/q", dimension::area_load, Range::not_negative);
    const std::string name = "A layer of " + subject.name();
    if (layer.q && (layer.thickness || layer.density)) {
        context.report(subject, ProblemCode::conflicting_keys, inside + "/q",
                       name + " has `q` beside `thickness` or `density`; they exclude each other.",
                       "Either `q`, or `thickness` and `density`.");
    } else if (!layer.q && layer.thickness.has_value() != layer.density.has_value()) {
        context.report(
            subject, ProblemCode::conflicting_keys, inside + (layer.thickness ? "/thickness" : "/density"),
            name + " has `thickness` without `density` or the other way round; they need each other.",
            "Either `q`, or `thickness` and `density`.");
    } else if (!layer.q && !layer.thickness) {
        context.report(subject, ProblemCode::missing_key, inside, name + " says nothing of its weight.",
                       "Either `q`, or `thickness` and `density`.");
    }
}

template <class Support>
void check_base_and_top(CheckContext& context, const Support& support, const Subject& subject) {
    const auto refer = [&](std::string_view level, std::string_view inside) {
        if (context.levels.find(level) == nullptr && !context.is_unread(level) && !context.doubts.levels) {
            context.refuse_reference(level, "level", subject, inside,
                                     level == "ground" ? "`top` is the id of a level." : "");
        }
    };
    if (support.base != "ground") {
        refer(support.base, "/base");
    }
    refer(support.top, "/top");
    const std::optional<double> base = context.elevation_of(support.base);
    const std::optional<double> top =
        support.top == "ground" ? std::nullopt : context.elevation_of(support.top);
    if (base && top && *base >= *top) {
        context.report(subject, ProblemCode::base_not_below_top, "",
                       subject.name() + " has its base at " + context.lengths(*base) + " (" + support.base +
                           ") and its top at " + context.lengths(*top) + " (" + support.top +
                           "); the base must be the lower.");
    }
}

} // namespace

void check_schedules(CheckContext& context) {
    const Plan& plan = context.plan;
    check_ids(context, context.cases, plan.cases, "cases", "case");
    check_ids(context, context.sections, plan.sections, "sections", "section");
    check_ids(context, context.builds, plan.builds, "builds", "build");
    for (std::size_t i = 0; i < plan.sections.size(); ++i) {
        check_section(context, plan.sections[i],
                      CheckContext::subject(plan.sections[i], "sections", "section", i));
    }
    for (std::size_t i = 0; i < plan.builds.size(); ++i) {
        const Subject subject = CheckContext::subject(plan.builds[i], "builds", "build", i);
        for (std::size_t k = 0; k < plan.builds[i].layers.size(); ++k) {
            check_layer(context, plan.builds[i].layers[k], subject, "/layers/" + std::to_string(k));
        }
    }
    IdIndex<GridLine> grid(plan.grid);
    check_ids(context, grid, plan.grid, "grid", "grid line");
    for (std::size_t i = 0; i < plan.grid.size(); ++i) {
        context.good_line(plan.grid[i].from, plan.grid[i].to,
                          CheckContext::subject(plan.grid[i], "grid", "grid line", i));
    }
}

void check_settings(CheckContext& context) {
    const Settings& settings = context.plan.settings;
    const Subject subject{{}, "", "settings", {}};
    constexpr double least_snap = 1e-9; // m: a nanometre is no intent any more
    constexpr double most_snap = 1;     // m: more would merge what are two members
    if (context.good_number(settings.snap, subject, "/settings/snap", dimension::length, Range::positive) &&
        (settings.snap < least_snap || settings.snap > most_snap)) {
        context.report(subject, ProblemCode::out_of_range, "/settings/snap",
                       "`snap` is " + context.lengths(settings.snap) + "; it must lie between " +
                           context.lengths(least_snap) + " and " + context.lengths(most_snap) + '.');
    }
    context.good_number(settings.ground_elevation, subject, "/settings/ground_elevation", dimension::length);
    if (!settings.self_weight_case.empty() && context.cases.find(settings.self_weight_case) == nullptr &&
        !context.is_unread(settings.self_weight_case) && !context.doubts.cases) {
        Problem& problem = context.report(subject, ProblemCode::unknown_id, "/settings/self_weight_case",
                                          "`self_weight_case` names " + settings.self_weight_case +
                                              ", and there is no such case.");
        problem.ids.push_back(settings.self_weight_case);
    }
}

void check_supports(CheckContext& context) {
    const Plan& plan = context.plan;
    check_ids(context, context.columns, plan.columns, "columns", "column");
    check_ids(context, context.walls, plan.walls, "walls", "wall");
    for (std::size_t i = 0; i < plan.columns.size(); ++i) {
        const Column& column = plan.columns[i];
        const Subject subject = CheckContext::subject(column, "columns", "column", i);
        context.good_point(column.at, subject, "/at");
        check_base_and_top(context, column, subject);
        if (!column.section.empty()) {
            const Section* section = context.refer(column.section, context.sections, "section",
                                                   context.doubts.sections, subject, "/section");
            if (!column.self_weight) {
                context.use_section(section);
            }
        }
        context.good_number(column.E, subject, "/E", dimension::stress, Range::positive);
        context.good_number(column.I, subject, "/I", dimension::second_moment, Range::positive);
        context.good_number(column.A, subject, "/A", dimension::area, Range::positive);
        context.good_number(column.self_weight, subject, "/self_weight", dimension::line_load,
                            Range::not_negative);
        context.uses_own_weight = context.uses_own_weight || column.self_weight.value_or(0) > 0;
    }
    for (std::size_t i = 0; i < plan.walls.size(); ++i) {
        const Wall& wall = plan.walls[i];
        const Subject subject = CheckContext::subject(wall, "walls", "wall", i);
        if (const Column* column = context.columns.find(wall.id)) {
            context.taken(subject, column->origin, "column");
        }
        context.good_line(wall.from, wall.to, subject);
        check_base_and_top(context, wall, subject);
        context.good_number(wall.self_weight, subject, "/self_weight", dimension::area_load,
                            Range::not_negative);
        context.uses_own_weight = context.uses_own_weight || wall.self_weight.value_or(0) > 0;
    }
}

void check_own_weight(CheckContext& context) {
    const Plan& plan = context.plan;
    const bool has_dead = std::any_of(plan.cases.begin(), plan.cases.end(),
                                      [](const LoadCase& c) { return c.kind == CaseKind::dead; });
    if (context.uses_own_weight && !has_dead && plan.settings.self_weight_case.empty() &&
        !context.doubts.case_kinds) {
        context.report({{}, "", "plan", {}}, ProblemCode::no_dead_case, "/cases",
                       "Members, decks, columns or walls have weight of their own, and no case of kind dead "
                       "takes it.",
                       "Add a case of kind dead, or name a case in `settings` as `self_weight_case`.");
    }
}

RUNNEL_NAMESPACE_END
