#include <runnel/plan.hpp>

#include <doctest/doctest.h>

#include <malloc.h>

#include <array>
#include <cstdio>
#include <string>

using namespace runnel;

namespace {

/// Bytes that the C library has handed out and not got back; mapped blocks count.
std::size_t heap_in_use() {
    const struct mallinfo2 info = mallinfo2();
    return info.uordblks + info.hblkhd;
}

std::string plan_of_joists(int count) {
    std::string text = R"({"runnel": "plan/1", "units": {"length": "m", "force": "kN"}, "cases": [],
 "sections": [{"id": "s1", "self_weight": 0}], "levels": [{"id": "L", "elevation": 3, "members": [)";
    for (int i = 0; i < count; ++i) {
        std::array<char, 160> line;
        const int size =
            std::snprintf(line.data(), line.size(),
                          "%s\n    {\"id\": \"J%d\", \"role\": \"joist\", \"from\": [%.3f, %.3f], \"to\": "
                          "[%.3f, %.3f], \"section\": \"s1\"}",
                          i > 0 ? "," : "", i, 0.6 * i, 1.125, 0.6 * i, 7.125);
        text.append(line.data(), static_cast<std::size_t>(size));
    }
    return text + "]}]}";
}

} // namespace

TEST_CASE("a plan of many joists is kept in about twice the memory of its text") {
    const std::string text = plan_of_joists(100000);
    const std::size_t before = heap_in_use();
    const PlanReading reading = read_plan(text);
    const std::size_t kept = heap_in_use() - before;
    REQUIRE(reading.problems.empty());
    REQUIRE(reading.plan.levels.at(0).members.size() == 100000);
    const double ratio = static_cast<double>(kept) / static_cast<double>(text.size());
    MESSAGE("text " << text.size() << " bytes, plan " << ratio << " times that");
    CHECK(ratio < 3);
    // No list is kept larger than it is.
    CHECK(reading.plan.levels[0].members.capacity() == reading.plan.levels[0].members.size());
}
