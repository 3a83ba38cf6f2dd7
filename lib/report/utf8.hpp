#pragma once

#include <runnel/export.hpp>

#include <cstddef>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// A character of UTF-8 text: its code point and its bytes.
struct Character {
    char32_t code = 0;
    std::size_t bytes = 0;
    bool valid = false; ///< false: one byte that belongs to no character
};

/// The first character of a text that is not empty (RFC 3629: no overlong forms, no surrogates).
[[nodiscard]] Character first_character(std::string_view text);

/// What stands for bytes that are not UTF-8.
inline constexpr std::string_view replacement_character = "\xEF\xBF\xBD";

RUNNEL_NAMESPACE_END
