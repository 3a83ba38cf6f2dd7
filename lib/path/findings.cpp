#include "path/findings.hpp"

#include "deck/gathered_area.hpp"
#include "geometry/basic.hpp"
#include "path/member_names.hpp"
#include "path/member_path.hpp"
#include "path/places.hpp"
#include "path/uplift.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Ids that a note lists; the rest is counted.
constexpr std::size_t ids_listed = 20;

const char* list_of(const FramedMember& member) {
    return member.from_field ? "joist_fields" : "members";
}

double sum_of(std::span<const double> values) {
    Sum sum;
    for (const double value : values) {
        sum.add(value);
    }
    return sum.value();
}

double magnitude_of_all(std::span<const double> values) {
    double sum = 0;
    for (const double value : values) {
        sum += std::abs(value);
    }
    return sum;
}

std::string moment_text(double moment, Units units) {
    return text_of(moment / si_per_unit(units, dimension::moment)) + ' ' +
           unit_text(units, dimension::moment);
}

} // namespace

void gather_foundations(Takedown& takedown) {
    for (std::uint32_t c = 0; c < takedown.columns.size(); ++c) {
        if (takedown.framing.column_base[c] == none && !takedown.columns[c].lifts.empty()) {
            takedown.foundations.push_back(
                {{CarrierKind::column, c}, takedown.columns[c].lifts.back().total});
        }
    }
    for (std::uint32_t w = 0; w < takedown.walls.size(); ++w) {
        if (takedown.framing.wall_base[w] == none && !takedown.walls[w].lifts.empty()) {
            takedown.foundations.push_back({{CarrierKind::wall, w}, takedown.walls[w].lifts.back().total});
        }
    }
}

void find_uplift(Takedown& takedown) {
    takedown.uplift = lifts_by(takedown, sum_of);
}

void warn_of_fixed_moments(Takedown& takedown) {
    const std::size_t cases = takedown.plan.cases.size();
    const Units units = takedown.plan.units;
    MemberNames names(takedown.framing);
    for (std::size_t l = 0; l < takedown.levels.size(); ++l) {
        const FramedLevel& framed = takedown.framing.levels[l];
        const std::span<const double> moments = takedown.levels[l].fixed_moments;
        for (std::uint32_t m = 0; !moments.empty() && m < framed.members.size(); ++m) {
            const FramedMember& member = framed.members[m];
            const std::span<const Bearing> bearings = framed.bearings[m];
            for (std::size_t b = 0; b < bearings.size(); ++b) {
                const auto own = moments.subspan((framed.bearings.first(m) + b) * cases, cases);
                if (!bearings[b].fixed || magnitude_of_all(own) == 0) {
                    continue;
                }
                const std::string name = names.of(l, m);
                const std::string on = carrier_id(takedown.plan, framed, bearings[b].on);
                Problem problem = problem_at(
                    ProblemCode::moment_not_carried_down, member.origin, list_of(member),
                    "The moment of " + moment_text(sum_of(own), units) + " (all cases together) that holds " +
                        name + " at its built-in end on " + on +
                        " leaves the load path there: it is not carried further down.",
                    "Check what carries it: on a member it is torsion, on a column or wall bending.",
                    {name, on});
                problem.point = bearings[b].at;
                takedown.problems.push_back(std::move(problem));
            }
        }
    }
}

void note_assumed_stiffness(Takedown& takedown) {
    const Plan& plan = takedown.plan;
    MemberNames names(takedown.framing);
    for (std::size_t l = 0; l < takedown.framing.levels.size(); ++l) {
        const FramedLevel& framed = takedown.framing.levels[l];
        std::vector<std::string> ids;
        std::size_t count = 0;
        for (std::uint32_t m = 0; m < framed.members.size(); ++m) {
            const FramedMember& member = framed.members[m];
            const Section* const section = member.section == none ? nullptr : &plan.sections[member.section];
            const bool known = section != nullptr && section->E && section->I;
            if (!known && degree_of_indeterminacy(member, framed.bearings[m], plan.settings.snap) > 0 &&
                ++count <= ids_listed) {
                ids.push_back(names.of(l, m));
            }
        }
        if (count == 0) {
            continue;
        }
        std::string list;
        for (const std::string& id : ids) {
            list += (list.empty() ? "" : ", ") + id;
        }
        if (count > ids.size()) {
            list += " and " + std::to_string(count - ids.size()) + " more";
        }
        Problem problem;
        problem.code = ProblemCode::stiffness_assumed;
        problem.severity = Severity::note;
        problem.message =
            (count == 1 ? "1 member" : std::to_string(count) + " members") + " of level " + framed.id +
            " without E and I, on more bearings than statics needs, taken as of constant stiffness: " + list +
            '.';
        problem.pointer = framed.plan_level == none ? "" : "/levels/" + std::to_string(framed.plan_level);
        problem.ids = std::move(ids);
        takedown.problems.push_back(std::move(problem));
    }
}

RUNNEL_NAMESPACE_END
