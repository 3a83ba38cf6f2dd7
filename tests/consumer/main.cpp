#include <runnel/takedown.hpp>

int main() {
    const runnel::PlanReading reading = runnel::read_plan("{}");
    return runnel::has_errors(reading.problems) ? 0 : 1;
}
