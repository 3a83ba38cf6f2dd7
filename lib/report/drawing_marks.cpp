#include "report/drawing_marks.hpp"

#include "geometry/basic.hpp"

#include <algorithm>
#include <array>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

std::optional<std::pair<Point, Point>> part_within(Point from, Point to, Point low, Point high) {
    const Point run = to - from;
    double start = 0;
    double end = 1;
    struct Side {
        double outward, inside; ///< speed out of the box, distance still inside it
    };
    const std::array<Side, 4> sides{{{-run.x, from.x - low.x},
                                     {run.x, high.x - from.x},
                                     {-run.y, from.y - low.y},
                                     {run.y, high.y - from.y}}};
    for (const Side& side : sides) {
        if (side.outward == 0) {
            if (side.inside < 0) {
                return std::nullopt;
            }
        } else if (side.outward > 0) {
            end = std::min(end, side.inside / side.outward);
        } else {
            start = std::max(start, side.inside / side.outward);
        }
    }
    if (!(start < end)) {
        return std::nullopt;
    }
    return std::pair(from + start * run, from + end * run);
}

Point kept_on_sheet(Point middle, double width, double height, double angle, Point far_corner) {
    constexpr double border = 4;
    const double across = 0.5 * (width * std::abs(std::cos(angle)) + height * std::abs(std::sin(angle)));
    const double down = 0.5 * (width * std::abs(std::sin(angle)) + height * std::abs(std::cos(angle)));
    const auto kept = [](double at, double half, double far) {
        // What is wider than the sheet is centred.
        return 2 * half > far ? far / 2 : std::clamp(at, half, far - half);
    };
    return {kept(middle.x, across + border, far_corner.x), kept(middle.y, down + border, far_corner.y)};
}

void double_arrow(SvgText& svg, Point middle, Point along, double half_length) {
    constexpr double head_share = 0.3;
    constexpr double head_width = 0.5; // beside the head's length
    const Point aside{-along.y, along.x};
    const double head = head_share * half_length;
    const auto point = [&svg](std::string_view command, Point p) {
        svg.add(command).number(p.x).add(" ").number(p.y);
    };
    const Point back = middle - half_length * along;
    const Point front = middle + half_length * along;
    point("M", back);
    point("L", front);
    for (const double sign : {-1.0, 1.0}) {
        const Point tip = sign < 0 ? back : front;
        const Point root = tip - sign * head * along;
        point("M", root + head_width * head * aside);
        point("L", tip);
        point("L", root - head_width * head * aside);
    }
}

RUNNEL_NAMESPACE_END
