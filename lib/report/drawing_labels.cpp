#include "report/drawing_labels.hpp"

#include "geometry/basic.hpp"
#include "report/drawing_marks.hpp"
#include "report/page.hpp"

#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t longest_label = 24; ///< columns

/// From the line that the letters stand on to their middle.
Point rise_of(double size, double angle) {
    constexpr double rise_of_middle = 0.35;
    return {rise_of_middle * size * std::sin(angle), -rise_of_middle * size * std::cos(angle)};
}

} // namespace

double Label::width() const {
    constexpr double of_letter = 0.62;
    return of_letter * size * static_cast<double>(columns_of(fit(text, longest_label)));
}

void Label::write(SvgText& svg, Spot spot, Point far_corner) const {
    const Point rise = rise_of(size, spot.angle);
    const Point at = kept_on_sheet(spot.at + rise, width(), size, spot.angle, far_corner) - rise;
    svg.add("<text class=\"").add(css_class).add("\" x=\"").number(at.x).add("\" y=\"").number(at.y);
    svg.add("\" font-size=\"").number(size).add("\"");
    if (spot.angle != 0) {
        svg.add(" transform=\"rotate(").number(spot.angle * 90 / std::acos(0.0)).add(" ").number(at.x);
        svg.add(" ").number(at.y).add(")\"");
    }
    svg.add(">").text(fit(text, longest_label)).add("</text>\n");
}

std::pair<Point, Point> Label::middle_line(Spot spot) const {
    const Point middle = spot.at + rise_of(size, spot.angle);
    const Point half = (width() / 2) * Point{std::cos(spot.angle), std::sin(spot.angle)};
    return {middle - half, middle + half};
}

Label::Spot spot_along(Point a, Point b) {
    constexpr double lift = 5; // clear of the line
    double angle = std::atan2(b.y - a.y, b.x - a.x);
    const double quarter = std::acos(0.0);
    constexpr double upright = 1e-6; // radians: a vertical line's direction up to rounding
    if (angle > quarter - upright) {
        angle -= 2 * quarter;
    } else if (angle <= -quarter - upright) {
        angle += 2 * quarter;
    }
    constexpr double clear_of_columns = 0.42; // which stand at halves and thirds
    const Point middle = between(a, b, clear_of_columns);
    return {{middle.x + lift * std::sin(angle), middle.y - lift * std::cos(angle)}, angle};
}

RUNNEL_NAMESPACE_END
