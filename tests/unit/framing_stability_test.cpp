#include "support/framing_support.hpp"

#include <framing/stability.hpp>

#include <doctest/doctest.h>

#include <functional>

using namespace runnel;
using namespace framing_support;

namespace {

Bearing at(double station, bool fixed = false) {
    Bearing bearing;
    bearing.station = station;
    bearing.fixed = fixed;
    return bearing;
}

constexpr double reach = 0.005;

} // namespace

TEST_CASE("a member stands, or moves in as many ways as statics says") {
    struct Row {
        std::string name;
        std::vector<Bearing> bearings;
        std::vector<double> hinges;
        int ways;
    };
    for (const Row& row : {
             Row{"simple beam", {at(0), at(10)}, {}, 0},
             Row{"nothing under it", {}, {}, 2},
             Row{"one bearing", {at(4)}, {}, 1},
             Row{"cantilever built in", {at(0, true)}, {}, 0},
             Row{"hinge in a simple span", {at(0), at(10)}, {5}, 1},
             Row{"hinge in the second span of three bearings", {at(0), at(5), at(10)}, {7}, 0},
             Row{"hinge over the inner bearing", {at(0), at(5), at(10)}, {5}, 0},
             Row{"hinges at two inner bearings", {at(0), at(3), at(6), at(10)}, {3, 6}, 0},
             Row{"two hinges in one span", {at(0), at(5), at(10)}, {6, 8}, 1},
             Row{"suspended span between overhangs", {at(0), at(4), at(6), at(10)}, {4.5, 5.5}, 0},
             Row{"two hinges beside one bearing", {at(0), at(3), at(7), at(10)}, {2, 4}, 0},
             Row{"propped cantilever with a hinge", {at(0, true), at(10)}, {4}, 0},
             Row{"cantilever with a hinge", {at(0, true)}, {4}, 1},
             Row{"both ends built in, two hinges", {at(0, true), at(10, true)}, {3, 7}, 0},
             Row{"both ends built in, three hinges", {at(0, true), at(10, true)}, {3, 5, 7}, 1},
             Row{"overhang hinged over the first bearing", {at(2), at(10)}, {2}, 1},
             Row{"piece on one bearing between hinges, held from both sides",
                 {at(0), at(2), at(5), at(8), at(10)},
                 {3, 7},
                 0},
             Row{"a chain of three pieces on three bearings", {at(1), at(5), at(9)}, {3, 7}, 1},
             Row{"free at both ends of a hinge", {at(5)}, {5}, 2},
         }) {
        CAPTURE(row.name);
        CHECK(free_motion(10, row.bearings, row.hinges, reach).ways == row.ways);
        // The same seen from the other end.
        std::vector<Bearing> bearings;
        std::vector<double> hinges;
        for (auto b = row.bearings.rbegin(); b != row.bearings.rend(); ++b) {
            bearings.push_back(at(10 - b->station, b->fixed));
        }
        for (auto h = row.hinges.rbegin(); h != row.hinges.rend(); ++h) {
            hinges.push_back(10 - *h);
        }
        CHECK(free_motion(10, bearings, hinges, reach).ways == row.ways);
    }
}

TEST_CASE("a member on one bearing is refused, and the hint tells what it misses") {
    for (const Redrawing& how : redrawings()) {
        CAPTURE(how.name);
        PlanBuilder p;
        p.column("C1", {0, 0}).column("C2", {9, 0}).column("C3", {0, 6}).column("C4", {9, 6});
        p.girder("G1", {0, 0}, {9, 0}).girder("G2", {0, 6}, {9, 6});
        p.beam("B", {3, 0}, {3, 5.988});
        const Framing framing = frame_plan(redrawn(p.plan, how));
        CHECK(codes(framing) == std::vector<std::string>{"near-miss", "too-few-bearings"});
        const Problem* few = find_problem(framing, ProblemCode::too_few_bearings);
        REQUIRE(few);
        CHECK(few->message.find("B bears at one point only, on G1 at ") == 0);
        CHECK(few->hint.find("0.012 m short of G2") != std::string::npos);
        const Problem* miss = find_problem(framing, ProblemCode::near_miss);
        REQUIRE(miss);
        CHECK(miss->message.find("0.012 m short of G2") != std::string::npos);
        CHECK(miss->severity == Severity::warning);
        CHECK(miss->ids == std::vector<std::string>{"B", "G2"});
        CHECK(miss->hint.find("To bear on G2, end at") == 0);
        REQUIRE(miss->point);
        const Point end = redrawn({3, 5.988}, how);
        CHECK(miss->point->x == doctest::Approx(end.x).epsilon(1e-12));
        CHECK(miss->point->y == doctest::Approx(end.y).epsilon(1e-12));
    }
}

TEST_CASE("near misses end at twenty times snap, and a miss of snap is none") {
    struct Row {
        double gap;
        std::vector<std::string> problems;
    };
    for (const Row& row : {Row{0.0049, {}}, Row{0.0051, {"near-miss", "too-few-bearings"}},
                           Row{0.099, {"near-miss", "too-few-bearings"}}, Row{0.101, {"too-few-bearings"}}}) {
        CAPTURE(row.gap);
        PlanBuilder p;
        p.column("C1", {0, 0}).column("C2", {9, 0}).column("C3", {3, 6}).girder("G", {0, 0}, {9, 0});
        p.beam("B", {3, row.gap}, {3, 6});
        CHECK(codes(frame_plan(p.plan)) == row.problems);
    }
}

TEST_CASE("a girder that passes a column by little is told from both sides once") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {4, 0.05}).column("C3", {9, 0}).girder("G", {0, 0}, {9, 0});
    const Framing framing = frame_plan(p.plan);
    CHECK(codes(framing) == std::vector<std::string>{"carries-nothing", "near-miss"});
    const Problem* miss = find_problem(framing, ProblemCode::near_miss);
    REQUIRE(miss);
    CHECK(miss->message.find("Column C2 misses G by 0.05 m") == 0);
    CHECK(miss->pointer == "/columns/1");
}

TEST_CASE("columns under a deck that is shared to columns, and walls under any deck, carry it") {
    PlanBuilder p;
    p.column("C1", {1, 1}).column("C2", {8, 1}).wall("W", {0, 5}, {9, 5}).column("C3", {20, 20});
    p.deck("D", rectangle(0, 0, 9, 6)).span = SpanKind::columns;
    const Framing framing = frame_plan(p.plan);
    CHECK(codes(framing) == std::vector<std::string>{"carries-nothing"});
    CHECK(find_problem(framing, ProblemCode::carries_nothing)->ids == std::vector<std::string>{"C3"});
}

TEST_CASE("a built-in end needs a bearing there") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {6, 0});
    p.member("G1", Role::girder, {0, 0}, {6, 0}).fixed_from = true;
    p.member("G2", Role::girder, {6, 0}, {6, 3}).fixed_from = true;
    p.member("G3", Role::girder, {6, 0}, {9, 3}).fixed_to = true;
    const Framing framing = frame_plan(p.plan);
    CHECK(codes(framing) == std::vector<std::string>{"too-few-bearings", "too-few-bearings"});
    const FramedLevel& level = framing.levels[0];
    CHECK(level.bearings[0][0].fixed);
    CHECK_FALSE(level.bearings[0][1].fixed);
    CHECK(level.bearings[1].size() == 1);
    CHECK(level.bearings[1][0].fixed);
}

TEST_CASE("a mechanism is refused with the piece that moves") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {9, 0});
    p.member("G", Role::girder, {0, 0}, {9, 0}).hinges = {4};
    const Framing framing = frame_plan(p.plan);
    const Problem* mechanism = find_problem(framing, ProblemCode::mechanism);
    REQUIRE(mechanism);
    CHECK(mechanism->message.find("G is a mechanism: on 2 bearings, with a hinge at 4 m") == 0);
}

TEST_CASE("cut puts a hinge at each inner bearing, and hinges go to bearings within snap") {
    PlanBuilder p;
    p.column("C1", {0, 0})
        .column("C2", {3, 0})
        .column("C3", {6, 0})
        .column("C4", {9, 0})
        .column("C5", {12, 0});
    Member& g = p.member("G", Role::girder, {0, 0}, {12, 0});
    g.cut = true;
    g.hinges = {6.003, 10};
    const Framing framing = frame_plan(p.plan);
    CHECK(framing.levels[0].members[0].hinges == std::vector<double>{3, 6, 9, 10});
    CHECK(find_problem(framing, ProblemCode::mechanism));
    CHECK_FALSE(find_problem(framing, ProblemCode::continuous_as_drawn));
}

TEST_CASE("members that run on over bearings are listed in one note a level") {
    PlanBuilder p;
    for (int i = 0; i < 25; ++i) {
        const double y = 2.0 * i;
        p.column(numbered("A", i), {0, y}).column(numbered("B", i), {4, y}).column(numbered("C", i), {9, y});
        p.girder(numbered("G", i), {0, y}, {9, y});
    }
    const Framing framing = frame_plan(p.plan);
    const Problem* note = find_problem(framing, ProblemCode::continuous_as_drawn);
    REQUIRE(note);
    CHECK(note->message.find("25 members run on") != std::string::npos);
    CHECK(note->message.find("G19 and 5 more.") != std::string::npos);
    CHECK(note->ids.size() == 20);
}

TEST_CASE("an equal role that runs a little past another is told to end there") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {9, 0}).column("C3", {4, 6});
    p.beam("B1", {0, 0}, {9, 0}).beam("B2", {4, -0.02}, {4, 6});
    const Framing framing = frame_plan(p.plan);
    const Problem* problem = find_problem(framing, ProblemCode::equal_roles_cross);
    REQUIRE(problem);
    CHECK(problem->hint == "B2 runs 0.02 m past B1: end it there.");
}
