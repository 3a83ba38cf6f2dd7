#include "framing/place.hpp"

#include "geometry/basic.hpp"
#include "plan/problems.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

double distance_to_line(Point p, const GridLine& line) {
    const Point d = line.to - line.from;
    return std::abs(cross(d, p - line.from)) / norm(d);
}

/// Two grid lines name a place only where they cross: lines so flat to each other that both run within snap
/// of a point over their whole length do not.
bool run_apart(const GridLine& a, const GridLine& b, double snap) {
    return distance_to_line(a.from, b) > snap || distance_to_line(a.to, b) > snap;
}

} // namespace

std::string place_text(const Plan& plan, Point point) {
    std::string text = point_text(point, plan.units) + ' ' + std::string(name_of(plan.units.length));
    const GridLine* first = nullptr;
    for (const GridLine& line : plan.grid) {
        if (line.from == line.to || distance_to_line(point, line) > plan.settings.snap) {
            continue;
        }
        if (!first) {
            first = &line;
        } else if (run_apart(*first, line, plan.settings.snap)) {
            return text + " at " + first->id + '/' + line.id;
        }
    }
    return text;
}

RUNNEL_NAMESPACE_END
