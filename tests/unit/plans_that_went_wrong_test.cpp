// Small plans that a reader of the formats wrote and that once came out wrong, each a sentence.

#include "report/some_cases.hpp"
#include "support/problem_support.hpp"

#include <runnel/plan.hpp>
#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;
using doctest::Approx;

namespace {

/// A floor of 8 m by 6 m: two beams on four columns, joists over them drawn by hand or as a field.
std::string floor_plan(const std::string& level, const std::string& more_columns = "",
                       const std::string& more_levels = "") {
    return R"({"runnel":"plan/1","units":{"length":"m","force":"kN"},
        "cases":[{"id":"dead","kind":"dead"},{"id":"live","kind":"live"}],
        "columns":[{"id":"A","at":[0,0],"top":"f"},{"id":"B","at":[8,0],"top":"f"},
                   {"id":"C","at":[0,6],"top":"f"},{"id":"D","at":[8,6],"top":"f"})" +
           more_columns + R"(],"levels":[{"id":"f","elevation":3,)" + level + "}" + more_levels + "]}";
}

const std::string beams = R"({"id":"S","role":"beam","from":[0,0],"to":[8,0]},
    {"id":"N","role":"beam","from":[0,6],"to":[8,6]})";
const std::string outline = R"([[0,0],[8,0],[8,6],[0,6]])";
const std::string field =
    R"("joist_fields":[{"id":"J","outline":)" + outline + R"(,"direction":90,"spacing":2}],)";

std::string framed_floor(const std::string& loads, const std::string& more_members = "",
                         const std::string& fields = field) {
    return R"("members":[)" + beams + more_members + "]," + fields +
           R"("decks":[{"id":"D","direction":0,"outline":)" + outline + "}]," + loads;
}

struct Outcome {
    Takedown takedown;
    std::vector<Problem> problems;

    [[nodiscard]] std::size_t count(ProblemCode code) const {
        return static_cast<std::size_t>(std::count_if(problems.begin(), problems.end(),
                                                      [code](const Problem& p) { return p.code == code; }));
    }
    [[nodiscard]] double arrived(std::size_t load_case) const {
        double sum = 0;
        for (const Foundation& foundation : takedown.foundations) {
            sum += foundation.reactions[load_case];
        }
        return sum;
    }
};

Outcome outcome_of(const std::string& text) {
    PlanReading reading = read_plan(text);
    Outcome outcome;
    outcome.problems = reading.problems;
    if (!has_errors(reading.problems)) {
        outcome.takedown = take_down(std::move(reading.plan));
        outcome.problems.insert(outcome.problems.end(), outcome.takedown.problems.begin(),
                                outcome.takedown.problems.end());
    }
    return outcome;
}

} // namespace

TEST_CASE("an area load names its deck with the level before it") {
    const std::string loads = R"("area_loads":[{"case":"live","q":2,"decks":["f/D"]}])";
    CHECK(outcome_of(floor_plan(framed_floor(loads))).arrived(1) == Approx(96.0));
    // A level that repeats the load means its own deck.
    const std::string above = R"(,{"id":"h","elevation":6,"like":"f"})";
    std::string two = floor_plan(framed_floor(loads), "", above);
    for (std::size_t at = two.find(R"("top":"f")"); at != std::string::npos;
         at = two.find(R"("top":"f")", at)) {
        two.replace(at, 9, R"("top":"h")");
    }
    CHECK(outcome_of(two).arrived(1) == Approx(192.0));
}

TEST_CASE("a joist of a field has the id of no other carrier") {
    const std::string loads = R"("area_loads":[{"case":"live","q":2}])";
    CHECK(outcome_of(floor_plan(framed_floor(loads))).count(ProblemCode::duplicate_id) == 0);
    const std::string member = R"(,{"id":"J.2","role":"beam","from":[0,3],"to":[8,3],"bears_on":["A"]})";
    CHECK(outcome_of(floor_plan(framed_floor(loads, member))).count(ProblemCode::duplicate_id) == 1);
    CHECK(outcome_of(floor_plan(framed_floor(loads), R"(,{"id":"J.3","at":[4,3],"top":"f"})"))
              .count(ProblemCode::duplicate_id) == 1);
}

TEST_CASE("a column that lifts off the beam it stands on is named") {
    const std::string level = framed_floor(R"("area_loads":[{"case":"live","q":1}])");
    const std::string above = R"(,{"id":"h","elevation":6,"members":[
        {"id":"U","role":"beam","from":[2,0],"to":[6,0]}],"point_loads":[{"case":"live","p":-7,"at":[2,0],"on":"U"}]})";
    const Outcome outcome = outcome_of(floor_plan(
        level, R"(,{"id":"T1","at":[2,0],"base":"f","top":"h"},{"id":"T2","at":[6,0],"base":"f","top":"h"})",
        above));
    REQUIRE_MESSAGE(outcome.takedown.complete, support::texts_of_errors(outcome.problems));
    const auto foot =
        std::find_if(outcome.takedown.uplift.begin(), outcome.takedown.uplift.end(), [](const Uplift& u) {
            return u.member == none && u.level == 0 && u.upper.kind == CarrierKind::column;
        });
    REQUIRE(foot != outcome.takedown.uplift.end());
    CHECK(outcome.takedown.plan.columns[foot->upper.index].id == "T1");
    CHECK(foot->value == Approx(-7.0));
}

TEST_CASE("rounding under an unloaded column is no uplift") {
    // All load over one end: the other end's reaction is nothing but rounding, of either sign.
    for (const double w : {0.1, 0.3, 0.7, 1.1, 3.3}) {
        const std::string loads =
            R"("area_loads":[{"case":"live","q":0}],"line_loads":[{"case":"live","w":)" + std::to_string(w) +
            R"(,"from":[7.9,0],"to":[8,0]},{"case":"live","w":)" + std::to_string(-w) +
            R"(,"from":[7.9,0],"to":[8,0]}])";
        CHECK(outcome_of(floor_plan(framed_floor(loads))).takedown.uplift.empty());
    }
}

TEST_CASE("a repeated member bears on what its own level has under the name") {
    const std::string joists = R"(,{"id":"K","role":"joist","from":[4,0],"to":[4,6],"bears_on":["f/S","f/N"]},
        {"id":"K0","role":"joist","from":[0,0],"to":[0,6]},{"id":"K8","role":"joist","from":[8,0],"to":[8,6]})";
    std::string two = floor_plan(framed_floor(R"("area_loads":[{"case":"live","q":1}])", joists, ""), "",
                                 R"(,{"id":"h","elevation":6,"like":"f"})");
    for (std::size_t at = two.find(R"("top":"f")"); at != std::string::npos;
         at = two.find(R"("top":"f")", at)) {
        two.replace(at, 9, R"("top":"h")");
    }
    const Outcome outcome = outcome_of(two);
    CHECK_MESSAGE(outcome.takedown.complete, support::texts_of_errors(outcome.problems));
    CHECK(outcome.arrived(1) == Approx(96.0));
}

TEST_CASE("a zone is off the decks only where there is no deck, whichever it names") {
    const std::string level = R"("members":[)" + beams + "]," + field + R"("decks":[
        {"id":"D1","direction":0,"outline":[[0,0],[4,0],[4,6],[0,6]]},
        {"id":"D2","direction":0,"outline":[[4,0],[8,0],[8,6],[4,6]]}],
        "area_loads":[{"case":"live","q":1,"outline":[[2,0],[6,0],[6,6],[2,6]],"decks":["D1"]}])";
    const Outcome outcome = outcome_of(floor_plan(level));
    CHECK(outcome.count(ProblemCode::zone_off_decks) == 0);
    CHECK(outcome.arrived(1) == Approx(12.0));
}

TEST_CASE("joists along the strips of their deck, and a member across an opening, are warned of") {
    std::string along = floor_plan(framed_floor(R"("area_loads":[{"case":"live","q":1}])"));
    along.replace(along.find(R"("id":"D","direction":0)"), 22, R"("id":"D","direction":90)");
    const Outcome outcome = outcome_of(along);
    REQUIRE(outcome.count(ProblemCode::carries_nothing) == 1);
    const auto warning = std::find_if(outcome.problems.begin(), outcome.problems.end(), [](const Problem& p) {
        return p.code == ProblemCode::carries_nothing;
    });
    CHECK(warning->message.find("joists carry nothing of it, since it spans along them") !=
          std::string::npos);
    for (const char* id : {"J.2", "J.3", "J.4"}) {
        CHECK(std::count(warning->ids.begin(), warning->ids.end(), id) == 1);
    }

    std::string across = floor_plan(framed_floor(R"("area_loads":[{"case":"live","q":1}])"));
    across.replace(across.find(R"("id":"D","direction":0)"), 22,
                   R"("id":"D","direction":0,"openings":[[[1,2],[3,2],[3,4],[1,4]]])");
    const Outcome crossed = outcome_of(across);
    REQUIRE(crossed.count(ProblemCode::crosses_opening) == 1);
    const auto crossing =
        std::find_if(crossed.problems.begin(), crossed.problems.end(),
                     [](const Problem& p) { return p.code == ProblemCode::crosses_opening; });
    CHECK(crossing->message.find("J.2 runs across its opening 0 for 2 m") != std::string::npos);
}

TEST_CASE("a hinge where the end is built in contradicts it") {
    const std::string member =
        R"(,{"id":"X","role":"beam","from":[0,0],"to":[0,6],"fixed_ends":["from"],"hinges":[0]})";
    CHECK(outcome_of(floor_plan(framed_floor(R"("area_loads":[])", member, "")))
              .count(ProblemCode::conflicting_keys) == 1);
}

TEST_CASE("a point load over a column goes to it whole and not through the joist that ends there") {
    const std::string loads = R"("area_loads":[],"point_loads":[{"case":"live","p":12,"at":[8,6]}])";
    const Outcome outcome = outcome_of(floor_plan(framed_floor(loads)));
    REQUIRE_MESSAGE(outcome.takedown.complete, support::texts_of_errors(outcome.problems));
    const Lift& lift = outcome.takedown.columns[3].lifts.front();
    CHECK(std::any_of(lift.from.begin(), lift.from.end(), [](const LiftLoad& load) {
        return load.source.kind == SourceKind::point_load && load.source.index == 0 && load.p == 12;
    }));
    CHECK(lift.total[1] == Approx(12.0));
}

TEST_CASE("a column that one variable case alone lifts off its beam is told, though all cases together hold "
          "it down") {
    const std::string level = framed_floor(R"("area_loads":[{"case":"live","q":1}])");
    const std::string above =
        R"(,{"id":"h","elevation":6,"members":[{"id":"U","role":"beam","from":[2,0],"to":[6,0]}],
        "point_loads":[{"case":"dead","p":5,"at":[2,0],"on":"U"},{"case":"live","p":-7,"at":[2,0],"on":"U"},
                       {"case":"snow","p":10,"at":[2,0],"on":"U"}]})";
    std::string text = floor_plan(
        level, R"(,{"id":"T1","at":[2,0],"base":"f","top":"h"},{"id":"T2","at":[6,0],"base":"f","top":"h"})",
        above);
    text.replace(text.find(R"({"id":"live")"), 0, R"({"id":"snow","kind":"snow"},)");
    const Outcome outcome = outcome_of(text);
    REQUIRE_MESSAGE(outcome.takedown.complete, support::texts_of_errors(outcome.problems));
    CHECK(outcome.takedown.uplift.empty());
    const std::vector<Uplift> lifts = lifts_with_some_cases(outcome.takedown);
    CHECK(std::any_of(lifts.begin(), lifts.end(), [&](const Uplift& lift) {
        return lift.member == none && lift.level == 0 && lift.upper.kind == CarrierKind::column &&
               outcome.takedown.plan.columns[lift.upper.index].id == "T1" && lift.value == Approx(-2.0);
    }));
}
