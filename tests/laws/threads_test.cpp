#include "support/building_support.hpp"

#include <runnel/report.hpp>
#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <string>
#include <thread>
#include <vector>

using namespace runnel;

namespace {

std::string result_of(const Plan& plan, unsigned threads) {
    TakedownOptions options;
    options.threads = threads;
    const Takedown takedown = take_down(plan, options);
    std::string text;
    write_result(takedown, {}, {}, [&text](std::string_view part) { text += part; });
    return text;
}

} // namespace

TEST_CASE("any number of threads gives the same bytes") {
    for (std::uint64_t seed = 700; seed < 712; ++seed) {
        CAPTURE(seed);
        const Plan plan = support::random_building(seed);
        const std::string one = result_of(plan, 1);
        CHECK(one.size() > 1000);
        CHECK(result_of(plan, 1) == one);
        CHECK(result_of(plan, 2) == one);
        CHECK(result_of(plan, 8) == one);
    }
}

TEST_CASE("one plan taken down in eight threads at once gives the same bytes in all") {
    const Plan plan = support::random_building(733);
    const std::string alone = result_of(plan, 1);
    std::vector<std::string> results(8);
    {
        std::vector<std::jthread> threads;
        for (std::string& result : results) {
            threads.emplace_back([&plan, &result] { result = result_of(plan, 2); });
        }
    }
    for (const std::string& result : results) {
        CHECK(result == alone);
    }
}
