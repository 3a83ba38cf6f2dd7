#include "report/drawing_places.hpp"

#include "geometry/basic.hpp"
#include "report/drawing_marks.hpp"

#include <algorithm>
#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr double enough = 6; ///< px between a label and the next line

std::vector<Box> boxes_of(std::span<const std::pair<Point, Point>> lines) {
    std::vector<Box> boxes;
    for (const auto& [a, b] : lines) {
        boxes.push_back(box_of(a, b));
    }
    return boxes;
}

double distance_to_box(Point p, const Box& box) {
    return distance(p, {std::clamp(p.x, box.low.x, box.high.x), std::clamp(p.y, box.low.y, box.high.y)});
}

/// Between a line and a box; 0 where they meet.
double distance_to_box(Point a, Point b, const Box& box) {
    if (part_within(a, b, box.low, box.high)) {
        return 0;
    }
    double least = std::min(distance_to_box(a, box), distance_to_box(b, box));
    for (const Point corner :
         std::array<Point, 4>{{box.low, {box.high.x, box.low.y}, box.high, {box.low.x, box.high.y}}}) {
        least = std::min(least, distance_to_segment(corner, a, b));
    }
    return least;
}

bool holds(const Ring& ring, Point p) {
    bool inside = false;
    for (std::size_t i = 0, j = ring.size() - 1; i < ring.size(); j = i++) {
        const Point a = ring[i];
        const Point b = ring[j];
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) * (b.x - a.x) / (b.y - a.y)) {
            inside = !inside;
        }
    }
    return inside;
}

Box moved(const Box& box, Point by) {
    return {box.low + by, box.high + by};
}

} // namespace

ClearPlaces::ClearPlaces(std::vector<std::pair<Point, Point>> lines)
    : lines_(std::move(lines)), finder_(boxes_of(lines_)) {}

/// No more than `enough`.
double ClearPlaces::clearance(const Box& box, std::vector<std::uint32_t>& near) const {
    double least = enough;
    finder_.find(box.grown(enough), near);
    for (const std::uint32_t i : near) {
        least = std::min(least, distance_to_box(lines_[i].first, lines_[i].second, box));
    }
    return least;
}

Point ClearPlaces::find(const Ring& outline, std::span<const Ring> openings, Point usual,
                        const Box& box) const {
    std::vector<std::uint32_t> near;
    const Point to_middle = 0.5 * (box.low + box.high);
    const auto clearance_at = [&](Point place) {
        const Point middle = place + to_middle;
        const bool on_deck =
            holds(outline, middle) && std::none_of(openings.begin(), openings.end(),
                                                   [middle](const Ring& o) { return holds(o, middle); });
        return on_deck ? clearance(moved(box, place), near) : -1;
    };
    Point best = usual;
    double best_clearance = clearance_at(usual);
    if (best_clearance >= enough) {
        return usual;
    }
    constexpr int steps = 24; // each way
    const Box around = box_of(std::span<const Point>(outline));
    for (int i = 1; i < steps; ++i) {
        for (int j = 1; j < steps; ++j) {
            const Point place{around.low.x + (around.high.x - around.low.x) * i / steps,
                              around.low.y + (around.high.y - around.low.y) * j / steps};
            const double clear = clearance_at(place);
            if (clear > best_clearance ||
                (clear == best_clearance && distance(place, usual) < distance(best, usual))) {
                best = place;
                best_clearance = clear;
            }
        }
    }
    return best;
}

RUNNEL_NAMESPACE_END
