#include "plan/look_ahead.hpp"
#include "problems/bad_plans.hpp"

#include <runnel/plan.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;

namespace {

std::string plan_with(std::string_view levels, std::string_view more = "",
                      std::string_view units = R"({"length": "m", "force": "kN"})") {
    std::string text = R"({"runnel": "plan/1", "units": )";
    text += units;
    text += R"(, "cases": [{"id": "dead", "kind": "dead"}, {"id": "live", "kind": "live"}])";
    text += more;
    text += R"(, "levels": )";
    text += levels;
    text += '}';
    return text;
}

const Problem* find(const PlanReading& reading, ProblemCode code) {
    const auto it = std::find_if(reading.problems.begin(), reading.problems.end(),
                                 [&](const Problem& p) { return p.code == code; });
    return it == reading.problems.end() ? nullptr : &*it;
}

} // namespace

TEST_CASE("a plan's values come in as kN and m") {
    const Plan plan =
        read_plan(plan_with(R"([{"id": "L", "elevation": 12, "members": [
        {"id": "G", "role": "girder", "from": [0, 0], "to": ["6 m", 0], "hinges": [3], "cut": true,
         "fixed_ends": ["to"], "bears_on": [], "carries_deck": false}],
        "decks": [{"id": "D", "outline": [[0, 0], [10, 0], [10, 10]], "direction": "45 deg", "q": 50}],
        "area_loads": [{"case": "live", "q": "2 kPa", "replaces": true, "allowance": "partition"}],
        "line_loads": [{"case": "dead", "w_from": 1, "w_to": 2, "from": [0, 1], "to": [1, 1]}],
        "point_loads": [{"case": "dead", "p": -3, "at": [1, 1]}]}])",
                            R"(, "settings": {"ground_elevation": -1, "self_weight_case": "dead"})",
                            R"({"length": "ft", "force": "kip"})"))
            .plan;
    const double kip = 4.4482216152605;
    REQUIRE(plan.levels.size() == 1);
    const Level& level = plan.levels[0];
    CHECK(level.elevation == doctest::Approx(12 * 0.3048).epsilon(1e-15));
    REQUIRE(level.members.size() == 1);
    const Member& girder = level.members[0];
    CHECK(girder.role == Role::girder);
    CHECK(girder.to.x == 6);
    CHECK(girder.hinges.at(0) == doctest::Approx(0.9144).epsilon(1e-15));
    CHECK(girder.cut);
    CHECK(girder.fixed_to);
    CHECK_FALSE(girder.fixed_from);
    CHECK_FALSE(girder.carries_deck);
    CHECK(level.decks.at(0).direction == 45);
    CHECK(level.decks[0].q.value() == doctest::Approx(50 * kip / (0.3048 * 0.3048)).epsilon(1e-14));
    CHECK(level.area_loads.at(0).q == 2);
    CHECK(level.area_loads[0].replaces);
    CHECK(level.area_loads[0].allowance == "partition");
    CHECK(level.line_loads.at(0).w_to == doctest::Approx(2 * kip / 0.3048).epsilon(1e-14));
    CHECK(level.point_loads.at(0).p == doctest::Approx(-3 * kip).epsilon(1e-14));
    CHECK(plan.settings.ground_elevation == doctest::Approx(-0.3048).epsilon(1e-15));
    CHECK(plan.settings.self_weight_case == "dead");
}

TEST_CASE("defaults are those of the format, and the ones used are listed") {
    const Plan plan =
        read_plan(plan_with(R"([{"id": "L", "elevation": 3}])", R"(, "settings": {"snap": "2 mm"})")).plan;
    CHECK(plan.settings.snap == 0.002);
    CHECK(plan.settings.ground_elevation == 0);
    CHECK(plan.settings.share == Share::half);
    CHECK(plan.defaults_used == std::vector<std::string>{"ground_elevation", "share", "self_weight_case"});
    CHECK_FALSE(plan.cases.at(0).reducible);
    CHECK_FALSE(plan.cases[0].pattern);
    CHECK(plan.cases.at(1).reducible);
    CHECK(plan.cases[1].pattern);
}

TEST_CASE("an own list of loads is told apart from none, for levels like another") {
    const Plan plan =
        read_plan(plan_with(R"([{"id": "A", "elevation": 3, "area_loads": [{"case": "live", "q": 2}]},
        {"id": "B", "elevation": 6, "like": "A", "area_loads": []}, {"id": "C", "elevation": 9, "like": "A"}])"))
            .plan;
    CHECK(plan.levels.at(0).own_area_loads);
    CHECK(plan.levels.at(1).own_area_loads);
    CHECK(plan.levels[1].area_loads.empty());
    CHECK_FALSE(plan.levels.at(2).own_area_loads);
    CHECK_FALSE(plan.levels[2].own_point_loads);
}

TEST_CASE("units that stand behind the quantities count for them too") {
    const std::string text = R"({"levels": [{"elevation": 4000, "id": "L"}], "settings": {"snap": 2},
        "cases": [], "runnel": "plan/1", "units": {"force": "N", "length": "mm"}})";
    const PlanReading reading = read_plan(text);
    CHECK(reading.problems.empty());
    CHECK(reading.plan.levels.at(0).elevation == 4);
    CHECK(reading.plan.settings.snap == 0.002);
    CHECK(reading.plan.units == Units{LengthUnit::mm, ForceUnit::N});
}

TEST_CASE("each object knows its line, its column, its level and its place in the list") {
    const PlanReading reading = read_plan(bad_plans::valid_plan());
    const Origin& second = reading.plan.levels.at(0).members.at(1).origin;
    CHECK(second.line == 32);
    CHECK(second.column == 9);
    CHECK(second.level == 0);
    CHECK(second.index == 1);
    const Origin& wall = reading.plan.walls.at(0).origin;
    CHECK(wall.line == 24);
    CHECK(wall.column == 5);
    CHECK(wall.level == Origin::nowhere);
    CHECK(wall.index == 0);
    const Origin& roof = reading.plan.levels.at(1).origin;
    CHECK(roof.line == 52);
    CHECK(roof.column == 5);
    CHECK(roof.index == 1);
}

TEST_CASE("columns count bytes, not characters") {
    // "Stra\u00dfe" has seven bytes; the bad value stands behind it on the same line.
    const std::string text = plan_with(R"([{"id": "Stra)"
                                       "\u00df"
                                       R"(e", "elevation": true}])");
    const PlanReading reading = read_plan(text);
    const Problem* problem = find(reading, ProblemCode::wrong_type);
    REQUIRE(problem != nullptr);
    CHECK(problem->line == 1);
    CHECK(problem->column == text.find("true") + 1);
}

TEST_CASE("an unknown key names the nearest known one, or what is known") {
    const auto hint = [](std::string_view key) {
        const std::string member =
            R"([{"id": "L", "elevation": 3, "members": [{"id": "G", "role": "beam", "from": [0, 0],
            "to": [1, 0], ")" +
            std::string(key) + R"(": 1}]}])";
        const PlanReading reading = read_plan(plan_with(member));
        const Problem* problem = find(reading, ProblemCode::unknown_key);
        return problem == nullptr ? std::string{} : problem->hint;
    };
    CHECK(hint("hinge") == "Did you mean `hinges`?");
    CHECK(hint("Section") == "Did you mean `section`?");
    CHECK(hint("sectoin") == "Did you mean `section`?");
    CHECK(hint("bears") == "Did you mean `bears_on`?");
    CHECK(hint("colour").substr(0, 9) == "Known are");
}

TEST_CASE("a ring that is too narrow is told by its mean width, one that nearly meets itself by the gap") {
    const auto told = [](const std::string& outline) {
        return read_plan(plan_with(R"([{"id": "L", "elevation": 3, "area_loads": [
            {"case": "live", "q": 1, "outline": )" +
                                   outline + "}]}]"))
            .problems;
    };
    const auto narrow = told("[[0, 0], [6, 0], [6, 0.01]]"); // 10 mm at one end
    REQUIRE(narrow.size() == 1);
    CHECK(narrow[0].code == ProblemCode::ring_too_small);
    CHECK(
        narrow[0].message ==
        "`outline` of area_loads[0] has an area of 0.03 m2 and a mean width (area by half the length around) "
        "of 0.00499583 m, no more than `snap`, 0.005 m.");
    CHECK(told("[[0, 0], [6, 0], [6, 0.0101]]").empty());

    const auto slit = told("[[0, 0], [2, 0], [2, 3], [2.002, 3], [2.002, 0], [4, 0], [4, 6], [0, 6]]");
    REQUIRE(slit.size() == 1);
    CHECK(slit[0].code == ProblemCode::ring_crosses_itself);
    CHECK(slit[0].message.find("comes within 0.002 m of itself at (2") != std::string::npos);
    CHECK(slit[0].message.find("`snap`, 0.005 m") != std::string::npos);

    for (const char* crossing :
         {"[[0, 0], [6, 4], [6, 0], [0, 4]]", "[[0, 0], [4, 0], [4, 6], [2, 0], [0, 6]]",
          "[[0, 0], [4, 0], [4, 6], [4, 8], [4, 6], [0, 6]]"}) {
        CAPTURE(crossing);
        const auto problems = told(crossing);
        REQUIRE(problems.size() == 1);
        CHECK(problems[0].message.find("crosses or touches itself at") != std::string::npos);
        CHECK(problems[0].message.find("snap") == std::string::npos);
    }
}

TEST_CASE("what is known is listed once each, and an unknown key is told whatever stands beside it") {
    const auto told = [](const std::string& area_load) {
        const PlanReading reading =
            read_plan(plan_with(R"([{"id": "L", "elevation": 3, "area_loads": [)" + area_load + "]}]"));
        const Problem* problem = find(reading, ProblemCode::unknown_key);
        return problem == nullptr ? std::string{} : problem->hint;
    };
    const std::string known = "Known are case, q, outline, openings, decks, replaces or allowance.";
    CHECK(told(R"({"case": "live", "q": 1, "colour": 1})") == known);
    CHECK(told(R"({"case": "live", "q": 1, "allowance": "partition", "colour": 1})") == known);
    CHECK(told(R"({"colour": 1, "case": "live", "q": 1, "allowance": "partition"})") == known);
}

TEST_CASE("an allowance has no effect yet, which is told also where nothing else is unusual") {
    const PlanReading reading = read_plan(plan_with(
        R"([{"id": "L", "elevation": 3, "area_loads": [{"case": "live", "q": 1, "allowance": "partition"}]}])"));
    const Problem* problem = find(reading, ProblemCode::not_supported_yet);
    REQUIRE(problem != nullptr);
    CHECK(problem->severity == Severity::note);
    CHECK(problem->pointer == "/levels/0/area_loads/0/allowance");
}

TEST_CASE("what is not JSON is told with what was likely meant") {
    const auto hint = [](std::string_view text) {
        const PlanReading reading = read_plan(text);
        REQUIRE_FALSE(reading.problems.empty());
        CHECK(reading.problems.back().code == ProblemCode::not_json);
        return reading.problems.back().hint;
    };
    CHECK(hint("{\"a\" 1}") == "Is a colon missing before it?");
    CHECK(hint("[1 [2]]") == "Is a comma missing before it?");
    CHECK(hint("[1, ]") == "Leave out the comma before it.");
    CHECK(hint("{title: 1}") == "Keys stand in double quotes.");
    CHECK(hint("['a']") == "Texts stand in double quotes.");
    CHECK(hint("# a plan") == "JSON has no comments.");
    CHECK(hint("[.5]") == "A number begins with a digit or a minus sign.");
    CHECK(hint("[-Infinity]") == "Infinities and not-a-number cannot be written.");
    CHECK(hint("[[1, 2") == "2 brackets are still open.");
    CHECK(hint("").empty());
}

TEST_CASE("many problems are found in one pass, in the order of the text") {
    const PlanReading reading = read_plan(R"({"runnel": "plan/1", "units": {"length": "m", "force": "kN"},
"cases": [{"id": "dead", "kind": "ded"}],
"levels": [{"id": "L", "elevation": "3 kN", "members": [
{"id": "G", "rol": "beam", "from": [0], "to": [1, "x"]},
{"id": "G/2", "role": "beam", "from": [0, 0], "to": [0, 0], "section": "s"}],
"area_loads": [{"case": "snow", "q": "2 psi psi"}]}]})");
    std::vector<std::string> found;
    std::uint32_t line = 0;
    for (const Problem& p : reading.problems) {
        found.emplace_back(kind_of(p.code).name);
        CHECK(p.line >= line);
        line = p.line;
    }
    const std::vector<std::string> expected{
        "unknown-choice", "wrong-dimension", "missing-key", "unknown-key", "wrong-type",     "bad-quantity",
        "zero-length",    "bad-id",          "unknown-id",  "unknown-id",  "wrong-dimension"};
    CHECK(found == expected);
}

TEST_CASE("a fault is reported once: what could not be read is not checked again") {
    // No zero length, no empty ring, no unknown case follow from values that are not there.
    const PlanReading reading = read_plan(plan_with(R"([{"id": "L", "elevation": 3,
        "members": [{"id": "G", "role": "beam", "from": "here", "to": [0, 0]}],
        "decks": [{"id": "D", "outline": [[0, 0], "there", [1, 1]], "direction": null}],
        "point_loads": [{"case": 3, "p": 1, "at": [0, 0]}]}])"));
    CHECK(reading.problems.size() == 4);
    for (const Problem& p : reading.problems) {
        CHECK_MESSAGE(p.code == ProblemCode::wrong_type, p.message);
    }
}

TEST_CASE("values that could not be read leave no trace in the plan") {
    const PlanReading reading = read_plan(plan_with(R"([{"elevation": "x", "members": [
        {"id": "G", "role": "beam", "from": [0, "a"], "to": [0, 0], "section": 4}]}])"));
    REQUIRE(reading.plan.levels.size() == 1);
    CHECK(reading.plan.levels[0].id.empty());
    CHECK(reading.plan.levels[0].elevation == 0);
    CHECK(reading.plan.levels[0].members.at(0).from.y == 0);
    CHECK(reading.plan.levels[0].members[0].section.empty());
}

TEST_CASE("keys without effect yet are noted once each, however many cases have them") {
    const PlanReading reading =
        read_plan(plan_with(R"([{"id": "L", "elevation": 3}])",
                            R"(, "columns": [{"id": "C", "at": [0, 0], "top": "L", "base_fixity": "fixed"},
        {"id": "D", "at": [1, 0], "top": "L", "base_fixity": "pinned"}])"));
    CHECK(reading.problems.size() == 1);
    CHECK(reading.problems.at(0).severity == Severity::note);
    CHECK(reading.problems[0].code == ProblemCode::not_supported_yet);
    CHECK(reading.problems[0].pointer == "/columns/0/base_fixity");
    CHECK_FALSE(has_errors(reading.problems));
}

TEST_CASE("the shape of what cannot be computed yet is checked all the same") {
    const PlanReading reading =
        read_plan(plan_with(R"([{"id": "L", "elevation": 3, "moving_point": {"p": 1}}])",
                            R"(, "frames": [{"id": "F", "members": "G", "sway": "loose"}],
        "combinations": [{"id": "c", "factors": {"dead": "a", "dead": 1, "wind": [1, 2, 3]}}],
        "reductions": {"rule": "asce8", "clumns": "area"})"));
    std::vector<std::string> found;
    for (const Problem& p : reading.problems) {
        found.push_back(std::string(kind_of(p.code).name) + ' ' + p.pointer);
    }
    std::sort(found.begin(), found.end());
    const std::vector<std::string> expected{"duplicate-key /combinations/0/factors/dead",
                                            "duplicate-key /combinations/0/factors/dead",
                                            "missing-key /levels/0/moving_point",
                                            "not-supported-yet /combinations",
                                            "not-supported-yet /frames",
                                            "not-supported-yet /levels/0/moving_point",
                                            "unknown-choice /frames/0/sway",
                                            "unknown-choice /reductions/rule",
                                            "unknown-id /combinations/0/factors/wind",
                                            "unknown-key /reductions/clumns",
                                            "wrong-type /combinations/0/factors/dead",
                                            "wrong-type /combinations/0/factors/wind",
                                            "wrong-type /frames/0/members"};
    CHECK(found == expected);
}

TEST_CASE("a bare id in a frame that stands on several levels is ambiguous, with its level it is not") {
    const std::string levels =
        R"([{"id": "A", "elevation": 3, "members": [{"id": "G", "role": "beam", "from": [0, 0], "to": [1, 0]}]},
        {"id": "B", "elevation": 6, "like": "A"}])";
    const PlanReading bare = read_plan(plan_with(levels, R"(, "frames": [{"id": "F", "members": ["G"]}])"));
    const Problem* problem = find(bare, ProblemCode::ambiguous_id);
    REQUIRE(problem != nullptr);
    CHECK(problem->pointer == "/frames/0/members/0");
    CHECK(problem->line == 1);
    const PlanReading with_level =
        read_plan(plan_with(levels, R"(, "frames": [{"id": "F", "members": ["B/G", "A/H"]}])"));
    CHECK(find(with_level, ProblemCode::ambiguous_id) == nullptr);
    REQUIRE(find(with_level, ProblemCode::unknown_id) != nullptr);
    CHECK(find(with_level, ProblemCode::unknown_id)->pointer == "/frames/0/members/1");
}

TEST_CASE("three points on one line give no plane of load") {
    const PlanReading reading = read_plan(plan_with(R"([{"id": "L", "elevation": 3, "area_loads": [
        {"case": "live", "q": {"at": [[0, 0], [1, 1], [2, 2]], "values": [1, 2, 3]}}]}])"));
    REQUIRE(find(reading, ProblemCode::plane_undefined) != nullptr);
    CHECK(find(reading, ProblemCode::plane_undefined)->pointer == "/levels/0/area_loads/0/q/at");
    CHECK(reading.problems.size() == 1);
}

TEST_CASE("a plane of pressure is read in its own units and in the plan's") {
    const PlanReading reading = read_plan(plan_with(R"([{"id": "L", "elevation": 3, "area_loads": [
        {"case": "live", "q": {"at": [[0, 0], ["5000 mm", 0], [0, 2]], "values": [1, "2000 Pa", "-3 kN/m2"]}}]}])"));
    CHECK(reading.problems.empty());
    const AreaLoad& load = reading.plan.levels.at(0).area_loads.at(0);
    REQUIRE(load.plane.has_value());
    CHECK(load.plane->at[1].x == doctest::Approx(5));
    CHECK(load.plane->values[1] == doctest::Approx(2));
    CHECK(load.plane->values[2] == -3);
}

TEST_CASE(
    "lever and continuous are for one-way decks: named by another, a warning; in the settings, nothing") {
    const auto decks = [](const char* span, const char* share) {
        const bool one_way = std::string(span) == "one-way";
        return std::string(R"([{"id": "L", "elevation": 3, "decks": [
            {"id": "D", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], )") +
               (one_way ? R"("direction": 0, )" : "") + R"("span": ")" + span + R"(", "share": ")" + share +
               R"("}]}])";
    };
    for (const char* span : {"two-way", "columns"}) {
        for (const char* share : {"lever", "continuous"}) {
            CAPTURE(span);
            CAPTURE(share);
            const PlanReading reading = read_plan(plan_with(decks(span, share)));
            REQUIRE(reading.problems.size() == 1);
            CHECK(reading.problems[0].code == ProblemCode::key_has_no_effect);
            CHECK(reading.problems[0].severity == Severity::warning);
            CHECK(reading.problems[0].pointer == "/levels/0/decks/0/share");
        }
        CHECK(read_plan(plan_with(decks(span, "half"))).problems.empty());
        CHECK(read_plan(plan_with(decks(span, "half"), R"(, "settings": {"share": "lever"})"))
                  .problems.empty());
    }
    CHECK(read_plan(plan_with(decks("one-way", "lever"))).problems.empty());
}

TEST_CASE("a direction is for one-way decks: given for another it is a warning, whatever its value") {
    const auto deck = [](const char* rest) {
        return std::string(R"([{"id": "L", "elevation": 3, "decks": [
            {"id": "D", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], )") +
               rest + "}]}]";
    };
    const PlanReading two_way = read_plan(plan_with(deck(R"("span": "two-way", "direction": 0)")));
    REQUIRE(two_way.problems.size() == 1);
    CHECK(two_way.problems[0].code == ProblemCode::key_has_no_effect);
    CHECK(two_way.problems[0].severity == Severity::warning);
    CHECK(two_way.problems[0].pointer == "/levels/0/decks/0/direction");
    CHECK(two_way.problems[0].message ==
          "`direction` of deck D is given, which only one-way decks follow; this one is `two-way`, where all "
          "load goes to what is nearest.");
    CHECK(read_plan(plan_with(deck(R"("span": "columns", "direction": 90)"))).problems.size() == 1);
    CHECK(read_plan(plan_with(deck(R"("span": "columns")"))).problems.empty());
    CHECK(read_plan(plan_with(deck(R"("direction": 90)"))).problems.empty());
    // A span that cannot be read is told alone.
    CHECK(read_plan(plan_with(deck(R"("span": "sideways", "direction": 90)"))).problems.size() == 1);
}

TEST_CASE("corner angles are read, and are equal where nothing is said") {
    const PlanReading reading = read_plan(plan_with(R"([{"id": "L", "elevation": 3, "decks": [
        {"id": "D", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], "span": "two-way", "corner_angles": "by_fixity"},
        {"id": "E", "outline": [[6, 0], [9, 0], [9, 4], [6, 4]], "span": "two-way"},
        {"id": "F", "outline": [[9, 0], [12, 0], [12, 4], [9, 4]], "direction": 0, "corner_angles": "equal"}]}])"));
    CHECK(reading.problems.empty());
    const std::vector<Deck>& decks = reading.plan.levels.at(0).decks;
    CHECK(decks.at(0).corner_angles == CornerAngles::by_fixity);
    CHECK(decks.at(1).corner_angles == CornerAngles::equal);
}

TEST_CASE("problems that only have a pointer are found in the text, absent ones at what encloses them") {
    std::vector<Problem> problems(5);
    problems[0].pointer = "/levels/0/members/1/to/1";
    problems[1].pointer = "/levels/1/decks/7/outline";
    problems[2].pointer = "/a~1b/~0";
    problems[3].pointer = "";
    problems[4].pointer = "/levels/0/members/0";
    problems[4].line = 99;
    locate_problems("{\"a/b\": {\"~\": 1},\n\"levels\": [{\"members\": [{},\n {\"to\": [0, 25]}]},\n  {}]}",
                    problems);
    CHECK(problems[0].line == 3);
    CHECK(problems[0].column == 13);
    CHECK(problems[1].line == 4);
    CHECK(problems[1].column == 3);
    CHECK(problems[2].line == 1);
    CHECK(problems[2].column == 15);
    CHECK(problems[3].line == 0);
    CHECK(problems[4].line == 99);
}

TEST_CASE("locating survives a text that breaks off") {
    std::vector<Problem> problems(1);
    problems[0].pointer = "/levels/3/id";
    locate_problems("{\"levels\": [{\"id\": ", problems);
    CHECK(problems[0].line == 1);
    CHECK(problems[0].column == 12);
}

TEST_CASE("elements are counted ahead, texts and nested lists passed over") {
    CHECK(count_elements("[]", 0).elements == 0);
    CHECK(count_elements("[ \n ]", 0).elements == 0);
    CHECK(count_elements("x [1]", 2).elements == 1);
    CHECK(count_elements(R"([{"a": [1, 2]}, "[,\",", 3])", 0).elements == 3);
    CHECK(count_elements("[1, 2", 0).elements == 1);
}

TEST_CASE("a level like another may load its members and decks, and bear on its joists") {
    const std::string levels = R"([{"id": "A", "elevation": 3,
        "members": [{"id": "G", "role": "beam", "from": [0, 0], "to": [6, 0]}],
        "joist_fields": [{"id": "J", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], "direction": 90, "spacing": 1}],
        "decks": [{"id": "D", "outline": [[0, 0], [6, 0], [6, 4], [0, 4]], "direction": 0}]},
        {"id": "B", "elevation": 6, "like": "A",
         "members": [{"id": "T", "role": "joist", "from": [0, 1], "to": [2, 1], "bears_on": ["J.2", "B/J.3.1", "G"]}],
         "area_loads": [{"case": "live", "q": 1, "decks": ["D"]}],
         "point_loads": [{"case": "live", "p": 1, "at": [1, 0], "on": "G"}, {"case": "live", "p": 1, "at": [1, 0], "on": "J.7"}]}])";
    const PlanReading reading = read_plan(plan_with(levels));
    CHECK_MESSAGE(reading.problems.empty(), reading.problems.at(0).message);
}

TEST_CASE("common ways of drawing are no problem") {
    const auto deck = [](std::string_view outline, std::string_view openings) {
        return plan_with(R"([{"id": "L", "elevation": 3, "decks": [{"id": "D", "direction": 0, "outline": )" +
                         std::string(outline) + R"(, "openings": )" + std::string(openings) + "}]}]");
    };
    const std::string_view bay = "[[0, 0], [9, 0], [9, 6], [0, 6]]";
    const auto fine = [](const std::string& text) { return read_plan(text).problems.empty(); };
    SUBCASE("clockwise") {
        CHECK(fine(deck("[[0, 0], [0, 6], [9, 6], [9, 0]]", "[]")));
    }
    SUBCASE("closed by its first point again") {
        CHECK(fine(deck("[[0, 0], [9, 0], [9, 6], [0, 6], [0, 0]]", "[]")));
    }
    SUBCASE("a corner on a straight edge") {
        CHECK(fine(deck("[[0, 0], [4, 0], [9, 0], [9, 6], [0, 6]]", "[]")));
    }
    SUBCASE("a stair at the slab's edge") {
        CHECK(fine(deck(bay, "[[[3, 0], [5, 0], [5, 2], [3, 2]]]")));
    }
    SUBCASE("a stair over the edge by less than snap") {
        CHECK(fine(deck(bay, "[[[3, -0.004], [5, -0.004], [5, 2], [3, 2]]]")));
    }
    SUBCASE("two openings side by side") {
        CHECK(fine(deck(bay, "[[[3, 1], [5, 1], [5, 2], [3, 2]], [[5, 1], [7, 1], [7, 3], [5, 3]]]")));
    }
    SUBCASE("two openings that meet at a corner") {
        CHECK(fine(deck(bay, "[[[3, 1], [5, 1], [5, 2], [3, 2]], [[5, 2], [7, 2], [7, 3], [5, 3]]]")));
    }
    SUBCASE("an L and an opening in its notch's shadow") {
        CHECK(fine(
            deck("[[0, 0], [9, 0], [9, 3], [4, 3], [4, 6], [0, 6]]", "[[[1, 1], [3, 1], [3, 5], [1, 5]]]")));
    }
    SUBCASE("a fine arc of points nearer than snap") {
        CHECK(fine(deck("[[0, 0], [9, 0], [9.002, 0.003], [9.003, 0.006], [9, 6], [0, 6]]", "[]")));
    }
}
