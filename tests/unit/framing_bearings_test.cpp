#include "support/framing_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <functional>

using namespace runnel;
using namespace framing_support;

namespace {

struct Row {
    std::string name;
    std::function<void(PlanBuilder&)> draw;
    std::vector<std::string> bearings; ///< sorted
    std::vector<std::string> problems; ///< warnings and errors, sorted
};

/// Two girders on four columns, 9 m long and 6 m apart.
void two_girders(PlanBuilder& p) {
    p.column("C1", {0, 0}).column("C2", {9, 0}).column("C3", {0, 6}).column("C4", {9, 6});
    p.girder("G1", {0, 0}, {9, 0}).girder("G2", {0, 6}, {9, 6});
}

const std::vector<std::string> girders_on_columns{"G1 on C1", "G1 on C2", "G2 on C3", "G2 on C4"};

std::vector<std::string> with(std::vector<std::string> more,
                              std::vector<std::string> base = girders_on_columns) {
    base.insert(base.end(), more.begin(), more.end());
    std::sort(base.begin(), base.end());
    return base;
}

std::vector<Row> rules() {
    return {
        {"a girder's ends bear on the columns under them",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {9, 0}).girder("G", {0, 0}, {9, 0});
         },
         {"G on C1", "G on C2"},
         {}},
        {"a girder runs on over a column under its inside",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {4, 0}).column("C3", {9, 0}).girder("G", {0, 0}, {9, 0});
         },
         {"G on C1", "G on C2", "G on C3"},
         {}},
        {"a girder crosses a wall and ends on another",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).wall("W1", {4, -2}, {4, 2}).wall("W2", {9, -2}, {9, 2});
             p.girder("G", {0, 0}, {9, 0});
         },
         {"G on C1", "G on W1", "G on W2"},
         {}},
        {"a girder bears on the end of a wall that it crosses square",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0})
                 .column("C2", {9, 0})
                 .wall("W1", {4, 0}, {4, 2})
                 .girder("G", {0, 0}, {9, 0});
         },
         {"G on C1", "G on C2", "G on W1"},
         {}},
        {"girders and beams that meet over a column all bear on it",
         [](PlanBuilder& p) {
             p.column("C0", {0, 0}).column("C1", {9, 0}).column("C2", {-9, 0}).column("C3", {0, 7});
             p.girder("G1", {0, 0}, {9, 0}).girder("G2", {0, 0}, {-9, 0}).beam("B", {0, 0}, {0, 7});
         },
         {"B on C0", "B on C3", "G1 on C0", "G1 on C1", "G2 on C0", "G2 on C2"},
         {}},
        {"girders that cross over a column do not bear on each other",
         [](PlanBuilder& p) {
             p.column("C0", {0, 0})
                 .column("C1", {9, 0})
                 .column("C2", {-9, 0})
                 .column("C3", {0, 7})
                 .column("C4", {0, -7});
             p.girder("G1", {-9, 0}, {9, 0}).girder("G2", {0, -7}, {0, 7});
         },
         {"G1 on C0", "G1 on C1", "G1 on C2", "G2 on C0", "G2 on C3", "G2 on C4"},
         {}},
        {"a beam that ends on a girder bears on it",
         [](PlanBuilder& p) {
             two_girders(p);
             p.beam("B", {3, 0}, {3, 6});
         },
         with({"B on G1", "B on G2"}),
         {}},
        {"beams that end on a girder from both sides do not meet each other",
         [](PlanBuilder& p) {
             two_girders(p);
             p.column("C5", {3, 12}).beam("B1", {3, 0}, {3, 6}).beam("B2", {3, 6}, {3, 12});
         },
         with({"B1 on G1", "B1 on G2", "B2 on C5", "B2 on G2"}),
         {}},
        {"a beam that ends on a beam bears on it, to any depth",
         [](PlanBuilder& p) {
             two_girders(p);
             p.beam("B1", {6, 0}, {6, 6}).beam("B2", {0, 3}, {6, 3}).beam("B3", {3, 0}, {3, 3});
             p.column("C5", {0, 3});
         },
         with({"B1 on G1", "B1 on G2", "B2 on B1", "B2 on C5", "B3 on B2", "B3 on G1"}),
         {}},
        {"a beam crosses a girder and runs on to the next",
         [](PlanBuilder& p) {
             two_girders(p);
             p.column("C5", {3, 12}).beam("B", {3, 0}, {3, 12});
         },
         with({"B on C5", "B on G1", "B on G2"}),
         {}},
        {"a beam overhangs the girder that it crosses",
         [](PlanBuilder& p) {
             two_girders(p);
             p.beam("B", {3, -1.5}, {3, 6});
         },
         with({"B on G1", "B on G2"}),
         {}},
        {"a girder that ends on a beam bears on it, with a warning",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {9, 0}).column("C3", {4, 6});
             p.beam("B", {0, 0}, {9, 0}).girder("G", {4, 0}, {4, 6});
         },
         {"B on C1", "B on C2", "G on B", "G on C3"},
         {"higher-on-lower"}},
        {"at a corner the beam bears on the end of a cantilever girder",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {6, 0}).column("C3", {9, 6});
             p.girder("G", {0, 0}, {9, 0}).beam("B", {9, 0}, {9, 6});
         },
         {"B on C3", "B on G", "G on C1", "G on C2"},
         {}},
        {"two beams and a joist at the end of a girder all bear on it",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {6, 0}).column("C3", {9, 6}).column("C4", {9, -6});
             p.column("C5", {14, 0});
             p.girder("G", {0, 0}, {9, 0}).beam("B1", {9, 0}, {9, 6}).beam("B2", {9, 0}, {9, -6});
             p.joist("J", {9, 0}, {14, 0});
         },
         {"B1 on C3", "B1 on G", "B2 on C4", "B2 on G", "G on C1", "G on C2", "J on C5", "J on G"},
         {}},
        {"two beams that meet over nothing are refused",
         [](PlanBuilder& p) {
             two_girders(p);
             p.column("C5", {3, 12}).beam("B1", {4, 0}, {4, 3}).beam("B2", {4, 3}, {4, 6});
         },
         with({"B1 on G1", "B2 on G2"}),
         {"carries-nothing", "equal-roles-meet", "too-few-bearings", "too-few-bearings"}},
        {"two girders that cross over nothing are refused",
         [](PlanBuilder& p) {
             two_girders(p);
             p.column("C5", {4, -3}).column("C6", {4, 3});
             p.girder("G3", {4, -3}, {4, 3});
         },
         with({"G3 on C5", "G3 on C6"}),
         {"equal-roles-cross"}},
        {"of two girders that cross, the one that names the other bears on it",
         [](PlanBuilder& p) {
             two_girders(p);
             p.column("C5", {4, -3}).column("C6", {4, 3});
             p.member("G3", Role::girder, {4, -3}, {4, 3}).bears_on = {"C5", "C6", "floor/G1"};
         },
         with({"G3 on C5", "G3 on C6", "G3 on G1"}),
         {}},
        {"two girders with lists that do not name each other pass",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {9, 0}).column("C5", {4, -3}).column("C6", {4, 3});
             p.member("G1", Role::girder, {0, 0}, {9, 0}).bears_on = {"C1", "C2"};
             p.member("G3", Role::girder, {4, -3}, {4, 3}).bears_on = {"C5", "C6"};
         },
         {"G1 on C1", "G1 on C2", "G3 on C5", "G3 on C6"},
         {}},
        {"a girder that names a beam bears on it and does not carry it",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {9, 0}).column("C5", {4, -3}).column("C6", {4, 3});
             p.member("G", Role::girder, {0, 0}, {9, 0}).bears_on = {"C1", "C2", "B"};
             p.beam("B", {4, -3}, {4, 3});
         },
         {"B on C5", "B on C6", "G on B", "G on C1", "G on C2"},
         {}},
        {"a member with a list bears on nothing else, and what it passes carries nothing",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {4, 0}).column("C3", {9, 0});
             p.member("G", Role::girder, {0, 0}, {9, 0}).bears_on = {"C1", "C3"};
         },
         {"G on C1", "G on C3"},
         {"carries-nothing"}},
        {"naming a carrier that is not there is refused",
         [](PlanBuilder& p) {
             two_girders(p);
             p.member("B", Role::beam, {3, 0}, {3, 6}).bears_on = {"G1", "G2", "C1"};
         },
         with({"B on G1", "B on G2"}),
         {"bears-on-too-far"}},
        {"naming nothing that the level has is refused",
         [](PlanBuilder& p) {
             two_girders(p);
             p.member("B", Role::beam, {3, 0}, {3, 6}).bears_on = {"G1", "G2", "G7"};
         },
         with({"B on G1", "B on G2"}),
         {"unknown-id"}},
        {"a member along another is refused",
         [](PlanBuilder& p) {
             two_girders(p);
             p.beam("B", {2, 0}, {7, 0});
         },
         girders_on_columns,
         {"lies-along", "too-few-bearings"}},
        {"a member along a wall is refused",
         [](PlanBuilder& p) {
             p.wall("W", {0, 0}, {9, 0}).beam("B", {2, 0}, {7, 0});
         },
         {},
         {"carries-nothing", "lies-along", "too-few-bearings"}},
        {"members end to end on one line do not lie along each other",
         [](PlanBuilder& p) {
             p.column("C1", {0, 0}).column("C2", {6, 0}).column("C3", {12, 0});
             p.girder("G1", {0, 0}, {6, 0}).girder("G2", {6, 0}, {12, 0});
         },
         {"G1 on C1", "G1 on C2", "G2 on C2", "G2 on C3"},
         {}},
        {"four beams that bear on each other in a ring are a loop",
         [](PlanBuilder& p) {
             p.column("C1", {0, 2}).column("C2", {6, 0}).column("C3", {8, 6}).column("C4", {2, 8});
             p.beam("B1", {0, 2}, {6, 2})
                 .beam("B2", {6, 0}, {6, 6})
                 .beam("B3", {8, 6}, {2, 6})
                 .beam("B4", {2, 8}, {2, 2});
         },
         {"B1 on B2", "B1 on C1", "B2 on B3", "B2 on C2", "B3 on B4", "B3 on C3", "B4 on B1", "B4 on C4"},
         {"load-path-loop"}},
        {"members meeting under a flat angle at a column do not lie along each other",
         [](PlanBuilder& p) {
             p.column("C0", {0, 0}).column("C1", {10, 0}).column("C2", {10, 0.5});
             p.girder("G1", {0, 0}, {10, 0}).girder("G2", {0, 0}, {10, 0.5});
         },
         {"G1 on C0", "G1 on C1", "G2 on C0", "G2 on C2"},
         {}},
    };
}

} // namespace

TEST_CASE("who bears on whom, by the rules, however the plan is drawn") {
    for (const Row& row : rules()) {
        PlanBuilder builder;
        row.draw(builder);
        for (const Redrawing& how : redrawings()) {
            CAPTURE(row.name);
            CAPTURE(how.name);
            const Plan plan = redrawn(builder.plan, how);
            const Framing framing = frame_plan(plan);
            CHECK(who_bears_on_whom(plan, framing) == row.bearings);
            CHECK(codes(framing) == row.problems);
        }
    }
}

TEST_CASE("a bearing knows its stations on both and where it is") {
    PlanBuilder p;
    two_girders(p);
    p.beam("B", {3, -1.5}, {3, 6});
    const Framing framing = frame_plan(p.plan);
    const FramedLevel& level = framing.levels.front();
    const std::uint32_t b = member_index(level, "B");
    REQUIRE(level.bearings[b].size() == 2);
    const Bearing& first = level.bearings[b][0];
    CHECK(first.station == doctest::Approx(1.5));
    CHECK(first.on_station == doctest::Approx(3));
    CHECK(first.at.x == doctest::Approx(3));
    CHECK(first.at.y == doctest::Approx(0));
    CHECK(first.on_at == Point{3, 0});
    CHECK_FALSE(first.fixed);
    CHECK(level.bearings[b][1].station == doctest::Approx(7.5));
}

TEST_CASE("a loop is reported with its ids in the order of the path") {
    PlanBuilder p;
    p.column("C1", {0, 2}).column("C2", {6, 0}).column("C3", {8, 6}).column("C4", {2, 8});
    p.beam("B1", {0, 2}, {6, 2})
        .beam("B2", {6, 0}, {6, 6})
        .beam("B3", {8, 6}, {2, 6})
        .beam("B4", {2, 8}, {2, 2});
    const Framing framing = frame_plan(p.plan);
    const Problem* loop = find_problem(framing, ProblemCode::load_path_loop);
    REQUIRE(loop);
    CHECK(loop->ids == std::vector<std::string>{"B1", "B2", "B3", "B4"});
    CHECK(loop->message ==
          "The load path runs in a loop: B1 bears on B2 bears on B3 bears on B4 bears on B1.");
    CHECK(framing.levels[0].order.size() == 4);
}

TEST_CASE("a named carrier too far away is reported with the gap and a pointer to the name") {
    PlanBuilder p;
    two_girders(p);
    p.member("B", Role::beam, {3, 0}, {3, 5.5}).bears_on = {"G1", "G2"};
    const Framing framing = frame_plan(p.plan);
    const Problem* far = find_problem(framing, ProblemCode::bears_on_too_far);
    REQUIRE(far);
    CHECK(far->message.find("0.5 m away") != std::string::npos);
    CHECK(far->message.find("0.005 m") != std::string::npos);
    CHECK(far->pointer == "/levels/0/members/2/bears_on/1");
    CHECK(far->point == Point{3, 5.5});
}

TEST_CASE("a stretch along another member is named with its ends") {
    PlanBuilder p;
    two_girders(p);
    p.beam("B", {2, 0}, {7, 0});
    const Framing framing = frame_plan(p.plan);
    const Problem* along = find_problem(framing, ProblemCode::lies_along);
    REQUIRE(along);
    CHECK(along->message.find("for 5 m, from (2, 0) m to (7, 0) m") != std::string::npos);
    CHECK(along->pointer == "/levels/0/members/2");
    CHECK(along->ids == std::vector<std::string>{"B", "G1"});
}

TEST_CASE("a place is named by the grid lines that cross there") {
    PlanBuilder p;
    p.plan.grid = {{"A", {0, -1}, {0, 20}, {}}, {"B", {4, -1}, {4, 20}, {}}, {"1", {-1, 3}, {20, 3}, {}}};
    two_girders(p);
    p.beam("B1", {4, 0}, {4, 3}).beam("B2", {4, 3}, {4, 6});
    const Framing framing = frame_plan(p.plan);
    const Problem* meet = find_problem(framing, ProblemCode::equal_roles_meet);
    REQUIRE(meet);
    CHECK(meet->message.find("(4, 3) m at B/1") != std::string::npos);
}

TEST_CASE("problems past the limit of one code are counted") {
    PlanBuilder p;
    for (int i = 0; i < 20; ++i) {
        p.beam(numbered("B", i), {0, 1.0 * i}, {5, 1.0 * i});
    }
    Limits limits;
    limits.problems = 5;
    const Framing framing = frame_plan(p.plan, limits);
    CHECK(framing.problems.size() == 6);
    CHECK(framing.problems.back().message.find("15 more") != std::string::npos);
}
