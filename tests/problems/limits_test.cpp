#include "problems/bad_plans.hpp"
#include "support/random_support.hpp"

#include <runnel/plan.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;

namespace {

std::string plan_of_levels(std::string_view levels) {
    return R"({"runnel": "plan/1", "units": {"length": "m", "force": "kN"}, "cases": [], "levels": )" +
           std::string(levels) + '}';
}

std::size_t count(const PlanReading& reading, ProblemCode code) {
    return static_cast<std::size_t>(std::count_if(reading.problems.begin(), reading.problems.end(),
                                                  [&](const Problem& p) { return p.code == code; }));
}

std::string joist_level(std::string_view id, int elevation, std::string_view spacing) {
    return R"({"id": ")" + std::string(id) + R"(", "elevation": )" + std::to_string(elevation) +
           R"(, "joist_fields": [{"id": "J", "outline": [[0, 0], [1000, 0], [1000, 6], [0, 6]], "direction": 90, "spacing": )" +
           std::string(spacing) + "}]}";
}

} // namespace

TEST_CASE("a million brackets are refused at the thirty-third") {
    const std::string deep(1000000, '[');
    const PlanReading reading = read_plan(deep);
    REQUIRE(reading.problems.size() == 1);
    CHECK(reading.problems[0].code == ProblemCode::too_deep);
    CHECK(reading.problems[0].column == 33);
    CHECK(reading.problems[0].message.find("32") != std::string::npos);
    std::string objects;
    for (int i = 0; i < 200000; ++i) {
        objects += "{\"a\":";
    }
    CHECK(count(read_plan(objects), ProblemCode::too_deep) == 1);
}

TEST_CASE("joists are counted before any is made") {
    const PlanReading reading = read_plan(plan_of_levels('[' + joist_level("L", 3, "1e-9") + ']'));
    REQUIRE(reading.problems.size() == 1);
    CHECK(reading.problems[0].code == ProblemCode::too_much);
    CHECK(reading.problems[0].message.find("1e+12") != std::string::npos);
    CHECK(reading.problems[0].message.find("5000000") != std::string::npos);
}

TEST_CASE("joists of all levels count together, those of repeated levels too") {
    std::string levels = '[' + joist_level("L0", 0, "0.01"); // 100,001 joists
    for (int i = 1; i < 60; ++i) {
        levels += R"(, {"id": "L)" + std::to_string(i) + R"(", "elevation": )" + std::to_string(3 * i) +
                  R"(, "like": "L)" + std::to_string(i - 1) + "\"}";
    }
    const PlanReading reading = read_plan(plan_of_levels(levels + ']'));
    REQUIRE(reading.problems.size() == 1);
    CHECK(reading.problems[0].code == ProblemCode::too_much);
    CHECK(reading.problems[0].pointer == "/levels");
    Limits wide;
    wide.members = 7'000'000;
    CHECK(read_plan(plan_of_levels(levels + ']'), wide).problems.empty());
}

TEST_CASE("levels, members and bytes beyond their limits are not read") {
    Limits limits;
    limits.levels = 2;
    const std::string levels =
        R"([{"id": "A", "elevation": 1}, {"id": "B", "elevation": 2}, {"id": "C", "elevation": 3}, {"id": "D", "elevation": 4}])";
    const PlanReading three = read_plan(plan_of_levels(levels), limits);
    CHECK(three.problems.size() == 1);
    CHECK(count(three, ProblemCode::too_much) == 1);
    CHECK(three.problems.at(0).pointer == "/levels/2");
    CHECK(three.plan.levels.size() == 2);

    limits = {};
    limits.members = 1;
    const PlanReading members = read_plan(bad_plans::valid_plan(), limits);
    CHECK(count(members, ProblemCode::too_much) >= 1);
    CHECK(members.plan.levels.at(0).members.size() == 1);

    limits = {};
    limits.text_bytes = 100;
    const PlanReading bytes = read_plan(bad_plans::valid_plan(), limits);
    REQUIRE(bytes.problems.size() == 1);
    CHECK(bytes.problems[0].code == ProblemCode::too_much);
    CHECK(bytes.problems[0].message.find("100") != std::string::npos);
}

TEST_CASE("of one code so many are listed, and the rest is counted") {
    std::string members;
    for (int i = 0; i < 150; ++i) {
        members += (i > 0 ? ", " : "") + (R"({"id": "G)" + std::to_string(i)) +
                   R"(", "role": "beam", "from": [0, 0], "to": [0, 0], "oops": 1})";
    }
    Limits limits;
    limits.problems = 20;
    const PlanReading reading =
        read_plan(plan_of_levels(R"([{"id": "L", "elevation": 3, "members": [)" + members + "]}]"), limits);
    CHECK(count(reading, ProblemCode::unknown_key) == 21);
    CHECK(count(reading, ProblemCode::zero_length) == 21);
    REQUIRE(reading.problems.size() == 42);
    CHECK(reading.problems[40].message.substr(0, 12) == "And 130 more");
    CHECK(reading.problems[41].message.substr(0, 12) == "And 130 more");
}

TEST_CASE("a long loop of levels like each other is one problem") {
    std::string levels = "[";
    const int n = 900;
    for (int i = 0; i < n; ++i) {
        levels += (i > 0 ? ", " : "") + (R"({"id": "L)" + std::to_string(i)) + R"(", "elevation": )" +
                  std::to_string(3 * i) + R"(, "like": "L)" + std::to_string((i + 1) % n) + "\"}";
    }
    const PlanReading reading = read_plan(plan_of_levels(levels + ']'));
    REQUIRE(reading.problems.size() == 1);
    CHECK(reading.problems[0].code == ProblemCode::like_loop);
    CHECK(reading.problems[0].ids.size() == n);
}

TEST_CASE("ten megabytes of noise are one problem") {
    const std::uint64_t seed = support::seed_of_run(11);
    CAPTURE(seed);
    support::Random random(seed);
    std::string noise(10'000'000, ' ');
    for (char& c : noise) {
        c = static_cast<char>(random.whole(0, 255));
    }
    const PlanReading reading = read_plan(noise);
    CHECK(reading.problems.size() == 1);
    CHECK(has_errors(reading.problems));
    noise.insert(0, "{\"runnel\": \"plan/1\", \"levels\": [");
    CHECK(has_errors(read_plan(noise).problems));
}

TEST_CASE("a plan cut off at any byte has an error, and that of the text's end stands last") {
    const std::string_view plan = bad_plans::valid_plan();
    const std::size_t whole = plan.rfind('}') + 1;
    for (std::size_t size = 0; size < whole; ++size) {
        const PlanReading reading = read_plan(plan.substr(0, size));
        REQUIRE_MESSAGE(has_errors(reading.problems), size);
        CHECK(reading.problems.back().code == ProblemCode::not_json);
        REQUIRE(reading.problems.back().line > 0);
    }
    CHECK(read_plan(plan.substr(0, whole)).problems.empty());
}

TEST_CASE("plans with bytes changed at random are read without harm, and every error has its place") {
    const std::uint64_t seed = support::seed_of_run(20261201);
    CAPTURE(seed);
    support::Random random(seed);
    const std::string_view pieces[] = {
        "{",     "}",    "[",      "]",       ",",  ":",  "\"",   "0",  "-1",     "1e308",
        "null",  "true", "\"id\"", "\\u0000", "[]", "{}", "\xff", "\n", "\"G1\"", "\"like\": \"roof\",",
        "1e-300"};
    std::size_t broken = 0;
    for (int trial = 0; trial < 4000; ++trial) {
        CAPTURE(trial);
        std::string text(bad_plans::valid_plan());
        for (int changes = random.whole(1, 4); changes > 0; --changes) {
            const auto at = static_cast<std::size_t>(random.whole(0, static_cast<int>(text.size()) - 1));
            const auto size = static_cast<std::size_t>(random.whole(0, 6));
            const int piece = random.whole(0, static_cast<int>(std::size(pieces)) - 1);
            text.replace(at, std::min(size, text.size() - at), pieces[piece]);
        }
        const PlanReading reading = read_plan(text);
        broken += has_errors(reading.problems) ? 1 : 0;
        for (const Problem& p : reading.problems) {
            CHECK_MESSAGE(p.line > 0, p.message);
            CHECK_FALSE(p.message.empty());
        }
        if (!has_errors(reading.problems)) {
            CHECK_FALSE(has_errors(check_plan(reading.plan)));
        }
    }
    CHECK(broken > 3000);
}
