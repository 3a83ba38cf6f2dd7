#pragma once

#include <runnel/problem.hpp>

#include <span>
#include <string>
#include <string_view>

namespace bad_plans {

/// What the schema alone, without references and geometry, has to say to a plan.
enum class Schema { accepts, rejects, cannot_read };

/// A small valid plan with one thing changed. `!!` in `becomes` marks the byte where the problem must stand.
struct Row {
    std::string_view sentence;
    std::string_view where; ///< text of the valid plan, there exactly once
    std::string_view becomes;
    runnel::ProblemCode code;
    std::string_view pointer;
    Schema schema;
};

/// The valid plan that the rows change.
[[nodiscard]] std::string_view valid_plan();

[[nodiscard]] std::span<const Row> rows_on_text();
[[nodiscard]] std::span<const Row> rows_on_keys();
[[nodiscard]] std::span<const Row> rows_on_values();
[[nodiscard]] std::span<const Row> rows_on_references();
[[nodiscard]] std::span<const Row> rows_on_geometry();
[[nodiscard]] std::span<const Row> rows_on_engines_to_come();

/// The plan of a row without its mark, and where the mark was.
struct Changed {
    std::string text;
    std::uint32_t line = 0;
    std::uint32_t column = 0;
};
[[nodiscard]] Changed changed(const Row& row);

} // namespace bad_plans
