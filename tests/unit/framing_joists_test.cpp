#include "support/framing_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>

using namespace runnel;
using namespace framing_support;

namespace {

using Ids = std::vector<std::string>;

/// A hall 6 m wide between two girders on columns, as long as asked for.
void hall(PlanBuilder& p, double length) {
    p.column("C1", {0, 0}).column("C2", {length, 0}).column("C3", {0, 6}).column("C4", {length, 6});
    p.girder("G1", {0, 0}, {length, 0}).girder("G2", {0, 6}, {length, 6});
}

const FramedMember& member(const Framing& framing, const std::string& id) {
    const FramedLevel& level = framing.levels.front();
    const std::uint32_t index = member_index(level, id);
    REQUIRE(index != none);
    return level.members[index];
}

Ids joists_of(const Framing& framing) {
    Ids ids;
    for (const FramedMember& m : framing.levels.front().members) {
        if (m.from_field) {
            ids.push_back(m.id);
        }
    }
    return ids;
}

} // namespace

TEST_CASE("joists stand at multiples of the spacing, with one more at the far edge") {
    PlanBuilder p;
    hall(p, 2.5);
    p.field("J", rectangle(0, 0, 2.5, 6), 90, 0.6);
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing) == Ids{"J.1", "J.2", "J.3", "J.4", "J.5", "J.6"});
    CHECK(codes(framing).empty());
    for (int k = 0; k < 5; ++k) {
        const FramedMember& joist = member(framing, numbered("J.", k + 1));
        CHECK(joist.from == Point{k * 0.6, 0});
        CHECK(joist.to == Point{k * 0.6, 6});
        CHECK(joist.role == Role::joist);
        CHECK(joist.from_field);
    }
    CHECK(member(framing, "J.6").from == Point{2.5, 0});
}

TEST_CASE("a field without edges has no joist more, and an offset moves the first") {
    PlanBuilder p;
    hall(p, 2.5);
    JoistField& field = p.field("J", rectangle(0, 0, 2.5, 6), 90, 0.6);
    field.edges = false;
    field.offset = 0.3;
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing) == Ids{"J.1", "J.2", "J.3", "J.4"});
    CHECK(member(framing, "J.1").from.x == 0.3);
    CHECK(member(framing, "J.4").from.x == doctest::Approx(2.1));
}

TEST_CASE("a joist at the far edge is not doubled where the spacing ends there") {
    PlanBuilder p;
    hall(p, 2.4);
    p.field("J", rectangle(0, 0, 2.4, 6), 90, 0.6);
    CHECK(joists_of(frame_plan(p.plan)).size() == 5);
}

TEST_CASE("positions do not add up errors along a long field") {
    PlanBuilder p;
    hall(p, 10000);
    p.field("J", rectangle(0, 0, 10000, 6), 90, 0.1);
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing).size() == 100001);
    CHECK(member(framing, "J.77777").from.x == 77776 * 0.1);
}

TEST_CASE("joists are numbered along the normal with positive x, or +y where they run along x") {
    struct Row {
        double direction;
        Point first_from; ///< of J.1: the corner it starts at
    };
    for (const Row& row : {Row{90, {0, 0}}, Row{270, {0, 4}}, Row{0, {0, 0}}, Row{180, {4, 0}}}) {
        CAPTURE(row.direction);
        PlanBuilder p;
        p.wall("W1", {0, 0}, {4, 0})
            .wall("W2", {4, 0}, {4, 4})
            .wall("W3", {4, 4}, {0, 4})
            .wall("W4", {0, 4}, {0, 0});
        p.field("J", rectangle(0, 0, 4, 4), row.direction, 1).offset = 0.5;
        const Framing framing = frame_plan(p.plan);
        const FramedMember& first = member(framing, "J.1");
        const bool along_y = row.direction == 90 || row.direction == 270;
        CHECK(first.from.x == doctest::Approx(along_y ? 0.5 : row.first_from.x));
        CHECK(first.from.y == doctest::Approx(along_y ? row.first_from.y : 0.5));
    }
}

TEST_CASE("a joist in a concave outline is in pieces, numbered along its direction") {
    // A U open to the right between x = 1 and 3: joists along y through the notch are in two pieces.
    PlanBuilder p;
    const Ring u{{0, 0}, {4, 0}, {4, 2}, {1, 2}, {1, 4}, {4, 4}, {4, 6}, {0, 6}};
    for (std::size_t i = 0; i < u.size(); ++i) {
        p.wall(numbered("W", i), u[i], u[(i + 1) % u.size()]);
    }
    p.field("J", u, 90, 1).offset = 0.5;
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing) == Ids{"J.1", "J.2.1", "J.2.2", "J.3.1", "J.3.2", "J.4.1", "J.4.2"});
    CHECK(member(framing, "J.2.1").to == Point{1.5, 2});
    CHECK(member(framing, "J.2.2").from == Point{1.5, 4});
}

TEST_CASE("a joist along an edge of a concave outline takes that edge's stretch; the outline is closed") {
    PlanBuilder p;
    // An L: the joist at x = 3 runs on the re-entrant edge and above it through the inside.
    p.field("J", {{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}}, 90, 3);
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing) == Ids{"J.1", "J.2", "J.3"});
    CHECK(member(framing, "J.2").length == doctest::Approx(6));
    CHECK(member(framing, "J.3").length == doctest::Approx(3));
}

TEST_CASE("joists run on over what they cross, and with cut they are cut there") {
    for (const bool cut : {false, true}) {
        CAPTURE(cut);
        PlanBuilder p;
        hall(p, 4);
        p.column("C5", {0, 12}).column("C6", {4, 12}).girder("G3", {0, 12}, {4, 12});
        JoistField& field = p.field("J", rectangle(0, 0, 4, 12), 90, 1);
        field.offset = 0.5;
        field.edges = false;
        field.cut = cut;
        const Framing framing = frame_plan(p.plan);
        CHECK(codes(framing).empty());
        if (cut) {
            CHECK(joists_of(framing) ==
                  Ids{"J.1.1", "J.1.2", "J.2.1", "J.2.2", "J.3.1", "J.3.2", "J.4.1", "J.4.2"});
            CHECK(member(framing, "J.1.1").to == member(framing, "J.1.2").from);
            CHECK_FALSE(find_problem(framing, ProblemCode::continuous_as_drawn));
        } else {
            CHECK(joists_of(framing) == Ids{"J.1", "J.2", "J.3", "J.4"});
            const Problem* note = find_problem(framing, ProblemCode::continuous_as_drawn);
            REQUIRE(note);
            CHECK(note->ids == Ids{"J.1", "J.2", "J.3", "J.4"});
        }
    }
}

TEST_CASE("joists over a column between two girders are cut like their neighbours") {
    PlanBuilder p;
    p.column("C1", {0, 0})
        .column("C2", {4, 0})
        .column("C3", {0, 6})
        .column("C4", {4, 6})
        .column("C5", {0, 12})
        .column("C6", {4, 12})
        .column("C7", {2, 6});
    p.girder("G1", {0, 0}, {4, 0})
        .girder("G2", {0, 6}, {2, 6})
        .girder("G3", {2, 6}, {4, 6})
        .girder("G4", {0, 12}, {4, 12});
    p.field("J", rectangle(0, 0, 4, 12), 90, 1).cut = true;
    const Framing framing = frame_plan(p.plan);
    CHECK(codes(framing).empty());
    CHECK(joists_of(framing).size() == 10);
    CHECK(member(framing, "J.3.1").to == Point{2, 6});
}

TEST_CASE("a header cuts the joists that it crosses and leaves the trimmers whole; inside the opening there "
          "is none") {
    for (const Redrawing& how : {redrawings()[0], redrawings()[1], redrawings()[3]}) {
        CAPTURE(how.name);
        PlanBuilder p;
        hall(p, 6);
        p.beam("H1", {2, 2}, {4, 2}).beam("H2", {2, 4}, {4, 4});
        p.field("J", rectangle(0, 0, 6, 6), 90, 1).cut = true;
        Deck& deck = p.deck("D", rectangle(0, 0, 6, 6));
        deck.openings = {rectangle(2, 2, 4, 4)};
        const Plan plan = redrawn(p.plan, how);
        const Framing framing = frame_plan(plan);
        CHECK(joists_of(framing) == Ids{"J.1", "J.2", "J.3", "J.4.1", "J.4.3", "J.5", "J.6", "J.7"});
        // A header is a beam on two joists: that is what the warning says.
        CHECK(codes(framing) == Ids(4, "higher-on-lower"));
        const std::vector<std::string> bearings = who_bears_on_whom(plan, framing);
        for (const std::string line :
             {"H1 on J.3", "H1 on J.5", "H2 on J.3", "H2 on J.5", "J.4.1 on H1", "J.4.3 on H2", "J.4.1 on G1",
              "J.4.3 on G2", "J.3 on G1", "J.3 on G2"}) {
            CAPTURE(line);
            CHECK(std::count(bearings.begin(), bearings.end(), line) == 1);
        }
    }
}

TEST_CASE("a joist that would lie along a member or wall is left out, with a note, and numbers are kept") {
    for (const double aside : {0.0, 0.004, -0.004}) {
        CAPTURE(aside);
        PlanBuilder p;
        hall(p, 3);
        p.wall("W", {aside, 0}, {aside, 6}).beam("B", {3 + aside, 0}, {3 + aside, 6});
        // The girders end on the wall instead of on columns.
        p.plan.columns = {p.plan.columns[1], p.plan.columns[3]};
        p.field("J", rectangle(0, 0, 3, 6), 90, 1);
        const Framing framing = frame_plan(p.plan);
        CHECK(joists_of(framing) == Ids{"J.2", "J.3"});
        CHECK(codes(framing).empty());
        const Problem* note = find_problem(framing, ProblemCode::joist_left_out);
        REQUIRE(note);
        CHECK(note->ids == Ids{"J", "J.1", "J.4"});
        CHECK(note->message ==
              "2 joists of field J lie along a member or a wall and are left out: J.1 and J.4.");
    }
}

TEST_CASE("of two fields that both have a joist on the line between them, the later leaves its out") {
    PlanBuilder p;
    hall(p, 4);
    p.field("J", rectangle(0, 0, 2, 6), 90, 1);
    p.field("K", rectangle(2, 0, 4, 6), 90, 1);
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing) == Ids{"J.1", "J.2", "J.3", "K.2", "K.3"});
    CHECK(codes(framing).empty());
}

TEST_CASE("where a beam takes up part of a joist's line, the rest stays as pieces") {
    PlanBuilder p;
    hall(p, 2);
    p.column("C9", {1, 2}).beam("B", {1, 0}, {1, 2});
    p.field("J", rectangle(0, 0, 2, 6), 90, 1);
    const Framing framing = frame_plan(p.plan);
    CHECK(joists_of(framing) == Ids{"J.1", "J.2.2", "J.3"});
    CHECK(member(framing, "J.2.2").from == Point{1, 2});
    CHECK(codes(framing).empty());
}

TEST_CASE("a field that asks for more joists than the plan may have is refused before they are made") {
    PlanBuilder p;
    hall(p, 9);
    p.field("J", rectangle(0, 0, 9, 6), 90, 1e-9);
    const Framing framing = frame_plan(p.plan);
    const Problem* much = find_problem(framing, ProblemCode::too_much);
    REQUIRE(much);
    CHECK(much->ids == Ids{"J"});
    CHECK(much->pointer == "/levels/0/joist_fields/0");
}

TEST_CASE("pieces of cut joists count against the limit too") {
    PlanBuilder p;
    hall(p, 3);
    p.column("C5", {0, 3}).column("C6", {3, 3}).girder("G3", {0, 3}, {3, 3});
    p.field("J", rectangle(0, 0, 3, 6), 90, 1).cut = true;
    Limits limits;
    limits.members = 11; // three girders and four joists of two pieces
    CHECK(codes(frame_plan(p.plan, limits)).empty());
    limits.members = 10;
    CHECK(codes(frame_plan(p.plan, limits)) == Ids{"too-much"});
}

TEST_CASE("skew joists are clipped at both girders and bear on them") {
    for (const double direction : {60.0, 75.0, 101.5, 120.0}) {
        CAPTURE(direction);
        PlanBuilder p;
        const double lean = 6 / std::tan(direction * std::acos(-1.0) / 180);
        p.column("C1", {0, 0}).column("C2", {9, 0}).column("C3", {lean, 6}).column("C4", {9 + lean, 6});
        p.girder("G1", {0, 0}, {9, 0}).girder("G2", {lean, 6}, {9 + lean, 6});
        p.field("J", {{0, 0}, {9, 0}, {9 + lean, 6}, {lean, 6}}, direction, 0.5);
        const Framing framing = frame_plan(p.plan);
        CHECK(codes(framing).empty());
        const FramedLevel& level = framing.levels.front();
        for (std::uint32_t m = 2; m < level.members.size(); ++m) {
            CHECK(level.bearings[m].size() == 2);
        }
    }
}
