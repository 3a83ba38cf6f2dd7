#pragma once

#include <runnel/report.hpp>

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

inline constexpr std::size_t page_width = 100; ///< columns that no line of text passes

/// How many columns a terminal needs for a text, or more.
[[nodiscard]] std::size_t columns_of(std::string_view text);

/// The text without what moves the cursor or turns the reading direction.
[[nodiscard]] std::string printable(std::string_view text);

/// Printable, and cut with an ellipsis where it is wider than `width`.
[[nodiscard]] std::string fit(std::string_view text, std::size_t width);

/// A number for reading: at least `decimals`, and up to two more until it shows three figures; at most ten
/// characters.
[[nodiscard]] std::string figure(double value, int decimals);

/// A number for reading to three significant figures; whole ones are not rounded to tens.
[[nodiscard]] std::string three_figures(double value);

/// A page of text: headings, paragraphs broken at spaces, tables. No line is wider than the page.
class Page {
public:
    Page(bool colour, const TextSink& sink) : colour_(colour), sink_(sink) {}

    void heading(std::string_view text);
    void line(std::string_view text, std::size_t indent = 0);
    void paragraph(std::string_view text, std::size_t indent);
    void blank();
    /// A line that shall be seen.
    void alarm(std::string_view text, std::size_t indent);

private:
    void styled(std::string_view style, std::string_view text, std::size_t indent);

    bool colour_;
    const TextSink& sink_;
};

/// A table for reading. Columns that describe the row stand on the left; those of values come after them and
/// are broken into several tables, one below the other, where the page is too narrow. Names may be shortened
/// to fit, numbers never are.
class PageTable {
public:
    enum class Align : bool { left, right };

    /// A describing column of ids; `most`: columns that they may take.
    void names(std::string_view heading, std::size_t most);
    /// A describing column of numbers or of words that are never shortened.
    void describe(std::string_view heading, Align align);
    void values(std::string_view heading);
    void add_row(std::vector<std::string> cells);
    void print(Page& page, std::size_t indent) const;

private:
    struct Column {
        std::string heading;
        Align align;
        std::size_t most; ///< that names may take; 0: numbers, which take what they need
    };
    [[nodiscard]] std::vector<std::size_t> widths(std::size_t indent) const;
    void print_columns(Page& page, std::size_t indent, const std::vector<std::size_t>& chosen,
                       const std::vector<std::size_t>& widths) const;
    void print_line(Page& page, std::size_t indent, const std::vector<std::size_t>& chosen,
                    const std::vector<std::size_t>& widths, const std::vector<std::string>& cells) const;

    std::vector<Column> columns_;
    std::size_t describing_ = 0;
    std::vector<std::vector<std::string>> rows_;
};

RUNNEL_NAMESPACE_END
