#include "report/page.hpp"

#include "report/utf8.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::string_view ellipsis = "\xE2\x80\xA6";
constexpr std::string_view no_character = "?"; ///< stands for what is not printed
constexpr std::size_t gap = 2;                 ///< between columns

struct Range {
    char32_t from, to;
};
template <std::size_t n>
bool within(const std::array<Range, n>& ranges, char32_t code) {
    return std::any_of(ranges.begin(), ranges.end(),
                       [code](Range range) { return code >= range.from && code <= range.to; });
}

/// Controls (C0, C1), line and paragraph separators, marks that turn the reading direction.
constexpr std::array<Range, 7> unprintable{{{0, 0x1F},
                                            {0x7F, 0x9F},
                                            {0x200B, 0x200F},
                                            {0x2028, 0x202E},
                                            {0x2060, 0x206F},
                                            {0xFEFF, 0xFEFF},
                                            {0xFFF0, 0xFFFB}}};
/// Scripts whose characters take two columns (Unicode annex 11, in broad ranges).
constexpr std::array<Range, 7> wide{{{0x1100, 0x115F},
                                     {0x2E80, 0xA4CF},
                                     {0xAC00, 0xD7A3},
                                     {0xF900, 0xFAFF},
                                     {0xFE30, 0xFE6F},
                                     {0xFF00, 0xFF60},
                                     {0x1F000, 0x3FFFD}}};

std::size_t width_of(const Character& character) {
    return within(wide, character.code) ? 2 : 1;
}

std::string padded(const std::string& text, std::size_t width, PageTable::Align align) {
    const std::size_t missing = width - std::min(width, columns_of(text));
    return align == PageTable::Align::right ? std::string(missing, ' ') + text
                                            : text + std::string(missing, ' ');
}

} // namespace

std::size_t columns_of(std::string_view text) {
    std::size_t columns = 0;
    while (!text.empty()) {
        const Character character = first_character(text);
        columns += width_of(character);
        text.remove_prefix(character.bytes);
    }
    return columns;
}

std::string printable(std::string_view text) {
    std::string result;
    while (!text.empty()) {
        const Character character = first_character(text);
        const bool prints = character.valid && !within(unprintable, character.code);
        result += prints ? text.substr(0, character.bytes) : no_character;
        text.remove_prefix(character.bytes);
    }
    return result;
}

std::string fit(std::string_view text, std::size_t width) {
    std::string whole = printable(text);
    if (columns_of(whole) <= width) {
        return whole;
    }
    std::string result;
    std::string_view rest = whole;
    std::size_t columns = 1; // the ellipsis
    while (!rest.empty()) {
        const Character character = first_character(rest);
        columns += width_of(character);
        if (columns > width) {
            break;
        }
        result += rest.substr(0, character.bytes);
        rest.remove_prefix(character.bytes);
    }
    return result + std::string(ellipsis);
}

std::string figure(double value, int decimals) {
    constexpr double widest = 1e6; // from here on in powers of ten
    constexpr int more_decimals = 2;
    constexpr double three_figures = 100;
    std::array<char, 32> digits;
    const auto text = [&](std::chars_format format, int precision) {
        const auto [end, error] =
            std::to_chars(digits.data(), digits.data() + digits.size(), value, format, precision);
        return std::string(digits.data(), end);
    };
    if (!(std::abs(value) < widest)) {
        return text(std::chars_format::scientific, 2);
    }
    int precision = decimals;
    const int most = decimals + more_decimals;
    while (precision < most && value != 0 && std::abs(value) * std::pow(10, precision) < three_figures) {
        ++precision;
    }
    std::string result = text(std::chars_format::fixed, precision);
    const bool nothing = result.find_first_not_of("-0.") == std::string::npos;
    if (nothing) {
        value = 0;
        result = text(std::chars_format::fixed, decimals);
    }
    return result;
}

std::string three_figures(double value) {
    constexpr double widest = 1e6; // beyond these in powers of ten
    constexpr double finest = 1e-4;
    constexpr int after_the_first = 2;
    if (value == 0) {
        return "0";
    }
    std::array<char, 32> digits;
    const auto text = [&](std::chars_format format, int precision) {
        const auto [end, error] =
            std::to_chars(digits.data(), digits.data() + digits.size(), value, format, precision);
        return std::string(digits.data(), end);
    };
    std::string rounded = text(std::chars_format::scientific, after_the_first);
    if (!(std::abs(value) < widest) || std::abs(value) < finest) {
        return rounded;
    }
    const int exponent = std::stoi(rounded.substr(rounded.find('e') + 1));
    return text(std::chars_format::fixed, std::max(0, after_the_first - exponent));
}

void Page::styled(std::string_view style, std::string_view text, std::size_t indent) {
    std::string out(indent, ' ');
    const std::string body = fit(text, page_width - indent);
    if (colour_ && !style.empty()) {
        out += "\x1B[";
        out += style;
        out += 'm' + body + "\x1B[0m";
    } else {
        out += body;
    }
    while (!out.empty() && out.back() == ' ') {
        out.pop_back();
    }
    sink_(out + '\n');
}

void Page::heading(std::string_view text) {
    styled("1", text, 0);
}
void Page::line(std::string_view text, std::size_t indent) {
    styled("", text, indent);
}
void Page::alarm(std::string_view text, std::size_t indent) {
    styled("1;31", text, indent);
}
void Page::blank() {
    sink_("\n");
}

void Page::paragraph(std::string_view text, std::size_t indent) {
    const std::string whole = printable(text);
    std::string_view rest = whole;
    std::string current;
    const auto end_line = [&] {
        if (!current.empty()) {
            line(current, indent);
            current.clear();
        }
    };
    while (!rest.empty()) {
        const std::size_t space = std::min(rest.find(' '), rest.size());
        const std::string_view word = rest.substr(0, space);
        if (!current.empty() && columns_of(current) + 1 + columns_of(word) > page_width - indent) {
            end_line();
        }
        if (!current.empty()) {
            current += ' ';
        }
        current += word;
        rest.remove_prefix(std::min(space + 1, rest.size()));
    }
    end_line();
}

void PageTable::names(std::string_view heading, std::size_t most) {
    columns_.push_back({std::string(heading), Align::left, most});
    ++describing_;
}

void PageTable::describe(std::string_view heading, Align align) {
    columns_.push_back({std::string(heading), align, 0});
    ++describing_;
}

void PageTable::values(std::string_view heading) {
    constexpr std::size_t most = 16; // ten characters of a number and a word
    columns_.push_back({fit(heading, most), Align::right, 0});
}

void PageTable::add_row(std::vector<std::string> cells) {
    for (std::size_t c = 0; c < cells.size(); ++c) {
        cells[c] = columns_[c].most > 0 ? fit(cells[c], columns_[c].most) : printable(cells[c]);
    }
    rows_.push_back(std::move(cells));
}

/// What the columns take; where describing columns and the widest one of values do not fit the page together,
/// the widest names give way.
std::vector<std::size_t> PageTable::widths(std::size_t indent) const {
    std::vector<std::size_t> widths;
    for (const Column& column : columns_) {
        widths.push_back(columns_of(column.heading));
    }
    for (const std::vector<std::string>& row : rows_) {
        for (std::size_t c = 0; c < row.size(); ++c) {
            widths[c] = std::max(widths[c], columns_of(row[c]));
        }
    }
    const auto values = widths.begin() + static_cast<std::ptrdiff_t>(describing_);
    std::size_t needed = indent + (values == widths.end() ? 0 : *std::max_element(values, widths.end()));
    for (std::size_t c = 0; c < describing_; ++c) {
        needed += widths[c] + gap;
    }
    for (; needed > page_width; --needed) {
        std::size_t widest = columns_.size();
        for (std::size_t c = 0; c < describing_; ++c) {
            if (columns_[c].most > 0 && (widest == columns_.size() || widths[c] > widths[widest])) {
                widest = c;
            }
        }
        if (widest == columns_.size() || widths[widest] <= 1) {
            break;
        }
        --widths[widest];
    }
    return widths;
}

void PageTable::print(Page& page, std::size_t indent) const {
    const std::vector<std::size_t> all = widths(indent);
    std::size_t next = describing_;
    do {
        std::vector<std::size_t> chosen;
        std::size_t width = indent;
        for (std::size_t c = 0; c < describing_; ++c) {
            chosen.push_back(c);
            width += all[c] + gap;
        }
        const std::size_t first = next;
        while (next < columns_.size() && (next == first || width + all[next] <= page_width)) {
            width += all[next] + gap;
            chosen.push_back(next++);
        }
        print_columns(page, indent, chosen, all);
        if (next < columns_.size()) {
            page.blank();
        }
    } while (next < columns_.size());
}

void PageTable::print_columns(Page& page, std::size_t indent, const std::vector<std::size_t>& chosen,
                              const std::vector<std::size_t>& widths) const {
    std::vector<std::string> headings;
    for (const Column& column : columns_) {
        headings.push_back(column.heading);
    }
    print_line(page, indent, chosen, widths, headings);
    for (const std::vector<std::string>& row : rows_) {
        print_line(page, indent, chosen, widths, row);
    }
}

void PageTable::print_line(Page& page, std::size_t indent, const std::vector<std::size_t>& chosen,
                           const std::vector<std::size_t>& widths,
                           const std::vector<std::string>& cells) const {
    std::string text;
    for (const std::size_t c : chosen) {
        if (c != chosen.front()) {
            text += std::string(gap, ' ');
        }
        const std::string cell = c < cells.size() ? cells[c] : std::string{};
        text += padded(columns_[c].most > 0 ? fit(cell, widths[c]) : cell, widths[c], columns_[c].align);
    }
    page.line(text, indent);
}

RUNNEL_NAMESPACE_END
