#pragma once

#include "report/svg_text.hpp"

#include <runnel/geometry.hpp>

#include <string_view>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

// Sizes of letters on the sheet, in px.
inline constexpr double letter = 13;
inline constexpr double small_letter = 10.5;

/// A label on a sheet whose lower right corner is `far_corner`; long texts are cut.
struct Label {
    /// Where it stands: the middle of the line that the letters stand on, and its turn in radians.
    struct Spot {
        Point at;
        double angle = 0;
    };

    std::string_view text;
    std::string_view css_class;
    double size = letter;

    /// About: letters differ.
    [[nodiscard]] double width() const;
    void write(SvgText& svg, Spot spot, Point far_corner) const;
    /// A line through the middle of the letters, for what keeps clear of them.
    [[nodiscard]] std::pair<Point, Point> middle_line(Spot spot) const;
};

/// Beside a line on the sheet, to be read from below or from the right; off the middle, where columns stand.
[[nodiscard]] Label::Spot spot_along(Point a, Point b);

RUNNEL_NAMESPACE_END
