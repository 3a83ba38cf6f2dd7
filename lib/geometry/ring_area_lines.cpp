// Straight lines against the rings of an area: how much of them lies inside, outside, along an edge.

#include "geometry/basic.hpp"
#include "geometry/ring_area.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

/// Fractions of the way from a to b at which it meets edges, between 0 and 1, rising.
void RingArea::stop_at_edges(Point a, Point b) {
    stops_.assign({0, 1});
    finder_.find(box_of(a, b).grown(noise_), near_);
    const Point d = b - a;
    for (const std::uint32_t e : near_) {
        const Point q = edges_[e].b - edges_[e].a;
        const double denominator = cross(d, q);
        if (denominator != 0) {
            const double t = cross(edges_[e].a - a, q) / denominator;
            if (t > 0 && t < 1) {
                stops_.push_back(t);
            }
        }
    }
    std::sort(stops_.begin(), stops_.end());
}

bool RingArea::is_beside_edge(Point p, double reach) {
    std::vector<std::uint32_t> beside;
    finder_.find(box_of(p, p).grown(reach), beside);
    return std::any_of(beside.begin(), beside.end(), [&](std::uint32_t e) {
        return distance_to_segment(p, edges_[e].a, edges_[e].b) <= reach;
    });
}

double RingArea::length_outside(Point a, Point b) {
    stop_at_edges(a, b);
    const double length = distance(a, b);
    double outside = 0;
    for (std::size_t i = 0; i + 1 < stops_.size(); ++i) {
        const double stretch = (stops_[i + 1] - stops_[i]) * length;
        const Point middle = between(a, b, (stops_[i] + stops_[i + 1]) / 2);
        if (stretch > noise_ && !contains(middle) && !is_beside_edge(middle, noise_)) {
            outside += stretch;
        }
    }
    return outside;
}

namespace {

/// Part of the stretch from p to q, whose feet lie on the segment from a to b, within `beside` of it.
double part_beside(Point p, Point q, Point a, Point b, double beside) {
    const Point d = b - a;
    const double at_p = cross(d, p - a) / norm(d);
    const double at_q = cross(d, q - a) / norm(d);
    double from = 0;
    double to = 1;
    for (const double sign : {1.0, -1.0}) { // where beside - sign * (distance to the left) is not negative
        const double start = beside - sign * at_p;
        const double end = beside - sign * at_q;
        if (start < 0 && end < 0) {
            return 0;
        }
        if (start < 0) {
            from = std::max(from, start / (start - end));
        } else if (end < 0) {
            to = std::min(to, start / (start - end));
        }
    }
    return std::max(0.0, to - from);
}

} // namespace

RingArea::Shared RingArea::shared_with(Point a, Point b, double beside) {
    const double length = distance(a, b);
    switch (place_of(box_of(a, b).grown(beside))) {
    case Place::inside:
        return {length, 0};
    case Place::outside:
        return {};
    case Place::edge:
        break;
    }
    Shared shared;
    stop_at_edges(a, b);
    for (std::size_t i = 0; i + 1 < stops_.size(); ++i) {
        if (contains(between(a, b, (stops_[i] + stops_[i + 1]) / 2))) {
            shared.inside += (stops_[i + 1] - stops_[i]) * length;
        }
    }
    finder_.find(box_of(a, b).grown(beside), near_);
    for (const std::uint32_t e : near_) {
        const Edge& edge = edges_[e];
        const double edge_length = distance(edge.a, edge.b);
        const double sa = station_of(a, edge.a, edge.b);
        const double sb = station_of(b, edge.a, edge.b);
        const double from = std::max(0.0, std::min(sa, sb));
        const double to = std::min(edge_length, std::max(sa, sb));
        if (to - from <= shared.along_edge) {
            continue;
        }
        const Point p = between(edge.a, edge.b, from / edge_length);
        const Point q = between(edge.a, edge.b, to / edge_length);
        // What meets an edge at an angle is beside it near the meeting point too: that alone is but a point.
        constexpr double runs_along = 0.5;
        const double part = part_beside(p, q, a, b, beside);
        if (part >= runs_along) {
            shared.along_edge = std::max(shared.along_edge, (to - from) * part);
        }
    }
    return shared;
}

RUNNEL_NAMESPACE_END
