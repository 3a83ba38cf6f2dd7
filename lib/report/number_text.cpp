#include "report/number_text.hpp"

#include <charconv>
#include <cstddef>

RUNNEL_NAMESPACE_BEGIN

namespace {

std::string_view shortest(double value, NumberBuffer& buffer) {
    const auto [end, error] = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value);
    return {buffer.data(), static_cast<std::size_t>(end - buffer.data())};
}

std::string_view rounded(double value, int digits, NumberBuffer& buffer) {
    const auto [end, error] = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value,
                                            std::chars_format::general, digits);
    return {buffer.data(), static_cast<std::size_t>(end - buffer.data())};
}

bool comes_back(std::string_view text, double value, double scale) {
    double read = 0;
    std::from_chars(text.data(), text.data() + text.size(), read);
    return read * scale == value;
}

} // namespace

std::string_view number_text(double value, double scale, NumberBuffer& buffer) {
    if (value == 0) {
        return shortest(0, buffer);
    }
    const double scaled = value / scale;
    if (scale == 1) {
        return shortest(scaled, buffer);
    }
    // A double's shortest text is also its text to 15 digits where it has no more than those.
    constexpr int sure_digits = 15;
    constexpr int most_digits = 17;
    const std::string_view plain = shortest(scaled, buffer);
    if (plain.size() <= sure_digits && comes_back(plain, value, scale)) {
        return plain;
    }
    for (int digits = sure_digits; digits <= most_digits; ++digits) {
        const std::string_view text = rounded(scaled, digits, buffer);
        if (comes_back(text, value, scale)) {
            return text;
        }
    }
    return shortest(scaled, buffer);
}

RUNNEL_NAMESPACE_END
