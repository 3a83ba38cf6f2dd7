#include <runnel/plan.hpp>

#include <doctest/doctest.h>

#include <filesystem>
#include <fstream>
#include <iterator>
#include <string>

/// The fuzzer's kept inputs, read by every build: what once went wrong stays right.
TEST_CASE("the fuzzer's corpus of plans is read without harm, each problem with its place") {
    std::size_t files = 0;
    for (const auto& entry :
         std::filesystem::directory_iterator(RUNNEL_SOURCE_DIR "/tests/fuzz/corpus/plan")) {
        CAPTURE(entry.path().string());
        std::ifstream file(entry.path(), std::ios::binary);
        const std::string text{std::istreambuf_iterator<char>(file), {}};
        const runnel::PlanReading reading = runnel::read_plan(text);
        for (const runnel::Problem& problem : reading.problems) {
            CHECK_FALSE(problem.message.empty());
            CHECK_MESSAGE(problem.line > 0, problem.message);
        }
        if (!runnel::has_errors(reading.problems)) {
            CHECK_FALSE(runnel::has_errors(runnel::check_plan(reading.plan)));
        }
        ++files;
    }
    CHECK(files >= 6);
}
