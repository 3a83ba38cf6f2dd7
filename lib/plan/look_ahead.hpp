#pragma once

#include "plan/object_reader.hpp"

#include <runnel/units.hpp>

#include <cstddef>
#include <optional>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// How many elements the list that begins at `at` has, and how many bytes; the text need not be right.
struct ElementCount {
    std::size_t elements = 0;
    std::size_t bytes = 0;
};
[[nodiscard]] ElementCount count_elements(std::string_view text, std::size_t at);

/// The plan's units, where quantities stand before them in the text; nothing if they cannot be read.
[[nodiscard]] std::optional<Units> find_units(std::string_view text, const Limits& limits);

RUNNEL_NAMESPACE_END
