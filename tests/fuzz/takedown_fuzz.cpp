// Random buildings, spoilt step by step as the bytes say: each is refused with a reason or carried to the
// ground with its balances closed. Nothing else may happen.

#include "support/building_support.hpp"

#include <runnel/takedown.hpp>

#include <cstddef>
#include <cstdint>
#include <cstdlib>

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    if (size < 2) {
        return 0;
    }
    runnel::Plan plan = support::random_building(data[0]);
    if (data[1] % 2 == 1) {
        support::mix_rules(plan, data[0]);
    }
    for (std::size_t i = 1; i < size && i < 9; ++i) {
        support::Random random(data[i]);
        support::spoil(plan, random);
    }
    if (runnel::has_errors(runnel::check_plan(plan))) {
        return 0;
    }
    const runnel::Takedown takedown = runnel::take_down(plan);
    if (takedown.complete == runnel::has_errors(takedown.problems)) {
        std::abort();
    }
    if (takedown.complete && !runnel::check_balance(takedown).empty()) {
        std::abort();
    }
    return 0;
}
