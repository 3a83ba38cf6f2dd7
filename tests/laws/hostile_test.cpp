#include "support/building_support.hpp"
#include "support/problem_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;
using support::for_each_point;
using support::Random;
using support::spoil;

namespace {

/// Codes that tell of a fault of the program: no plan may provoke them.
bool is_fault(ProblemCode code) {
    return code == ProblemCode::cover_broken || code == ProblemCode::cells_overlap ||
           code == ProblemCode::owner_broken || code == ProblemCode::force_broken ||
           code == ProblemCode::moment_broken || code == ProblemCode::balance_open;
}

/// Checks and takes down as the command line does; true when it came to an end without errors.
bool survives(const Plan& plan, std::string& errors) {
    const std::vector<Problem> problems = check_plan(plan);
    if (has_errors(problems)) {
        errors = support::texts_of_errors(problems);
        return false;
    }
    const Takedown takedown = take_down(plan);
    errors = support::texts_of_errors(takedown.problems);
    for (const Problem& problem : takedown.problems) {
        CHECK_MESSAGE(!is_fault(problem.code), problem.message);
    }
    CHECK(takedown.complete == errors.empty());
    if (!takedown.complete) {
        return false;
    }
    const std::vector<Problem> broken = check_balance(takedown);
    CHECK_MESSAGE(broken.empty(), support::texts_of_errors(broken));
    return true;
}

} // namespace

TEST_CASE("points drawn a little beside each other, within snap, change nothing that matters") {
    const std::uint64_t seed = support::seed_of_run(500);
    MESSAGE("seed " << seed);
    for (std::uint64_t i = 0; i < 300; ++i) {
        CAPTURE(i);
        Plan plan = support::random_building(seed + i);
        if (i % 2 == 1) {
            support::mix_rules(plan, seed + i);
        }
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
    for (std::uint64_t i = 0; i < 1200; ++i) {
        CAPTURE(i);
        Plan plan = support::random_building(seed + i);
        if (i % 2 == 1) {
            support::mix_rules(plan, seed + i);
        }
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
