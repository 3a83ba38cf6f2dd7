#include "support/framing_support.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

using namespace runnel;

namespace framing_support {

PlanBuilder::PlanBuilder() {
    Level level;
    level.id = "floor";
    level.elevation = 3.6;
    plan.levels.push_back(level);
    LoadCase dead;
    dead.id = "dead";
    dead.kind = CaseKind::dead;
    plan.cases.push_back(dead);
}

PlanBuilder& PlanBuilder::column(const std::string& id, Point at) {
    Column column;
    column.id = id;
    column.at = at;
    column.top = "floor";
    plan.columns.push_back(column);
    return *this;
}

PlanBuilder& PlanBuilder::wall(const std::string& id, Point from, Point to) {
    Wall wall;
    wall.id = id;
    wall.from = from;
    wall.to = to;
    wall.top = "floor";
    plan.walls.push_back(wall);
    return *this;
}

Member& PlanBuilder::member(const std::string& id, Role role, Point from, Point to) {
    Member member;
    member.id = id;
    member.role = role;
    member.from = from;
    member.to = to;
    floor().members.push_back(member);
    return floor().members.back();
}

PlanBuilder& PlanBuilder::girder(const std::string& id, Point from, Point to) {
    member(id, Role::girder, from, to);
    return *this;
}
PlanBuilder& PlanBuilder::beam(const std::string& id, Point from, Point to) {
    member(id, Role::beam, from, to);
    return *this;
}
PlanBuilder& PlanBuilder::joist(const std::string& id, Point from, Point to) {
    member(id, Role::joist, from, to);
    return *this;
}

JoistField& PlanBuilder::field(const std::string& id, Ring outline, double direction, double spacing) {
    JoistField field;
    field.id = id;
    field.outline = std::move(outline);
    field.direction = direction;
    field.spacing = spacing;
    floor().joist_fields.push_back(field);
    return floor().joist_fields.back();
}

Deck& PlanBuilder::deck(const std::string& id, Ring outline) {
    Deck deck;
    deck.id = id;
    deck.outline = std::move(outline);
    deck.direction = 0;
    floor().decks.push_back(deck);
    return floor().decks.back();
}

std::string numbered(std::string name, int number) {
    name += std::to_string(number);
    return name;
}

Ring rectangle(double x0, double y0, double x1, double y1) {
    return {{x0, y0}, {x1, y0}, {x1, y1}, {x0, y1}};
}

std::vector<Redrawing> redrawings() {
    return {{"as drawn", 0, {}, false, false},
            {"turned by 17 degrees", 17, {}, false, false},
            {"moved by (1e5, -7e4) m", 0, {1e5, -7e4}, false, false},
            {"turned and moved", 17, {1e5, -7e4}, false, false},
            {"members drawn from the other end", 0, {}, true, false},
            {"list of members reversed", 0, {}, false, true},
            {"all at once", 197, {-3e4, 9e4}, true, true}};
}

Point redrawn(Point point, const Redrawing& how) {
    const double angle = how.turn * std::numbers::pi / 180;
    const double c = how.turn == 0 ? 1 : std::cos(angle);
    const double s = how.turn == 0 ? 0 : std::sin(angle);
    return {point.x * c - point.y * s + how.move.x, point.x * s + point.y * c + how.move.y};
}

Plan redrawn(Plan plan, const Redrawing& how) {
    const auto go = [&](Point& p) { p = redrawn(p, how); };
    const auto go_ring = [&](Ring& ring) { std::for_each(ring.begin(), ring.end(), go); };
    const auto go_line = [&](auto& line) {
        go(line.from);
        go(line.to);
    };
    for (Column& column : plan.columns) {
        go(column.at);
    }
    std::for_each(plan.walls.begin(), plan.walls.end(), go_line);
    for (Level& level : plan.levels) {
        for (Member& member : level.members) {
            go_line(member);
            if (how.members_turned_about) {
                const double length = std::hypot(member.to.x - member.from.x, member.to.y - member.from.y);
                std::swap(member.from, member.to);
                std::swap(member.fixed_from, member.fixed_to);
                for (double& hinge : member.hinges) {
                    hinge = length - hinge;
                }
            }
        }
        if (how.list_reversed) {
            std::reverse(level.members.begin(), level.members.end());
        }
        for (JoistField& field : level.joist_fields) {
            go_ring(field.outline);
            field.direction += how.turn;
        }
        for (Deck& deck : level.decks) {
            go_ring(deck.outline);
            std::for_each(deck.openings.begin(), deck.openings.end(), go_ring);
            deck.direction = deck.direction.value_or(0) + how.turn;
        }
    }
    return plan;
}

std::string carrier_id(const Plan& plan, const FramedLevel& level, Carrier carrier) {
    switch (carrier.kind) {
    case CarrierKind::member:
        return level.members[carrier.index].id;
    case CarrierKind::column:
        return plan.columns[carrier.index].id;
    case CarrierKind::wall:
        return plan.walls[carrier.index].id;
    }
    return {};
}

std::vector<std::string> who_bears_on_whom(const Plan& plan, const Framing& framing) {
    std::vector<std::string> lines;
    for (const FramedLevel& level : framing.levels) {
        for (std::uint32_t m = 0; m < level.members.size(); ++m) {
            for (const Bearing& bearing : level.bearings[m]) {
                lines.push_back(level.members[m].id + " on " + carrier_id(plan, level, bearing.on));
            }
        }
    }
    std::sort(lines.begin(), lines.end());
    return lines;
}

std::vector<std::string> codes(const Framing& framing, Severity at_least) {
    std::vector<std::string> found;
    for (const Problem& problem : framing.problems) {
        if (problem.severity <= at_least && problem.code != ProblemCode::points_merged) {
            found.emplace_back(kind_of(problem.code).name);
        }
    }
    std::sort(found.begin(), found.end());
    return found;
}

const Problem* find_problem(const Framing& framing, ProblemCode code) {
    const auto found = std::find_if(framing.problems.begin(), framing.problems.end(),
                                    [&](const Problem& p) { return p.code == code; });
    return found == framing.problems.end() ? nullptr : &*found;
}

std::uint32_t member_index(const FramedLevel& level, const std::string& id) {
    for (std::uint32_t i = 0; i < level.members.size(); ++i) {
        if (level.members[i].id == id) {
            return i;
        }
    }
    return none;
}

std::vector<std::string> member_ids(const FramedLevel& level) {
    std::vector<std::string> ids;
    for (const FramedMember& member : level.members) {
        ids.push_back(member.id);
    }
    return ids;
}

} // namespace framing_support
