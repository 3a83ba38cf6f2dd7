#include "report/svg_text.hpp"

#include "report/utf8.hpp"

#include <array>
#include <charconv>

RUNNEL_NAMESPACE_BEGIN

namespace {
constexpr std::size_t part_size = std::size_t{1} << 16; ///< bytes handed on at a time
} // namespace

SvgText& SvgText::add(std::string_view markup) {
    buffer_ += markup;
    if (buffer_.size() >= part_size) {
        sink_(buffer_);
        buffer_.clear();
    }
    return *this;
}

SvgText& SvgText::number(double value) {
    constexpr int decimals = 2;
    std::array<char, 400> digits; // fixed notation of any double
    const auto [end, error] = std::to_chars(digits.data(), digits.data() + digits.size(), value,
                                            std::chars_format::fixed, decimals);
    std::string_view text(digits.data(), static_cast<std::size_t>(end - digits.data()));
    while (text.back() == '0') {
        text.remove_suffix(1);
    }
    if (text.back() == '.') {
        text.remove_suffix(1);
    }
    return add(text == "-0" ? "0" : text);
}

SvgText& SvgText::count(std::size_t value) {
    return add(std::to_string(value));
}

SvgText& SvgText::text(std::string_view words) {
    while (!words.empty()) {
        const Character character = first_character(words);
        const char32_t code = character.code;
        // XML 1.0, section 2.2: what is no character of a document.
        const bool forbidden = code < 0x20 || code == 0xFFFE || code == 0xFFFF;
        if (!character.valid || forbidden) {
            add(replacement_character);
        } else if (code == '&') {
            add("&amp;");
        } else if (code == '<') {
            add("&lt;");
        } else if (code == '>') {
            add("&gt;");
        } else if (code == '"') {
            add("&quot;");
        } else {
            add(words.substr(0, character.bytes));
        }
        words.remove_prefix(character.bytes);
    }
    return *this;
}

void SvgText::finish() {
    sink_(buffer_);
    buffer_.clear();
}

RUNNEL_NAMESPACE_END
