#include "deck/deck_beyond.hpp"

#include "geometry/basic.hpp"

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

DecksBeside::DecksBeside(const FramedLevel& level, double snap) : snap_(snap) {
    std::vector<Box> boxes;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const Ring& outline = level.decks[d].outline;
        for (std::size_t i = 0; i < outline.size(); ++i) {
            edges_.push_back({d, outline[i], outline[(i + 1) % outline.size()]});
            boxes.push_back(box_of(edges_.back().a, edges_.back().b));
        }
    }
    finder_ = BoxFinder(std::move(boxes));
}

double DecksBeside::length_along(std::uint32_t deck, Point a, Point b) const {
    const double length = distance(a, b);
    if (!(length > 0)) {
        return 0;
    }
    std::vector<std::uint32_t> near;
    finder_.find(box_of(a, b).grown(snap_), near);
    double along = 0;
    for (const std::uint32_t e : near) {
        const Edge& edge = edges_[e];
        // Outlines run counter-clockwise: what lies on the other side runs against this one.
        if (edge.deck == deck || dot(edge.b - edge.a, b - a) >= 0) {
            continue;
        }
        const double at_a = station_of(edge.a, a, b);
        const double at_b = station_of(edge.b, a, b);
        const double from = std::max(0.0, at_b);
        const double to = std::min(length, at_a);
        if (to > from && distance_to_segment(between(a, b, from / length), edge.a, edge.b) <= snap_ &&
            distance_to_segment(between(a, b, to / length), edge.a, edge.b) <= snap_) {
            along += to - from;
        }
    }
    return along;
}

DeckBesideCarriers::DeckBesideCarriers(const Panels& panels, std::size_t carriers)
    : left_(carriers), right_(carriers) {
    for (const Panel& panel : panels.panels) {
        add(panel.outer);
        for (const std::vector<PanelEdge>& hole : panel.holes) {
            add(hole);
        }
    }
    for (std::vector<std::vector<Stretch>>* side : {&left_, &right_}) {
        for (std::vector<Stretch>& stretches : *side) {
            std::sort(stretches.begin(), stretches.end(),
                      [](const Stretch& l, const Stretch& r) { return l.from < r.from; });
        }
    }
}

double DeckBesideCarriers::beyond(const PanelEdge& edge) const {
    const bool forward = edge.station_from < edge.station_to;
    const double from = std::min(edge.station_from, edge.station_to);
    const double to = std::max(edge.station_from, edge.station_to);
    const std::vector<Stretch>& stretches = (forward ? right_ : left_)[edge.carrier];
    // They do not overlap: the first that matters is the first that ends behind `from`.
    auto it = std::lower_bound(stretches.begin(), stretches.end(), from,
                               [](const Stretch& stretch, double station) { return stretch.to <= station; });
    double length = 0;
    for (; it != stretches.end() && it->from < to; ++it) {
        length += std::min(to, it->to) - std::max(from, it->from);
    }
    return length;
}

void DeckBesideCarriers::add(const std::vector<PanelEdge>& border) {
    for (const PanelEdge& edge : border) {
        if (edge.carrier == none) {
            continue;
        }
        if (edge.station_from < edge.station_to) {
            left_[edge.carrier].push_back({edge.station_from, edge.station_to});
        } else {
            right_[edge.carrier].push_back({edge.station_to, edge.station_from});
        }
    }
}

RUNNEL_NAMESPACE_END
