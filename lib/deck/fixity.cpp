#include "deck/fixity.hpp"

#include "deck/convex_panel.hpp"
#include "deck/nearest.hpp"
#include "deck/panels.hpp"
#include "geometry/basic.hpp"
#include "geometry/convex.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <cmath>
#include <optional>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Where there is deck beside the carriers of a deck, by stations.
class DeckBesideCarriers {
public:
    DeckBesideCarriers(const Panels& panels, std::size_t carriers) : left_(carriers), right_(carriers) {
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

    /// Length of the part of a panel's edge with deck on its other side.
    [[nodiscard]] double beyond(const PanelEdge& edge) const {
        const bool forward = edge.station_from < edge.station_to;
        const double from = std::min(edge.station_from, edge.station_to);
        const double to = std::max(edge.station_from, edge.station_to);
        const std::vector<Stretch>& stretches = (forward ? right_ : left_)[edge.carrier];
        // They do not overlap: the first that matters is the first that ends behind `from`.
        auto it =
            std::lower_bound(stretches.begin(), stretches.end(), from,
                             [](const Stretch& stretch, double station) { return stretch.to <= station; });
        double length = 0;
        for (; it != stretches.end() && it->from < to; ++it) {
            length += std::min(to, it->to) - std::max(from, it->from);
        }
        return length;
    }

private:
    struct Stretch {
        double from, to;
    };

    void add(const std::vector<PanelEdge>& border) {
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

    std::vector<std::vector<Stretch>> left_, right_; ///< by carrier
};

/// The ring of a border without the ways there and back along carriers that end inside.
Ring ring_without_ends(const std::vector<PanelEdge>& border, Point origin) {
    Ring ring;
    for (const PanelEdge& edge : border) {
        if (ring.size() >= 2 && ring[ring.size() - 2] == edge.from) {
            ring.pop_back();
        } else {
            ring.push_back(edge.from);
        }
    }
    while (ring.size() >= 3 && ring[1] == ring.back()) { // the way there and back that the ring begins with
        ring.erase(ring.begin());
        ring.pop_back();
    }
    for (Point& p : ring) {
        p = origin + p;
    }
    return ring;
}

bool has_carrier(const Panel& panel) {
    const auto carries = [](const PanelEdge& edge) { return edge.carrier != none; };
    return std::any_of(panel.outer.begin(), panel.outer.end(), carries) ||
           std::any_of(panel.holes.begin(), panel.holes.end(), [&](const std::vector<PanelEdge>& hole) {
               return std::any_of(hole.begin(), hole.end(), carries);
           });
}

/// A point well inside a panel, from Panels::origin.
Point point_inside(const Panel& panel, double noise) {
    std::vector<Ring> holes;
    for (const std::vector<PanelEdge>& hole : panel.holes) {
        holes.push_back(ring_without_ends(hole, {}));
    }
    Point best = panel.outer.front().from;
    double largest = 0;
    for (const Convex& piece : convex_pieces(ring_without_ends(panel.outer, {}), holes, noise)) {
        const AreaMoments moments = moments_of(piece, Point{});
        if (moments.area > largest) {
            largest = moments.area;
            best = (1 / moments.area) * moments.moment;
        }
    }
    return best;
}

bool encloses(const std::vector<PanelEdge>& border, Point p) {
    bool inside = false;
    for (std::size_t i = 0; i < border.size(); ++i) {
        Point a = border[i].from;
        Point b = border[(i + 1) % border.size()].from;
        if ((a.y > p.y) == (b.y > p.y)) {
            continue;
        }
        if (a.y > b.y) {
            std::swap(a, b);
        }
        inside = inside != (cross(b - a, p - a) > 0);
    }
    return inside;
}

/// Area that goes to the nearest lines although the rule would divide it otherwise, and where.
struct SetAside {
    double area = 0;
    double largest = 0;
    Point place; ///< in the plan
};

/// The panels of a deck with their sides, weighted.
class FixityPanels {
public:
    FixityPanels(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> carriers,
                 const DecksBeside& beside, Tolerance tolerance)
        : panels_(divide_into_panels(deck.outline, {}, carriers, tolerance)),
          deck_(deck, index, carriers, panels_.origin, tolerance), beside_(beside),
          open_(deck.openings.empty() ? panels_ : divide_into_panels(deck, carriers, tolerance)),
          inside_(open_, carriers.size()), carrier_finder_(boxes_of(carriers, tolerance.snap)) {}

    /// Shapes all panels and finds those that are not fit. False: a part of the deck touches no carrier, so
    /// that panels do not tell whose it is.
    [[nodiscard]] bool shape() {
        for (const Panel& panel : panels_.panels) {
            PanelShape shape = shape_of(panel, deck_.tolerance.snap);
            for (PanelSide& side : shape.sides) {
                side.weight = continues(panel, side) ? fixity_weight() : 1;
            }
            if (shape.not_convex || !has_carrier(panel)) {
                add_parts(panel, shape);
                shape.sides.clear();
            }
            shapes_.push_back(std::move(shape));
        }
        return std::all_of(parts_.begin(), parts_.end(),
                           [](const Panel* part) { return has_carrier(*part); });
    }

    [[nodiscard]] const SetAside& set_aside() const { return set_aside_; }

    void share(const Plan& plan, const Framing& framing, std::uint32_t level, Sharing& sharing) const {
        CarrierAxes axes(deck_.carriers, sharing);
        for (std::size_t p = 0; p < panels_.panels.size(); ++p) {
            if (!shapes_[p].sides.empty()) {
                share_convex_panel(deck_, panels_.panels[p], shapes_[p].sides, axes, sharing);
            }
        }
        for (const Panel* part : parts_) {
            share_part(plan, framing, level, *part, sharing);
        }
    }

private:
    static std::vector<Box> boxes_of(std::span<const LineCarrier> carriers, double snap) {
        std::vector<Box> boxes;
        boxes.reserve(carriers.size());
        for (const LineCarrier& carrier : carriers) {
            boxes.push_back(box_of(carrier.from, carrier.to).grown(snap));
        }
        return boxes;
    }

    /// What openings leave of a panel that is not fit.
    void add_parts(const Panel& panel, const PanelShape& shape) {
        double area = 0;
        if (deck_.openings.empty()) {
            parts_.push_back(&panel);
            area = panel.area;
        } else {
            if (inside_points_.empty()) {
                for (const Panel& part : open_.panels) {
                    inside_points_.push_back(point_inside(part, deck_.tolerance.noise));
                }
            }
            for (std::size_t p = 0; p < open_.panels.size(); ++p) {
                if (encloses(panel.outer, inside_points_[p])) {
                    parts_.push_back(&open_.panels[p]);
                    area += open_.panels[p].area;
                }
            }
        }
        if (!is_alike(panel, shape.sides)) {
            set_aside_.area += area;
            if (area > set_aside_.largest) {
                set_aside_.largest = area;
                set_aside_.place = panels_.origin + shape.not_convex.value_or(panel.outer.front().from);
            }
        }
    }

    /// Whether all carriers of a panel weigh alike: then the rule gives what the nearest line gives.
    static bool is_alike(const Panel& panel, std::span<const PanelSide> sides) {
        double least = fixity_weight();
        double most = 1;
        for (const PanelSide& side : sides) {
            if (side.carries) {
                least = std::min(least, side.weight);
                most = std::max(most, side.weight);
            }
        }
        // What stands free in it has the deck on both sides.
        most = panel.holes.empty() ? most : fixity_weight();
        return !(least < most);
    }

    void share_part(const Plan& plan, const Framing& framing, std::uint32_t level, const Panel& panel,
                    Sharing& sharing) const {
        FramedDeck part = deck_.deck;
        part.outline = ring_without_ends(panel.outer, panels_.origin);
        part.openings.clear();
        for (const std::vector<PanelEdge>& hole : panel.holes) {
            Ring ring = ring_without_ends(hole, panels_.origin);
            if (ring.size() >= 3) {
                part.openings.push_back(std::move(ring));
            }
        }
        std::vector<std::uint32_t> found;
        carrier_finder_.find(box_of(std::span<const Point>(part.outline)), found);
        std::vector<LineCarrier> near;
        for (const std::uint32_t c : found) {
            near.push_back(deck_.carriers[c]);
        }
        share_part_nearest(plan, framing, level, deck_.index, part, panel.area, near, sharing);
    }

    /// Whether the deck, or another, goes on over more than half of a side.
    [[nodiscard]] bool continues(const Panel& panel, const PanelSide& side) const {
        double beyond = 0;
        for (std::size_t k = 0; k < side.edge_count; ++k) {
            const PanelEdge& edge = panel.outer[(side.first_edge + k) % panel.outer.size()];
            const PanelEdge& next = panel.outer[(side.first_edge + k + 1) % panel.outer.size()];
            if (edge.beyond != none && edge.carrier != none) {
                beyond += inside_.beyond(edge);
            } else if (edge.beyond == none) {
                beyond +=
                    beside_.length_along(deck_.index, panels_.origin + edge.from, panels_.origin + next.from);
            }
        }
        return beyond > distance(side.a, side.b) / 2;
    }

    Panels panels_; ///< of the outline: openings are cut out of what each side takes
    PanelDeck deck_;
    const DecksBeside& beside_;
    Panels open_;               ///< of the outline less openings
    DeckBesideCarriers inside_; ///< where these are
    BoxFinder carrier_finder_;
    std::vector<PanelShape> shapes_;   ///< by panel; without sides where it is not fit
    std::vector<const Panel*> parts_;  ///< that go to the nearest lines
    std::vector<Point> inside_points_; ///< by panel of open_, when needed
    SetAside set_aside_;
};

} // namespace

double fixity_weight() noexcept {
    return std::sqrt(3.0);
}

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

bool share_by_fixity(const Plan& plan, const Framing& framing, std::uint32_t level_index, std::uint32_t index,
                     std::span<const LineCarrier> carriers, const DecksBeside& beside, Sharing& sharing) {
    const FramedLevel& level = framing.levels[level_index];
    const FramedDeck& deck = level.decks[index];
    FixityPanels panels(deck, index, carriers, beside,
                        {noise_of(framing.largest_coordinate), plan.settings.snap});
    if (!panels.shape()) {
        return false;
    }
    panels.share(plan, framing, level_index, sharing);
    if (const SetAside& aside = panels.set_aside(); aside.area > 0) {
        Problem problem = problem_at(
            ProblemCode::fixity_set_aside, deck.origin, "decks",
            "Level " + level.id + ", deck " + deck.id + ": " + area_text(aside.area, plan.units) +
                " lie in panels that are not convex or in which a member or wall ends; they go to the "
                "nearest "
                "lines instead of by fixity, the largest part at " +
                point_text(aside.place, plan.units) + '.',
            "Complete the members around such panels, or use \"corner_angles\": \"equal\".", {deck.id});
        problem.point = aside.place;
        sharing.problems.push_back(std::move(problem));
    }
    return true;
}

RUNNEL_NAMESPACE_END
