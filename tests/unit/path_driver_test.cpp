#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;

namespace {

/// A deck of 6 x 4 that spans between two girders of 6, which overhang their columns by 1 at the right.
Plan small_floor() {
    Plan plan;
    plan.cases = {{"dead", CaseKind::dead, false, false, {}, {}, {}},
                  {"live", CaseKind::live, true, true, {}, {}, {}}};
    const auto column = [&](const char* id, double x, double y) {
        Column c;
        c.id = id;
        c.at = {x, y};
        c.top = "floor";
        c.self_weight = 0.4;
        plan.columns.push_back(c);
    };
    column("A", 0, 0);
    column("B", 5, 0);
    column("C", 0, 4);
    column("D", 5, 4);
    Level level;
    level.id = "floor";
    level.elevation = 3;
    for (const double y : {0.0, 4.0}) {
        Member girder;
        girder.id = y == 0 ? "G1" : "G2";
        girder.role = Role::girder;
        girder.from = {0, y};
        girder.to = {6, y};
        level.members.push_back(girder);
    }
    Deck deck;
    deck.id = "D1";
    deck.outline = {{0, 0}, {6, 0}, {6, 4}, {0, 4}};
    deck.direction = 90;
    deck.q = 1.5;
    level.decks.push_back(deck);
    AreaLoad load;
    load.case_id = "live";
    load.q = 2.5;
    level.area_loads.push_back(load);
    plan.levels.push_back(level);
    return plan;
}

bool has(const Takedown& takedown, ProblemCode code) {
    return std::any_of(takedown.problems.begin(), takedown.problems.end(),
                       [code](const Problem& problem) { return problem.code == code; });
}

} // namespace

TEST_CASE("a floor goes from its plan to the ground in one call") {
    const Takedown t = take_down(small_floor());
    REQUIRE(t.complete);
    REQUIRE(t.foundations.size() == 4);
    // Each girder takes 2 m of deck: live 5 kN/m x 6 = 30 with its middle 3 of 5 along: 12 and 18.
    CHECK(t.foundations[0].reactions[1] == doctest::Approx(12));
    CHECK(t.foundations[1].reactions[1] == doctest::Approx(18));
    // Dead: 3 kN/m x 6 = 18, so 7.2 and 10.8, and 1.2 of the column itself.
    CHECK(t.foundations[2].reactions[0] == doctest::Approx(8.4));
    CHECK(t.foundations[3].reactions[0] == doctest::Approx(12));
    CHECK(t.balance[0].applied.force == doctest::Approx(36 + 4.8));
    CHECK(t.balance[0].area == doctest::Approx(24));
    CHECK(check_balance(t).empty());
    CHECK_FALSE(has_errors(t.problems));
    // Half of the span and the overhang of 1 m go to the right: 2 m x 3.5.
    CHECK(t.columns[1].lifts[0].tributary_area == doctest::Approx(7));
    CHECK(t.columns[0].lifts[0].tributary_area == doctest::Approx(5));
}

TEST_CASE("an error in the framing ends the takedown with all problems and no numbers") {
    Plan plan = small_floor();
    plan.columns.pop_back(); // G2 hangs on C alone
    const Takedown t = take_down(plan);
    CHECK_FALSE(t.complete);
    CHECK(has_errors(t.problems));
    CHECK(has(t, ProblemCode::too_few_bearings));
    CHECK(t.foundations.empty());
}

TEST_CASE("the share that the options ask for stands instead of the plan's and of a deck's own") {
    Plan plan = small_floor();
    plan.settings.share = Share::half;
    plan.levels[0].decks[0].share = Share::half;
    TakedownOptions options;
    options.share = Share::lever;
    const Takedown t = take_down(plan, options);
    CHECK(t.plan.settings.share == Share::lever);
    CHECK(t.framing.levels[0].decks[0].share == Share::lever);
}

TEST_CASE("a plan without any load comes down as nothing, and its balance closes") {
    Plan plan = small_floor();
    plan.levels[0].area_loads.clear();
    plan.levels[0].decks[0].q.reset();
    for (Column& column : plan.columns) {
        column.self_weight.reset();
    }
    const Takedown t = take_down(plan);
    REQUIRE(t.complete);
    CHECK(check_balance(t).empty());
    for (const Foundation& foundation : t.foundations) {
        CHECK(foundation.reactions == std::vector<double>{0, 0});
    }
    CHECK(t.uplift.empty());
}
