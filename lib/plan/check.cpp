#include "plan/check.hpp"

#include "plan/check_context.hpp"

#include <runnel/plan.hpp>

#include <cmath>

RUNNEL_NAMESPACE_BEGIN

void check_values(const Plan& plan, const Limits& limits, const std::optional<Doubts>& doubts,
                  ProblemLog& log) {
    CheckContext context(plan, limits, doubts, log);
    check_schedules(context);
    check_settings(context);
    check_level_list(context);
    check_supports(context);
    check_levels(context);
    check_amounts(context);
    check_own_weight(context);
}

std::vector<Problem> check_plan(const Plan& plan, const Limits& limits) {
    ProblemLog log(limits.problems);
    check_values(plan, limits, std::nullopt, log);
    return log.take();
}

namespace {

void mend(double& value) {
    value = std::isnan(value) ? 0 : value;
}
void mend(std::optional<double>& value) {
    value = value && std::isnan(*value) ? std::nullopt : value;
}
void mend(Point& p) {
    mend(p.x);
    mend(p.y);
}
void mend(std::string& id) {
    if (id == unread::id) {
        id.clear();
    }
}
template <class... Values>
void mend_all(Values&... values) {
    (mend(values), ...);
}

void mend(Level& level) {
    mend_all(level.id, level.elevation, level.like);
    for (Member& m : level.members) {
        mend_all(m.id, m.from, m.to, m.section);
        for (double& hinge : m.hinges) {
            mend(hinge);
        }
        for (std::string& id : m.bears_on) {
            mend(id);
        }
    }
    for (JoistField& f : level.joist_fields) {
        mend_all(f.id, f.direction, f.spacing, f.offset, f.section);
    }
    for (Deck& d : level.decks) {
        mend_all(d.id, d.direction, d.q, d.build);
    }
    for (AreaLoad& a : level.area_loads) {
        mend_all(a.case_id, a.q, a.allowance);
        for (std::string& id : a.decks) {
            mend(id);
        }
    }
    for (LineLoad& l : level.line_loads) {
        mend_all(l.case_id, l.w_from, l.w_to, l.from, l.to, l.on);
    }
    for (PointLoad& p : level.point_loads) {
        mend_all(p.case_id, p.p, p.at, p.on);
    }
}

} // namespace

void replace_unread(Plan& plan) {
    mend_all(plan.title, plan.settings.snap, plan.settings.ground_elevation, plan.settings.self_weight_case);
    for (LoadCase& c : plan.cases) {
        mend_all(c.id, c.category, c.one_of);
    }
    for (Section& s : plan.sections) {
        mend_all(s.id, s.E, s.I, s.A, s.depth, s.self_weight, s.density);
    }
    for (Build& b : plan.builds) {
        mend(b.id);
        for (BuildLayer& layer : b.layers) {
            mend_all(layer.name, layer.thickness, layer.density, layer.q);
        }
    }
    for (GridLine& g : plan.grid) {
        mend_all(g.id, g.from, g.to);
    }
    for (Column& c : plan.columns) {
        mend_all(c.id, c.at, c.base, c.top, c.section, c.E, c.I, c.A, c.self_weight);
    }
    for (Wall& w : plan.walls) {
        mend_all(w.id, w.from, w.to, w.base, w.top, w.self_weight);
    }
    for (Level& level : plan.levels) {
        mend(level);
    }
}

RUNNEL_NAMESPACE_END
