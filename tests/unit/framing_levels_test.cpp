#include "support/framing_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>

using namespace runnel;
using namespace framing_support;

namespace {

using Ids = std::vector<std::string>;

Level level(const std::string& id, double elevation) {
    Level l;
    l.id = id;
    l.elevation = elevation;
    return l;
}

Member beam(const std::string& id, Point from, Point to, Role role = Role::beam) {
    Member m;
    m.id = id;
    m.role = role;
    m.from = from;
    m.to = to;
    return m;
}

Column column(const std::string& id, Point at, const std::string& base, const std::string& top) {
    Column c;
    c.id = id;
    c.at = at;
    c.base = base;
    c.top = top;
    return c;
}

Wall wall(const std::string& id, Point from, Point to, const std::string& base, const std::string& top) {
    Wall w;
    w.id = id;
    w.from = from;
    w.to = to;
    w.base = base;
    w.top = top;
    return w;
}

/// Three levels, listed neither up nor down.
Plan tower() {
    Plan plan;
    plan.levels = {level("second", 7.2), level("roof", 10.8), level("first", 3.6)};
    return plan;
}

} // namespace

TEST_CASE("a column is a bearing at every level above its base up to its top") {
    Plan plan = tower();
    plan.columns = {column("C1", {0, 0}, "ground", "roof"), column("C2", {5, 0}, "first", "second"),
                    column("C3", {9, 0}, "ground", "first")};
    plan.walls = {wall("W1", {0, 9}, {5, 9}, "first", "roof")};
    const Framing framing = frame_plan(plan);
    CHECK(framing.top_down == std::vector<std::uint32_t>{1, 0, 2});
    CHECK(framing.column_base == std::vector<std::uint32_t>{none, 2, none});
    CHECK(framing.column_top == std::vector<std::uint32_t>{1, 0, 2});
    CHECK(framing.wall_base == std::vector<std::uint32_t>{2});
    CHECK(framing.levels[0].columns == std::vector<std::uint32_t>{0, 1});
    CHECK(framing.levels[1].columns == std::vector<std::uint32_t>{0});
    CHECK(framing.levels[2].columns == std::vector<std::uint32_t>{0, 2});
    CHECK(framing.levels[0].walls == std::vector<std::uint32_t>{0});
    CHECK(framing.levels[2].walls.empty());
}

TEST_CASE("a column stands on a column, else a wall, else the member of the highest role") {
    for (const Redrawing& how : redrawings()) {
        CAPTURE(how.name);
        Plan plan = tower();
        plan.columns = {
            column("under", {0, 0}, "ground", "first"),   column("C2", {6, 0}, "ground", "first"),
            column("C3", {0, 6}, "ground", "first"),      column("C4", {3, -4}, "ground", "first"),
            column("C5", {3, 4}, "ground", "first"),      column("on column", {0, 0.003}, "first", "second"),
            column("on wall", {3, 6}, "first", "second"), column("on girder", {3, 0}, "first", "second"),
            column("on beam", {3, 2}, "first", "second")};
        plan.walls = {wall("W", {0, 6}, {6, 6}, "ground", "first")};
        plan.levels[2].members = {beam("B", {3, -4}, {3, 6}), beam("G", {0, 0}, {6, 0}, Role::girder)};
        plan = redrawn(plan, how);
        const Framing framing = frame_plan(plan);
        const FramedLevel& first = framing.levels[2];
        REQUIRE(first.feet.size() == 4);
        Ids stands_on;
        for (const Foot& foot : first.feet) {
            CHECK(foot.upper.kind == CarrierKind::column);
            stands_on.push_back(plan.columns[foot.upper.index].id + ": " +
                                carrier_id(plan, first, foot.lower));
        }
        CHECK(stands_on == Ids{"on column: under", "on wall: W", "on girder: G", "on beam: B"});
        CHECK(first.feet[2].lower_from == doctest::Approx(3));
        CHECK(first.feet[0].at == plan.columns[5].at);
        CHECK(first.feet[0].on_at == plan.columns[0].at);
        CHECK_FALSE(find_problem(framing, ProblemCode::stands_on_nothing));
    }
}

TEST_CASE("a column stands on a column that passes its level") {
    Plan plan = tower();
    plan.columns = {column("long", {0, 0}, "ground", "second"), column("short", {0, 0}, "first", "second")};
    const Framing framing = frame_plan(plan);
    REQUIRE(framing.levels[2].feet.size() == 1);
    CHECK(framing.levels[2].feet[0].lower == Carrier{CarrierKind::column, 0});
}

TEST_CASE("a column over nothing is refused, with what it misses") {
    Plan plan = tower();
    plan.columns = {column("C1", {0, 0}, "ground", "first"), column("C2", {0.03, 0}, "first", "second"),
                    column("C3", {5, 5}, "first", "second")};
    const Framing framing = frame_plan(plan);
    const auto codes_found = codes(framing, Severity::error);
    CHECK(codes_found == Ids{"stands-on-nothing", "stands-on-nothing"});
    const Problem* problem = find_problem(framing, ProblemCode::stands_on_nothing);
    REQUIRE(problem);
    CHECK(problem->message ==
          "Column C2 stands on level first, but there is no column, wall or member under it at (0.03, 0) m.");
    CHECK(problem->hint == "It misses C1 by 0.03 m at (0, 0) m.");
    CHECK(problem->pointer == "/columns/1");
}

TEST_CASE("a wall stands by stretches on walls before members, and a stretch over nothing is refused") {
    for (const Redrawing& how : redrawings()) {
        CAPTURE(how.name);
        Plan plan = tower();
        plan.columns = {column("C1", {3, 0}, "ground", "first"), column("C2", {7, 0}, "ground", "first")};
        plan.walls = {wall("under", {0, 0}, {3, 0}, "ground", "first"),
                      wall("upper", {0, 0.002}, {10, 0.002}, "first", "second")};
        plan.levels[2].members = {beam("G", {2.999, 0}, {7, 0}, Role::girder)};
        plan = redrawn(plan, how);
        const Framing framing = frame_plan(plan);
        const FramedLevel& first = framing.levels[2];
        REQUIRE(first.feet.size() == 2);
        CHECK(first.feet[0].lower == Carrier{CarrierKind::wall, 0});
        CHECK(first.feet[0].upper_from == 0);
        CHECK(first.feet[0].upper_to == doctest::Approx(3));
        CHECK(first.feet[1].lower == Carrier{CarrierKind::member, 0});
        CHECK(first.feet[1].upper_from == first.feet[0].upper_to);
        CHECK(first.feet[1].upper_to == doctest::Approx(7));
        const double lower_length = std::abs(first.feet[1].lower_to - first.feet[1].lower_from);
        CHECK(lower_length == doctest::Approx(4));
        const Problem* problem = find_problem(framing, ProblemCode::stands_on_nothing);
        REQUIRE(problem);
        CHECK(problem->message.find("nothing under it from station 7 m to 10 m") != std::string::npos);
    }
}

TEST_CASE("a gap of no more than snap under a wall is no gap") {
    Plan plan = tower();
    plan.walls = {wall("A", {0, 0}, {3, 0}, "ground", "first"),
                  wall("B", {3.004, 0}, {8, 0}, "ground", "first"),
                  wall("upper", {0.003, 0}, {8.004, 0}, "first", "second")};
    const Framing framing = frame_plan(plan);
    CHECK_FALSE(find_problem(framing, ProblemCode::stands_on_nothing));
    const std::vector<Foot>& feet = framing.levels[2].feet;
    REQUIRE(feet.size() == 2);
    CHECK(feet[0].upper_from == 0);
    CHECK(feet[0].upper_to == feet[1].upper_from);
    CHECK(feet[1].upper_to == doctest::Approx(8.001));
}

TEST_CASE("a level repeats another, with own members in their place and new ones after them") {
    Plan plan = tower();
    Level& first = plan.levels[2];
    first.members = {beam("G1", {0, 0}, {9, 0}, Role::girder), beam("G2", {0, 6}, {9, 6}, Role::girder)};
    first.area_loads = {AreaLoad{}};
    first.line_loads = {LineLoad{}, LineLoad{}};
    first.own_area_loads = first.own_line_loads = true;
    plan.levels[0].like = "first";
    plan.levels[0].members = {beam("G1", {0, 1}, {9, 1}, Role::girder),
                              beam("G3", {0, 9}, {9, 9}, Role::girder)};
    plan.levels[1].like = "second";
    plan.levels[1].own_line_loads = true; // an empty list of its own
    const Framing framing = frame_plan(plan);
    CHECK(member_ids(framing.levels[0]) == Ids{"G1", "G2", "G3"});
    CHECK(framing.levels[0].members[0].from == Point{0, 1});
    CHECK(framing.levels[0].members[1].origin.level == 2);
    CHECK(framing.levels[0].members[1].origin.index == 1);
    CHECK(framing.levels[0].members[0].origin.level == 0);
    CHECK(framing.levels[0].area_loads.size() == 1);
    CHECK(framing.levels[0].line_loads.size() == 2);
    CHECK(member_ids(framing.levels[1]) == Ids{"G1", "G2", "G3"});
    CHECK(framing.levels[1].members[0].from == Point{0, 1});
    CHECK(framing.levels[1].area_loads.size() == 1);
    CHECK(framing.levels[1].line_loads.empty());
}

TEST_CASE("a problem on a repeated level points at the text that was repeated and names the level") {
    Plan plan = tower();
    plan.levels[2].members = {beam("B", {0, 0}, {9, 0})};
    plan.levels[0].like = "first";
    const Framing framing = frame_plan(plan);
    REQUIRE(framing.problems.size() == 2);
    for (const Problem& problem : framing.problems) {
        CHECK(problem.pointer == "/levels/2/members/0");
    }
    CHECK(framing.problems[0].ids == Ids{"second/B"});
    CHECK(framing.problems[1].ids == Ids{"first/B"});
}

TEST_CASE("a loop of levels that repeat each other does not hang") {
    Plan plan = tower();
    plan.levels[0].like = "roof";
    plan.levels[1].like = "first";
    plan.levels[2].like = "second";
    plan.levels[2].members = {beam("B", {0, 0}, {9, 0})};
    CHECK(frame_plan(plan).levels.size() == 3);
}
