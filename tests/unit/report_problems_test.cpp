#include "support/report_support.hpp"

#include <doctest/doctest.h>

#include <algorithm>

using namespace runnel;
using support::written;

namespace {

Problem forgotten_beam() {
    Problem problem;
    problem.code = ProblemCode::strip_cantilevers;
    problem.severity = Severity::warning;
    problem.message = "4.2 m2 of deck D lie on one carrier.";
    problem.hint = "Is a beam missing?";
    problem.pointer = "/levels/0/decks/0";
    problem.line = 12;
    problem.column = 7;
    problem.point = Point{3.048, 0};
    problem.ids = {"D"};
    return problem;
}

} // namespace

TEST_CASE("a problem says where it is, what is wrong, and what would mend it") {
    const std::vector<Problem> problems{forgotten_beam()};
    const std::string text = written([&](const TextSink& sink) {
        write_problems(problems, "plan.json", {LengthUnit::ft, ForceUnit::kip}, false, sink);
    });
    CHECK(text == "warning strip-cantilevers  plan.json:12:7, at (10, 0)\n"
                  "  4.2 m2 of deck D lie on one carrier.\n"
                  "  Hint: Is a beam missing?\n");
}

TEST_CASE("errors come first, then warnings, then notes, each as they came") {
    std::vector<Problem> problems;
    for (const Severity severity : {Severity::note, Severity::error, Severity::warning, Severity::error}) {
        Problem problem = forgotten_beam();
        problem.severity = severity;
        problem.line = static_cast<std::uint32_t>(problems.size() + 1);
        problems.push_back(problem);
    }
    const std::string text =
        written([&](const TextSink& sink) { write_problems(problems, "p", {}, false, sink); });
    const std::vector<std::size_t> places{
        text.find("error strip-cantilevers  p:2:"), text.find("error strip-cantilevers  p:4:"),
        text.find("warning strip-cantilevers  p:3:"), text.find("note strip-cantilevers  p:1:")};
    CHECK(places.back() != std::string::npos);
    CHECK(std::is_sorted(places.begin(), places.end()));
}

TEST_CASE("a problem of a plan built in code is placed by its pointer") {
    Problem problem = forgotten_beam();
    problem.line = 0;
    problem.point.reset();
    const std::vector<Problem> problems{problem};
    const std::string text =
        written([&](const TextSink& sink) { write_problems(problems, "", {}, false, sink); });
    CHECK(text.starts_with("warning strip-cantilevers  /levels/0/decks/0\n"));
}

TEST_CASE("problems as a document name their file where there is one") {
    const std::vector<Problem> problems{forgotten_beam()};
    const std::vector<FileProblems> files{{"a.json", {}, problems}, {"", {}, problems}};
    const std::string json = written([&](const TextSink& sink) { write_problems_json(files, sink); });
    CHECK(json.find("{\"file\":\"a.json\",\"severity\":\"warning\"") != std::string::npos);
    CHECK(json.find("\n  {\"severity\":\"warning\"") != std::string::npos);
    CHECK(json.find("\"point\":[3.048,0]") != std::string::npos);
}
