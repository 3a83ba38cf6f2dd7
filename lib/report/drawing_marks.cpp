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

namespace {

void path_to(SvgText& svg, std::string_view command, Point p) {
    svg.add(command).number(p.x).add(" ").number(p.y);
}

/// An arrow with a head at either end.
void double_arrow(SvgText& svg, Point middle, Point along, double half_length) {
    constexpr double head_share = 0.3;
    constexpr double head_width = 0.5; // beside the head's length
    const Point aside{-along.y, along.x};
    const double head = head_share * half_length;
    const Point back = middle - half_length * along;
    const Point front = middle + half_length * along;
    path_to(svg, "M", back);
    path_to(svg, "L", front);
    for (const double sign : {-1.0, 1.0}) {
        const Point tip = sign < 0 ? back : front;
        const Point root = tip - sign * head * along;
        path_to(svg, "M", root + head_width * head * aside);
        path_to(svg, "L", tip);
        path_to(svg, "L", root - head_width * head * aside);
    }
}

/// Two crossed lines with a small square at each end.
void cross_of_columns(SvgText& svg, Point middle, Point along, double half_length) {
    constexpr double share = 0.16; // of a square's half side
    const Point aside{-along.y, along.x};
    const double half_side = share * half_length;
    const double inner = half_length - 2 * half_side;
    for (const Point way : {along, aside}) {
        path_to(svg, "M", middle - inner * way);
        path_to(svg, "L", middle + inner * way);
        for (const double sign : {-1.0, 1.0}) {
            const Point centre = middle + sign * (half_length - half_side) * way;
            path_to(svg, "M", centre - half_side * along - half_side * aside);
            path_to(svg, "L", centre + half_side * along - half_side * aside);
            path_to(svg, "L", centre + half_side * along + half_side * aside);
            path_to(svg, "L", centre - half_side * along + half_side * aside);
            svg.add("Z");
        }
    }
}

Point direction_of(const FramedDeck& deck) {
    if (deck.span == SpanKind::one_way) {
        const double angle = deck.direction * std::acos(0.0) / 90;
        return {std::cos(angle), -std::sin(angle)};
    }
    Point longest;
    for (std::size_t i = 0; i < deck.outline.size(); ++i) {
        const Point edge = deck.outline[(i + 1) % deck.outline.size()] - deck.outline[i];
        longest = norm(edge) > norm(longest) ? edge : longest;
    }
    return (1 / norm(longest)) * Point{longest.x, -longest.y};
}

} // namespace

double SpanMark::below() const {
    constexpr double gap = 8;
    return gap + half_height();
}

double SpanMark::half_width() const {
    const double across = span == SpanKind::one_way ? 0 : std::abs(along.y);
    return half_length * std::max(std::abs(along.x), across);
}

double SpanMark::half_height() const {
    const double across = span == SpanKind::one_way ? 0 : std::abs(along.x);
    return half_length * std::max(std::abs(along.y), across);
}

void SpanMark::draw(SvgText& svg, Point middle) const {
    if (span == SpanKind::columns) {
        cross_of_columns(svg, middle, along, half_length);
        return;
    }
    double_arrow(svg, middle, along, half_length);
    if (span == SpanKind::two_way) {
        double_arrow(svg, middle, {-along.y, along.x}, half_length);
    }
}

SpanMark span_mark(const FramedDeck& deck, double side) {
    constexpr double longest = 24;
    constexpr double longest_of_cross = 17;
    constexpr double share = 0.15; // of the deck's shorter side
    const double most = deck.span == SpanKind::one_way ? longest : longest_of_cross;
    return {deck.span, direction_of(deck), std::min(most, share * side)};
}

Sharing end_zones_of(const Sharing& sharing, const FramedLevel& level) {
    Sharing zones;
    zones.members = sharing.members;
    zones.walls = sharing.walls;
    zones.columns = sharing.columns;
    zones.axes = sharing.axes;
    for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
        const std::span<const Transfer> transfers = sharing.transfers[c];
        if (transfers.empty() || level.decks[sharing.cells[c].deck].span == SpanKind::one_way) {
            continue;
        }
        const Transfer& to = transfers.front();
        if (to.station_from == to.station_to && sharing.carrier(to.carrier).kind != CarrierKind::column) {
            zones.cells.push_back(sharing.cells[c]);
            zones.transfers.push_group(transfers);
        }
    }
    return zones;
}

RUNNEL_NAMESPACE_END
