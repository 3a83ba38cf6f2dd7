#include "support/building_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;
using support::for_each_point;
using support::Random;
using support::spoil;

namespace {

std::string texts_of(std::span<const Problem> problems) {
    std::string text;
    for (const Problem& problem : problems) {
        if (problem.severity == Severity::error) {
            text += std::string(kind_of(problem.code).name) + ": " + problem.message + "\n";
        }
    }
    return text;
}

/// Checks and takes down as the command line does; true when it came to an end without errors.
bool survives(const Plan& plan, std::string& errors) {
    const std::vector<Problem> problems = check_plan(plan);
    if (has_errors(problems)) {
        errors = texts_of(problems);
        return false;
    }
    const Takedown takedown = take_down(plan);
    errors = texts_of(takedown.problems);
    CHECK(takedown.complete == errors.empty());
    if (!takedown.complete) {
        return false;
    }
    const std::vector<Problem> broken = check_balance(takedown);
    CHECK_MESSAGE(broken.empty(), texts_of(broken));
    return true;
}

} // namespace

TEST_CASE("points drawn a little beside each other, within snap, change nothing that matters") {
    const std::uint64_t seed = support::seed_of_run(500);
    MESSAGE("seed " << seed);
    for (std::uint64_t i = 0; i < 150; ++i) {
        CAPTURE(i);
        Plan plan = support::random_building(seed + i);
        Random random(seed + i);
        const double reach = 0.25 * plan.settings.snap; // two of these in both directions stay within snap
        for_each_point(plan, [&](Point& p) {
            p = {p.x + random.between(-reach, reach), p.y + random.between(-reach, reach)};
        });
        std::string errors;
        CHECK_MESSAGE(survives(plan, errors), errors);
    }
}

TEST_CASE("spoilt plans are refused with a reason or carried to the ground, never half") {
    const std::uint64_t seed = support::seed_of_run(9000);
    MESSAGE("seed " << seed);
    int refused = 0;
    int carried = 0;
    for (std::uint64_t i = 0; i < 600; ++i) {
        CAPTURE(i);
        Plan plan = support::random_building(seed + i);
        Random random(seed + i);
        for (int k = random.whole(1, 3); k > 0; --k) {
            spoil(plan, random);
        }
        std::string errors;
        if (survives(plan, errors)) {
            ++carried;
        } else {
            ++refused;
        }
    }
    MESSAGE(refused << " refused, " << carried << " carried");
    CHECK(refused > 50);
    CHECK(carried > 50);
}
