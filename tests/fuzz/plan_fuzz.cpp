#include <runnel/plan.hpp>

#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string_view>

/// read_plan never crashes, gives every problem of a text a place in it, and a plan that it finds without
/// errors has none for check_plan either.
extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    const std::string_view text(reinterpret_cast<const char*>(data), size);
    runnel::Limits limits;
    limits.members = 1000; // checks must not make what a plan asks for; a small limit shows it if they do
    const runnel::PlanReading reading = runnel::read_plan(text, limits);
    const bool bad = runnel::has_errors(reading.problems);
    for (const runnel::Problem& problem : reading.problems) {
        if (problem.message.empty() || problem.line == 0) {
            std::abort();
        }
    }
    if (!bad && runnel::has_errors(runnel::check_plan(reading.plan, limits))) {
        std::abort();
    }
    return 0;
}
