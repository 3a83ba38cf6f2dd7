#include "deck/fixity.hpp"

#include "deck/convex_panel.hpp"
#include "deck/nearest.hpp"
#include "deck/panels.hpp"
#include "geometry/basic.hpp"
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
    // The ring may begin on such a way: at its far end, or where it leaves the border.
    while (ring.size() >= 3 && (ring[1] == ring.back() || ring.front() == ring[ring.size() - 2])) {
        if (ring[1] == ring.back()) {
            ring.erase(ring.begin());
            ring.pop_back();
        } else {
            ring.resize(ring.size() - 2);
        }
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
          inside_(deck.openings.empty() ? panels_ : divide_into_panels(deck, carriers, tolerance),
                  carriers.size()),
          carrier_finder_(boxes_of(carriers, tolerance.snap)) {}

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
                           [this](const FramedDeck& part) { return touches_carrier(part); });
    }

    [[nodiscard]] const SetAside& set_aside() const { return set_aside_; }

    void share(const Plan& plan, const Framing& framing, std::uint32_t level, LostLoads& lost,
               Sharing& sharing) const {
        CarrierAxes axes(deck_.carriers, sharing);
        for (std::size_t p = 0; p < panels_.panels.size(); ++p) {
            if (!shapes_[p].sides.empty()) {
                share_convex_panel(deck_, panels_.panels[p], shapes_[p].sides, axes, sharing);
            }
        }
        for (const FramedDeck& part : parts_) {
            share_part_nearest(plan, framing, level, deck_.index, part, area_of(part),
                               carriers_near(part.outline), lost, sharing);
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

    [[nodiscard]] std::vector<LineCarrier> carriers_near(const Ring& ring) const {
        std::vector<std::uint32_t> found;
        carrier_finder_.find(box_of(std::span<const Point>(ring)), found);
        std::vector<LineCarrier> near;
        for (const std::uint32_t c : found) {
            near.push_back(deck_.carriers[c]);
        }
        return near;
    }

    static double area_of(const FramedDeck& part) {
        Sum area;
        area.add(signed_area(part.outline));
        for (const Ring& opening : part.openings) {
            area.add(signed_area(opening)); // clockwise
        }
        return area.value();
    }

    [[nodiscard]] bool touches_carrier(const FramedDeck& part) const {
        const Panels panels = divide_into_panels(part, carriers_near(part.outline), deck_.tolerance);
        return std::any_of(panels.panels.begin(), panels.panels.end(), has_carrier);
    }

    /// A part of the deck as a deck of its own.
    [[nodiscard]] FramedDeck part_of(const Panel& panel, Point origin) const {
        FramedDeck part = deck_.deck;
        part.outline = ring_without_ends(panel.outer, origin);
        part.openings.clear();
        for (const std::vector<PanelEdge>& hole : panel.holes) {
            Ring ring = ring_without_ends(hole, origin);
            if (ring.size() >= 3) {
                part.openings.push_back(std::move(ring));
            }
        }
        return part;
    }

    /// A panel that is not fit, or what openings leave of it. They are cut out of this panel alone, so that
    /// its border stays what it is to its neighbours.
    void add_parts(const Panel& panel, const PanelShape& shape) {
        const std::size_t first = parts_.size();
        FramedDeck whole = part_of(panel, panels_.origin);
        std::vector<std::uint32_t> near;
        deck_.opening_finder.find(box_of(ring_without_ends(panel.outer, {})), near);
        if (near.empty()) {
            parts_.push_back(std::move(whole));
        } else {
            for (const std::uint32_t opening : near) {
                whole.openings.push_back(deck_.deck.openings[opening]);
            }
            const Panels parts = divide_into_panels(whole, {}, deck_.tolerance);
            for (const Panel& part : parts.panels) {
                parts_.push_back(part_of(part, parts.origin));
            }
        }
        double area = 0;
        for (std::size_t p = first; p < parts_.size(); ++p) {
            area += area_of(parts_[p]);
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
    DeckBesideCarriers inside_; ///< where outline less openings is
    BoxFinder carrier_finder_;
    std::vector<PanelShape> shapes_; ///< by panel; without sides where it is not fit
    std::vector<FramedDeck> parts_;  ///< of the deck, that go to the nearest lines
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
                     std::span<const LineCarrier> carriers, const DecksBeside& beside, LostLoads& lost,
                     Sharing& sharing) {
    const FramedLevel& level = framing.levels[level_index];
    const FramedDeck& deck = level.decks[index];
    FixityPanels panels(deck, index, carriers, beside,
                        {noise_of(framing.largest_coordinate), plan.settings.snap});
    if (!panels.shape()) {
        return false;
    }
    panels.share(plan, framing, level_index, lost, sharing);
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
