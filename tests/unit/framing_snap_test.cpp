#include "support/framing_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>

using namespace runnel;
using namespace framing_support;

namespace {
const FramedMember& member(const Framing& framing, const std::string& id) {
    const FramedLevel& level = framing.levels.front();
    const std::uint32_t index = member_index(level, id);
    REQUIRE(index != none);
    return level.members[index];
}
} // namespace

TEST_CASE("where nothing is near anything, nothing moves by a bit") {
    PlanBuilder p;
    const double third = 1.0 / 3;
    p.column("C1", {0.1, third}).column("C2", {9.7, 2 * third}).girder("G", {0.1, third}, {9.7, 2 * third});
    p.beam("B", {4.1, 5.3 + third}, {4.2, 8.1});
    p.deck("D", {{0.2, 0.3}, {7.1, 0.7}, {6.3, 5.1 + third}});
    const Framing framing = frame_plan(p.plan);
    CHECK(member(framing, "G").from == Point{0.1, third});
    CHECK(member(framing, "G").to == Point{9.7, 2 * third});
    CHECK(member(framing, "B").from == Point{4.1, 5.3 + third});
    CHECK(framing.levels[0].decks[0].outline == p.floor().decks[0].outline);
    CHECK_FALSE(find_problem(framing, ProblemCode::points_merged));
}

TEST_CASE("a girder's end within snap of a column moves onto it; the column stays") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {9, 0}).girder("G", {0.003, -0.002}, {9.001, 0.001});
    const Framing framing = frame_plan(p.plan);
    CHECK(member(framing, "G").from == Point{0, 0});
    CHECK(member(framing, "G").to == Point{9, 0});
    CHECK(member(framing, "G").length == 9);
    const Problem* note = find_problem(framing, ProblemCode::points_merged);
    REQUIRE(note);
    CHECK(note->severity == Severity::note);
    CHECK(note->message == "On level floor 2 points were moved, by 0.00360555 m at most (snap is 0.005 m).");
}

TEST_CASE("of ends within snap the girder's stays, then the beam's, then the joist's") {
    PlanBuilder p;
    p.joist("A", {0.004, 0}, {0.004, 5}).beam("B", {0, 0.003}, {-5, 0.003}).girder("Z", {0, 0}, {7, 0});
    const Framing framing = frame_plan(p.plan);
    CHECK(member(framing, "Z").from == Point{0, 0});
    CHECK(member(framing, "B").from == Point{0, 0});
    CHECK(member(framing, "A").from == Point{0, 0});
    CHECK(member(framing, "A").to == Point{0.004, 5});
}

TEST_CASE("points are not joined in chains longer than snap") {
    PlanBuilder p;
    for (int i = 0; i < 10; ++i) {
        p.beam(numbered("B", i), {0.004 * i, 0}, {0.004 * i + 3, 5.0 + i});
    }
    const Framing framing = frame_plan(p.plan);
    for (int i = 0; i < 10; ++i) {
        const Point drawn{0.004 * i, 0};
        const Point at = member(framing, numbered("B", i)).from;
        CHECK(std::hypot(at.x - drawn.x, at.y - drawn.y) <= 0.005);
        CHECK(at == Point{0.004 * (i - i % 2), 0});
    }
}

TEST_CASE("an end within snap of an axis moves onto it, after that axis has moved itself") {
    PlanBuilder p;
    // G's ends go onto the columns, which lowers its axis by 3 mm; B's end was drawn on the axis as drawn.
    p.column("C1", {0, 0}).column("C2", {9, 0}).girder("G", {0, 0.003}, {9, 0.003});
    p.beam("B", {4, 0.003}, {4, 6}).beam("K", {4, 0.004 + 2}, {7, 2.5});
    const Framing framing = frame_plan(p.plan);
    CHECK(member(framing, "B").from.x == doctest::Approx(4));
    CHECK(std::abs(member(framing, "B").from.y) < 1e-12);
    CHECK(member(framing, "K").from.x == 4);
}

TEST_CASE("an end within snap of a wall's axis moves onto the wall") {
    PlanBuilder p;
    p.wall("W", {0, 0}, {9, 0}).beam("B", {4, 0.004}, {4, 6});
    CHECK(std::abs(member(frame_plan(p.plan), "B").from.y) < 1e-12);
}

TEST_CASE("a deck's corners move onto columns and axes, and meet other decks") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {9, 0}).girder("G", {0, 0}, {9, 0});
    p.deck("D1", {{0.003, 0.002}, {4.5, -0.003}, {4.5, 6}, {0, 6}});
    p.deck("D2", {{4.502, 0.001}, {9, 0.004}, {9, 6}, {4.503, 6.001}});
    const Framing framing = frame_plan(p.plan);
    const std::vector<FramedDeck>& decks = framing.levels[0].decks;
    CHECK(decks[0].outline[0] == Point{0, 0});
    CHECK(decks[0].outline[1].x == doctest::Approx(4.5));
    CHECK(std::abs(decks[0].outline[1].y) < 1e-12);
    CHECK(decks[1].outline[0] == decks[0].outline[1]);
    CHECK(decks[1].outline[1] == Point{9, 0});
    CHECK(decks[1].outline[3] == Point{4.5, 6});
    CHECK_FALSE(find_problem(framing, ProblemCode::decks_overlap));
}

TEST_CASE("outlines run counter-clockwise, openings clockwise, and repeated points are dropped") {
    PlanBuilder p;
    Ring clockwise = rectangle(0, 0, 9, 6);
    std::reverse(clockwise.begin(), clockwise.end());
    clockwise.push_back({0.002, 6.001});
    clockwise.insert(clockwise.begin(), {0.001, 6});
    Deck& deck = p.deck("D", clockwise);
    deck.openings = {rectangle(2, 2, 3, 3)};
    const FramedDeck framed = frame_plan(p.plan).levels[0].decks[0];
    CHECK(framed.outline.size() == 4);
    const auto area = [](const Ring& ring) {
        double twice = 0;
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Point a = ring[i];
            const Point b = ring[(i + 1) % ring.size()];
            twice += a.x * b.y - b.x * a.y;
        }
        return twice / 2;
    };
    CHECK(area(framed.outline) == doctest::Approx(54).epsilon(1e-3));
    CHECK(area(framed.openings[0]) == doctest::Approx(-1));
}

TEST_CASE("an opening's corner within snap of the deck's edge moves onto it") {
    PlanBuilder p;
    Deck& deck = p.deck("D", rectangle(0, 0, 9, 6));
    deck.openings = {{{2, 0.004}, {4, 0.003}, {4, 2}, {2, 2}}};
    const Framing framing = frame_plan(p.plan);
    int on_edge = 0;
    for (const Point corner : framing.levels[0].decks[0].openings[0]) {
        on_edge += corner.y == 0 ? 1 : 0;
    }
    CHECK(on_edge == 2);
}

TEST_CASE("a member's end within snap of the inside of a deck's edge becomes a corner of it") {
    PlanBuilder p;
    p.beam("B1", {4, 0.003}, {4, 5.998}).beam("B2", {6, 0}, {6, 6}).column("C", {9.004, 3});
    p.deck("D", rectangle(0, 0, 9, 6));
    const Ring outline = frame_plan(p.plan).levels[0].decks[0].outline;
    CHECK(outline.size() == 7);
    for (const Point corner : {Point{4, 0.003}, Point{4, 5.998}, Point{9.004, 3}}) {
        CHECK(std::count(outline.begin(), outline.end(), corner) == 1);
    }
}

TEST_CASE("a member of which snapping leaves one point is refused") {
    PlanBuilder p;
    p.column("C", {0, 0}).beam("B", {0.001, 0}, {0, 0.004});
    const Framing framing = frame_plan(p.plan);
    const Problem* zero = find_problem(framing, ProblemCode::zero_length);
    REQUIRE(zero);
    CHECK(zero->ids == std::vector<std::string>{"B"});
}

TEST_CASE("decks that overlap are refused with the area and the place, however they are drawn") {
    for (const Redrawing& how : redrawings()) {
        CAPTURE(how.name);
        PlanBuilder p;
        p.deck("D1", {{0, 0}, {6, 0}, {6, 3}, {3, 3}, {3, 6}, {0, 6}});
        p.deck("D2", rectangle(5, 2, 9, 6)); // shares 1 m2 with D1
        p.deck("D3", rectangle(3, 3, 5, 6)); // meets both along edges
        const Framing framing = frame_plan(redrawn(p.plan, how));
        CHECK(codes(framing) == std::vector<std::string>{"decks-overlap"});
        const Problem* overlap = find_problem(framing, ProblemCode::decks_overlap);
        REQUIRE(overlap);
        CHECK(overlap->message.find("overlap by 1 m2") != std::string::npos);
        CHECK(overlap->ids == std::vector<std::string>{"D1", "D2"});
        const Point middle = redrawn({5.5, 2.5}, how);
        REQUIRE(overlap->point);
        CHECK(std::hypot(overlap->point->x - middle.x, overlap->point->y - middle.y) < 0.5);
    }
}

TEST_CASE("a deck in another's opening does not overlap it, nor does a strip thinner than snap") {
    PlanBuilder p;
    Deck& outer = p.deck("D1", rectangle(0, 0, 9, 6));
    outer.openings = {rectangle(3, 2, 5, 4)};
    p.deck("D2", rectangle(3, 2, 5, 4));
    p.deck("D3", {{8.996, -1}, {12, -1}, {12, 7}, {8.996, 7}});
    CHECK(codes(frame_plan(p.plan)).empty());
}

TEST_CASE("own weight of a deck is its q and its build together") {
    PlanBuilder p;
    p.plan.builds = {{"floor", {{"screed", 0.05, 22.0, {}}, {"boards", {}, {}, 0.2}}, {}}};
    Deck& deck = p.deck("D", rectangle(0, 0, 9, 6));
    deck.q = 0.5;
    deck.build = "floor";
    CHECK(frame_plan(p.plan).levels[0].decks[0].own_weight == doctest::Approx(1.8));
}

TEST_CASE("a deck's edge that is drawn to a column beside it is told, since that changes its area") {
    PlanBuilder p;
    p.column("C1", {3, 0.004});
    p.deck("D", rectangle(0, 0, 6, 4));
    const Framing framing = frame_plan(p.plan);
    REQUIRE(framing.levels[0].decks[0].outline.size() == 5);
    const Problem* note = find_problem(framing, ProblemCode::points_merged);
    REQUIRE(note);
    CHECK(note->message ==
          "On level floor 1 place of a deck's edge was drawn to a point beside it, by 0.004 m at "
          "most (snap is 0.005 m).");
}

TEST_CASE("openings that overlap by less than snap are drawn to touch") {
    PlanBuilder p;
    p.deck("D", rectangle(0, 0, 6, 4)).openings = {rectangle(2, 1, 3, 2), rectangle(2.2, 1.996, 2.8, 2.5)};
    const Framing framing = frame_plan(p.plan);
    CHECK_FALSE(has_errors(framing.problems));
    double area = 0;
    for (const Ring& opening : framing.levels[0].decks[0].openings) {
        for (std::size_t i = 0; i < opening.size(); ++i) {
            const Point a = opening[i];
            const Point b = opening[(i + 1) % opening.size()];
            area -= (a.x * b.y - b.x * a.y) / 2; // clockwise
        }
    }
    // Of the first opening a trapezoid of 1 m by 0.6 m, 4 mm high, is left to the second.
    CHECK(area == doctest::Approx(1 + 0.6 * 0.504 - 0.004 * 0.8).epsilon(1e-12));
}

TEST_CASE("an opening that a point beside it draws together is refused, not folded") {
    PlanBuilder p;
    p.deck("D", rectangle(0, 0, 6, 4)).openings = {rectangle(1, 1, 1.008, 3)};
    p.column("C1", {1.004, 2});
    const Framing framing = frame_plan(p.plan);
    const Problem* problem = find_problem(framing, ProblemCode::ring_too_small);
    REQUIRE(problem != nullptr);
    CHECK(problem->point == Point{1.004, 2});
}

TEST_CASE("two columns at one point between the same levels are refused; one on the other is not") {
    PlanBuilder p;
    p.column("C1", {0, 0}).column("C2", {0.003, 0});
    CHECK(codes(frame_plan(p.plan), Severity::error) == std::vector<std::string>{"columns-coincide"});
    p.plan.levels.push_back(p.floor());
    p.plan.levels.back().id = "roof";
    p.plan.levels.back().elevation = 7;
    p.plan.columns[1].base = p.floor().id;
    p.plan.columns[1].top = "roof";
    CHECK(codes(frame_plan(p.plan), Severity::error).empty());
}

TEST_CASE("a column in an opening of a deck on columns carries nothing, one on the opening's edge does") {
    PlanBuilder p;
    Deck& deck = p.deck("D", rectangle(0, 0, 6, 4));
    deck.span = SpanKind::columns;
    deck.openings = {rectangle(2, 1, 4, 3)};
    p.column("C1", {3, 2}).column("C2", {4, 2}).column("C3", {0, 0});
    const Framing framing = frame_plan(p.plan);
    const Problem* problem = find_problem(framing, ProblemCode::carries_nothing);
    REQUIRE(problem != nullptr);
    CHECK(problem->ids == std::vector<std::string>{"C1"});
    CHECK(codes(framing) == std::vector<std::string>{"carries-nothing"});
}
