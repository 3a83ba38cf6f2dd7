#include "support/report_support.hpp"

#include <doctest/doctest.h>

using namespace runnel;
using support::takedown_of;
using support::written;

namespace {

std::string result_of(const Takedown& takedown, const ReportOptions& options = {}) {
    return written([&](const TextSink& sink) { write_result(takedown, {}, options, sink); });
}

bool holds(const std::string& text, std::string_view part) {
    return text.find(part) != std::string::npos;
}

} // namespace

TEST_CASE("a result names its keys in a fixed order") {
    const std::string result = result_of(takedown_of(support::footbridge));
    std::size_t at = 0;
    for (const std::string_view key :
         {"runnel", "program", "input", "units", "conventions", "settings", "cautions", "problems", "uplift",
          "balance", "levels", "columns", "walls", "foundations"}) {
        const std::size_t next = result.find("\n \"" + std::string(key) + "\": ", at);
        CAPTURE(key);
        REQUIRE((next != std::string::npos || key == "runnel"));
        at = next;
    }
    CHECK(result == result_of(takedown_of(support::footbridge)));
}

TEST_CASE("a girder's loads stand by case, its points with what brings them") {
    const std::string result = result_of(takedown_of(support::footbridge));
    // Joist b carries half of each bay: 4 m x 2 m x 5 kN/m2, half of it to each girder.
    CHECK(holds(result, R"({"station":4,"p":20,"source":"b"})"));
    CHECK(holds(result, R"({"station":2,"p":3,"source":"point_loads[0]"})"));
    // A joist's line load: 0.5 kN/m2 over 4 m. Straight, so there is no curve.
    CHECK(holds(result,
                R"({"case":"dead","line":[{"from":0,"to":2,"start":2,"end":2}],"point":[],"total":4})"));
    CHECK(!holds(result, "curve"));
    CHECK(holds(result, R"("spans":[{"from":0,"to":8,"kind":"span"}])"));
    CHECK(holds(result, R"({"under":"P","kind":"column","at":[0,0],"reactions":{"dead":2,"crowd":22.25}})"));
}

TEST_CASE("keys of engines that are not built yet are absent") {
    const std::string result = result_of(takedown_of(support::footbridge));
    for (const std::string_view key : {"extremes", "envelope", "reduction", "limits", "range", "reduced",
                                       "combinations", "uniform_for_moment", "frames"}) {
        CAPTURE(key);
        CHECK(!holds(result, '"' + std::string(key) + '"'));
    }
}

TEST_CASE("line loads of several sources are summed by case, a curved one lists its coefficients") {
    Takedown takedown = takedown_of(support::footbridge);
    const CarrierLine first{0, {SourceKind::deck, 0}, {0, 2, {1, 0, 0, 0, 0}}};
    const CarrierLine second{0, {SourceKind::own_weight, none}, {1, 2, {2, 1, 0.5, 0, 0}}};
    takedown.levels[0].lines = Grouped<CarrierLine>::from_pairs(5, {{4, first}, {4, second}});
    ReportOptions options;
    options.units = Units{LengthUnit::m, ForceUnit::N};
    const std::string result = result_of(takedown, options);
    CHECK(holds(result, R"({"from":0,"to":1,"start":1000,"end":1000})"));
    CHECK(holds(result, R"({"from":1,"to":2,"start":3000,"end":4500,"curve":[3000,1000,500]})"));
}

TEST_CASE("values come out in the units that are asked for") {
    ReportOptions options;
    options.units = Units{LengthUnit::mm, ForceUnit::MN};
    const std::string result = result_of(takedown_of(support::footbridge), options);
    CHECK(holds(result, R"("units": {"length":"mm","force":"MN"})"));
    CHECK(holds(result, R"("at":[8000,2000])"));
    CHECK(holds(result, R"("elevation": 5000)"));
    CHECK(holds(result, R"("reactions":{"dead":0.002,"crowd":0.02225})"));
}

TEST_CASE("a takedown that errors stopped gives its problems and nothing computed") {
    Takedown takedown;
    takedown.plan.title = "Half a plan";
    Problem problem;
    problem.code = ProblemCode::strip_unsupported;
    problem.message = "3 m2 of deck D have no carrier.";
    problem.point = Point{1, 2};
    problem.ids = {"D"};
    takedown.problems.push_back(problem);
    const std::string result = result_of(takedown);
    CHECK(holds(result, R"("code":"strip-unsupported","message":"3 m2 of deck D have no carrier.")"));
    CHECK(holds(result, R"("point":[1,2],"ids":["D"])"));
    CHECK(!holds(result, "\"balance\""));
}

TEST_CASE("an id that occurs on several levels is written with its level outside of it") {
    std::string plan(support::footbridge);
    const std::string second = R"(, {"id": "roof", "elevation": 8, "like": "walk"}]})";
    plan.replace(plan.size() - 2, 2, second);
    for (std::size_t at = 0; (at = plan.find(R"("top": "walk")", at)) != std::string::npos; ++at) {
        plan.replace(at, 13, R"("top": "roof")");
    }
    const std::string result = result_of(takedown_of(plan));
    CHECK(holds(result, R"({"source":"walk/south","case":"dead")"));
    CHECK(holds(result, R"({"source":"roof/south","case":"dead")"));
    CHECK(holds(result, R"({"source":"P","case":"dead")"));
    CHECK(holds(result, R"({"id":"south","role":"girder")"));
}
