#include "problems/bad_plans.hpp"

#include <runnel/plan.hpp>

#include <doctest/doctest.h>

#include <cmath>
#include <functional>
#include <limits>
#include <string>
#include <vector>

using namespace runnel;

namespace {

Plan small_plan() {
    Plan plan;
    plan.cases = {{"dead", CaseKind::dead, false, false, "", "", {}}};
    plan.sections.push_back({"s", 210e6, 1e-4, 0.01, 0.3, 0.5, {}, {}});
    Column column;
    column.id = "C";
    column.top = "L";
    plan.columns.push_back(column);
    Level level;
    level.id = "L";
    level.elevation = 3;
    Member member;
    member.id = "G";
    member.to = {6, 0};
    member.section = "s";
    level.members.push_back(member);
    Deck deck;
    deck.id = "D";
    deck.outline = {{0, 0}, {6, 0}, {6, 4}, {0, 4}};
    deck.direction = 0;
    level.decks.push_back(deck);
    JoistField field;
    field.id = "J";
    field.outline = deck.outline;
    field.spacing = 0.6;
    level.joist_fields.push_back(field);
    AreaLoad load;
    load.case_id = "dead";
    load.q = 2;
    level.area_loads.push_back(load);
    plan.levels.push_back(level);
    return plan;
}

} // namespace

TEST_CASE("a plan built in code is checked like one that was read, with pointers by its own indices") {
    CHECK(check_plan(small_plan()).empty());
    struct Row {
        const char* sentence;
        std::function<void(Plan&)> change;
        ProblemCode code;
        const char* pointer;
    };
    const double nan = std::numeric_limits<double>::quiet_NaN();
    const double infinity = std::numeric_limits<double>::infinity();
    const std::vector<Row> rows{
        {"a coordinate that is not a number", [&](Plan& p) { p.levels[0].members[0].to.y = nan; },
         ProblemCode::out_of_range, "/levels/0/members/0/to/1"},
        {"an infinite pressure", [&](Plan& p) { p.levels[0].area_loads[0].q = infinity; },
         ProblemCode::out_of_range, "/levels/0/area_loads/0/q"},
        {"a spacing that is not a number", [&](Plan& p) { p.levels[0].joist_fields[0].spacing = nan; },
         ProblemCode::out_of_range, "/levels/0/joist_fields/0/spacing"},
        {"an elevation that is not a number", [&](Plan& p) { p.levels[0].elevation = nan; },
         ProblemCode::out_of_range, "/levels/0/elevation"},
        {"a corner that is not a number", [&](Plan& p) { p.levels[0].decks[0].outline[2].x = nan; },
         ProblemCode::out_of_range, "/levels/0/decks/0/outline/2/0"},
        {"no outline", [&](Plan& p) { p.levels[0].decks[0].outline.clear(); }, ProblemCode::ring_too_small,
         "/levels/0/decks/0/outline"},
        {"no id", [&](Plan& p) { p.levels[0].members[0].id.clear(); }, ProblemCode::bad_id,
         "/levels/0/members/0/id"},
        {"an id with a slash", [&](Plan& p) { p.columns[0].id = "a/b"; }, ProblemCode::bad_id,
         "/columns/0/id"},
        {"no direction", [&](Plan& p) { p.levels[0].decks[0].direction.reset(); }, ProblemCode::missing_key,
         "/levels/0/decks/0"},
        {"no such section", [&](Plan& p) { p.levels[0].members[0].section = "t"; }, ProblemCode::unknown_id,
         "/levels/0/members/0/section"},
        {"no dead case", [&](Plan& p) { p.cases[0].kind = CaseKind::live; }, ProblemCode::no_dead_case,
         "/cases"},
        {"openings of an area load on all decks",
         [&](Plan& p) {
             p.levels[0].area_loads[0].openings = {Ring{{1, 1}, {2, 1}, {2, 2}}};
         },
         ProblemCode::conflicting_keys, "/levels/0/area_loads/0/openings"},
        {"corner angles of a deck on columns",
         [&](Plan& p) {
             p.levels[0].decks[0].span = SpanKind::columns;
             p.levels[0].decks[0].direction.reset();
             p.levels[0].decks[0].corner_angles = CornerAngles::by_fixity;
         },
         ProblemCode::conflicting_keys, "/levels/0/decks/0/corner_angles"},
        {"the continuous share of a two-way deck",
         [&](Plan& p) {
             p.levels[0].decks[0].span = SpanKind::two_way;
             p.levels[0].decks[0].share = Share::continuous;
             p.levels[0].decks[0].direction.reset();
         },
         ProblemCode::key_has_no_effect, "/levels/0/decks/0/share"},
        {"the direction of a deck on columns",
         [&](Plan& p) { p.levels[0].decks[0].span = SpanKind::columns; }, ProblemCode::key_has_no_effect,
         "/levels/0/decks/0/direction"},
        {"a joist and no end of them", [&](Plan& p) { p.levels[0].joist_fields[0].spacing = 1e-8; },
         ProblemCode::too_much, "/levels/0/joist_fields/0/spacing"},
        {"more levels than the limit",
         [&](Plan& p) {
             for (int i = 1; i <= 1000; ++i) {
                 Level level;
                 level.id = "L" + std::to_string(i);
                 level.elevation = 3 + i;
                 p.levels.push_back(level);
             }
         },
         ProblemCode::too_much, "/levels"},
    };
    for (const Row& row : rows) {
        CAPTURE(row.sentence);
        Plan plan = small_plan();
        row.change(plan);
        const std::vector<Problem> problems = check_plan(plan);
        REQUIRE(problems.size() == 1);
        CHECK(problems[0].code == row.code);
        CHECK(problems[0].pointer == row.pointer);
        CHECK(problems[0].line == 0);
    }
}

TEST_CASE("values come back in the plan's units in what a problem says") {
    Plan plan = small_plan();
    plan.units = {LengthUnit::ft, ForceUnit::kip};
    plan.levels[0].joist_fields[0].spacing = -0.3048;
    const std::vector<Problem> problems = check_plan(plan);
    REQUIRE(problems.size() == 1);
    CHECK(problems[0].message == "`spacing` of joist field J is -1 ft; it must be greater than 0.");
}

TEST_CASE("checking the plan that was read finds the same as reading it") {
    for (const auto rows : {bad_plans::rows_on_references(), bad_plans::rows_on_geometry()}) {
        for (const bad_plans::Row& row : rows) {
            CAPTURE(row.sentence);
            const bad_plans::Changed text = bad_plans::changed(row);
            const PlanReading reading = read_plan(text.text);
            std::vector<Problem> again = check_plan(reading.plan);
            if (row.schema == bad_plans::Schema::rejects) {
                continue; // what could not be read is not in the plan
            }
            locate_problems(text.text, again);
            REQUIRE(again.size() == 1);
            CHECK(again[0].code == row.code);
            CHECK(again[0].pointer == row.pointer);
            CHECK(again[0].line == text.line);
            CHECK(again[0].column == text.column);
            CHECK(again[0].message == reading.problems.at(0).message);
        }
    }
}
