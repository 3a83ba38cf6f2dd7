#include "report/utf8.hpp"

#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Lead {
    unsigned char mask, bits;
    std::size_t bytes;
    char32_t smallest; ///< anything less in this many bytes is an overlong form
};
constexpr std::array<Lead, 3> leads{
    {{0xE0, 0xC0, 2, 0x80}, {0xF0, 0xE0, 3, 0x800}, {0xF8, 0xF0, 4, 0x10000}}};
constexpr char32_t largest = 0x10FFFF;
constexpr Character wrong{0xFFFD, 1, false};

} // namespace

Character first_character(std::string_view text) {
    const auto byte = [&](std::size_t i) { return static_cast<unsigned char>(text[i]); };
    if (byte(0) < 0x80) {
        return {byte(0), 1, true};
    }
    for (const Lead& lead : leads) {
        if ((byte(0) & lead.mask) != lead.bits) {
            continue;
        }
        if (text.size() < lead.bytes) {
            return wrong;
        }
        char32_t code = byte(0) & static_cast<unsigned char>(~lead.mask);
        for (std::size_t i = 1; i < lead.bytes; ++i) {
            if ((byte(i) & 0xC0) != 0x80) {
                return wrong;
            }
            code = (code << 6) | (byte(i) & 0x3F);
        }
        const bool surrogate = code >= 0xD800 && code <= 0xDFFF;
        return code < lead.smallest || code > largest || surrogate ? wrong
                                                                   : Character{code, lead.bytes, true};
    }
    return wrong;
}

RUNNEL_NAMESPACE_END
