#include "deck/fixity.hpp"

#include "deck/convex_panel.hpp"
#include "deck/nearest.hpp"
#include "deck/panels.hpp"
#include "geometry/basic.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <optional>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

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

/// Area that goes to the nearest lines although the rule would divide it otherwise: why, and where.
struct SetAside {
    double area = 0;
    double largest = 0;
    Point place; ///< in the plan
    bool reflex = false, inside = false, gap = false;

    void add(double part, const PanelShape& shape, Point origin) {
        area += part;
        reflex = reflex || shape.reflex;
        inside = inside || shape.inside;
        gap = gap || shape.gap;
        if (part > largest) {
            largest = part;
            place = origin + (shape.inside   ? *shape.inside
                              : shape.reflex ? *shape.reflex
                                             : shape.gap.value_or(Point{}));
        }
    }

    [[nodiscard]] std::string reasons() const {
        std::string text;
        const auto add_if = [&](bool holds, const char* reason) {
            if (holds) {
                text += (text.empty() ? "" : ", or ") + std::string(reason);
            }
        };
        add_if(inside, "in which a member or wall ends or stands free");
        add_if(reflex, "that are not convex");
        add_if(gap, "with a side that is carried over a part of its length only");
        return text;
    }
};

/// The panels of a deck with their sides, weighted. `carriers` share more than a point with the deck, and are
/// not none.
class FixityPanels {
public:
    FixityPanels(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> carriers,
                 const DecksBeside& beside, Tolerance tolerance)
        : panels_(divide_into_panels(deck.outline, {}, carriers, tolerance)),
          deck_(deck, index, carriers, panels_.origin, tolerance), beside_(beside),
          inside_(deck.openings.empty() ? panels_ : divide_into_panels(deck, carriers, tolerance),
                  carriers.size()),
          carrier_finder_(boxes_of(carriers)) {
        shapes_.reserve(panels_.panels.size());
        for (std::uint32_t p = 0; p < panels_.panels.size(); ++p) {
            shape(p);
        }
    }

    [[nodiscard]] const SetAside& set_aside() const { return set_aside_; }

    /// Appends the cells; `area` is the deck's, seen from its first corner.
    GatheredArea share(const Plan& plan, const Framing& framing, RingArea& area, Sharing& sharing) const {
        GatheredArea way_leaves;
        CarrierAxes axes(deck_.carriers, sharing);
        for (std::size_t p = 0; p < panels_.panels.size(); ++p) {
            if (!shapes_[p].sides.empty()) {
                share_convex_panel(deck_, panels_.panels[p], shapes_[p].sides, area, axes, way_leaves,
                                   sharing);
            }
        }
        for (const FramedDeck& part : parts_) {
            share_part_nearest(plan, framing, deck_.index, part, area_of(part), carriers_around(part.outline),
                               way_leaves, sharing);
        }
        return way_leaves;
    }

private:
    static std::vector<Box> boxes_of(std::span<const LineCarrier> carriers) {
        std::vector<Box> boxes;
        boxes.reserve(carriers.size());
        for (const LineCarrier& carrier : carriers) {
            boxes.push_back(box_of(carrier.from, carrier.to));
        }
        return boxes;
    }

    /// Weighs the sides of a panel, and keeps them where the panel is fit for them.
    void shape(std::uint32_t index) {
        const Panel& panel = panels_.panels[index];
        PanelShape shape = shape_of(panel, index, deck_.tolerance.snap);
        for (PanelSide& side : shape.sides) {
            side.weight = continues(panel, side) ? fixity_weight() : 1;
        }
        if (!shape.gap) {
            shape.gap = carrier_beside_free_edge(panel);
        }
        const bool alike = is_alike(panel, shape.sides);
        bool fits = !shape.reflex && !shape.inside && !shape.gap && has_carrier(panel);
        if (alike && fits) {
            // Beyond a free side a line may be nearer than those of the panel.
            fits = std::all_of(shape.sides.begin(), shape.sides.end(),
                               [](const PanelSide& side) { return side.carries; });
        }
        if (!fits) {
            const double area = add_parts(panel);
            if (!alike) {
                set_aside_.add(area, shape, panels_.origin);
            }
            shape.sides.clear();
        }
        shapes_.push_back(std::move(shape));
    }

    /// Where a carrier lies beside a free edge that leaves it by more than `snap` farther on: drawn askew, it
    /// does not bound the panel, and yet carries some of that edge.
    [[nodiscard]] std::optional<Point> carrier_beside_free_edge(const Panel& panel) const {
        std::vector<std::uint32_t> near;
        for (std::size_t i = 0; i < panel.outer.size(); ++i) {
            const PanelEdge& edge = panel.outer[i];
            if (edge.carrier != none) {
                continue;
            }
            const Point a = panels_.origin + edge.from;
            const Point b = panels_.origin + panel.outer[(i + 1) % panel.outer.size()].from;
            carrier_finder_.find(box_of(a, b).grown(deck_.tolerance.snap), near);
            for (const std::uint32_t c : near) {
                const auto bounds = [c](const PanelEdge& other) { return other.carrier == c; };
                if (std::none_of(panel.outer.begin(), panel.outer.end(), bounds) &&
                    runs_beside(deck_.carriers[c], a, b)) {
                    return edge.from;
                }
            }
        }
        return std::nullopt;
    }

    /// Whether a carrier runs within `snap` of the line from a to b over at least half of what they have in
    /// common, which is more than a point: what only meets it there does not.
    [[nodiscard]] bool runs_beside(const LineCarrier& carrier, Point a, Point b) const {
        const double length = distance(a, b);
        const double snap = deck_.tolerance.snap;
        const Point along = (1 / length) * (b - a);
        double from = 0;
        double to = 1;
        const auto limit = [&](double at_from, double at_to) { // to where it is not below zero
            if (at_from < 0 && at_to < 0) {
                to = from;
            } else if (at_from < 0) {
                from = std::max(from, at_from / (at_from - at_to));
            } else if (at_to < 0) {
                to = std::min(to, at_from / (at_from - at_to));
            }
        };
        const Point p = carrier.from - a;
        const Point q = carrier.to - a;
        limit(dot(along, p), dot(along, q));
        limit(length - dot(along, p), length - dot(along, q));
        const double in_common = to - from;
        limit(snap - cross(along, p), snap - cross(along, q));
        limit(snap + cross(along, p), snap + cross(along, q));
        return (to - from) * std::abs(dot(along, q - p)) > snap && to - from >= in_common / 2;
    }

    /// All carriers that may be the nearest to some point within a ring, however far away.
    [[nodiscard]] std::vector<LineCarrier> carriers_around(const Ring& ring) const {
        const Box box = box_of(std::span<const Point>(ring));
        const Point middle = between(box.low, box.high, 0.5);
        const double half = distance(box.low, box.high) / 2; // no point is farther from the middle
        std::vector<std::uint32_t> found;
        for (double reach = half + deck_.tolerance.snap; found.empty(); reach *= 2) {
            carrier_finder_.find(box.grown(reach), found);
        }
        double nearest = std::numeric_limits<double>::infinity();
        for (const std::uint32_t c : found) {
            nearest =
                std::min(nearest, distance_to_segment(middle, deck_.carriers[c].from, deck_.carriers[c].to));
        }
        carrier_finder_.find(box.grown(nearest + half + deck_.tolerance.snap), found);
        std::vector<LineCarrier> around;
        around.reserve(found.size());
        for (const std::uint32_t c : found) {
            around.push_back(deck_.carriers[c]);
        }
        return around;
    }

    static double area_of(const FramedDeck& part) {
        Sum area;
        area.add(signed_area(part.outline));
        for (const Ring& opening : part.openings) {
            area.add(signed_area(opening)); // clockwise
        }
        return area.value();
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

    /// A panel that is not fit, or what openings leave of it; its area. They are cut out of this panel alone,
    /// so that its border stays what it is to its neighbours.
    double add_parts(const Panel& panel) {
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
        return area;
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
    std::vector<PanelShape> shapes_; ///< by panel; without sides where it goes to the nearest lines
    std::vector<FramedDeck> parts_;  ///< of the deck, that do so
    SetAside set_aside_;
};

} // namespace

double fixity_weight() noexcept {
    return std::sqrt(3.0);
}

bool share_by_fixity(const Plan& plan, const Framing& framing, std::uint32_t level_index, std::uint32_t index,
                     std::span<const LineCarrier> near, const DecksBeside& beside, Sharing& sharing) {
    const FramedLevel& level = framing.levels[level_index];
    const FramedDeck& deck = level.decks[index];
    const Tolerance tolerance{noise_of(framing.largest_coordinate), plan.settings.snap};
    RingArea area(local_rings(deck), tolerance.noise, 4 * near.size());
    const std::vector<LineCarrier> carriers = carriers_in_touch(deck, near, tolerance.snap, area);
    if (carriers.empty()) {
        return false;
    }
    const FixityPanels panels(deck, index, carriers, beside, tolerance);
    report_way_leaves(plan, level, index, panels.share(plan, framing, area, sharing), sharing);
    if (const SetAside& aside = panels.set_aside(); aside.area > 0) {
        Problem problem = problem_at(
            ProblemCode::fixity_set_aside, deck.origin, "decks",
            "Level " + level.id + ", deck " + deck.id + ": " + area_text(aside.area, plan.units) +
                " lie in bays between members and walls " + aside.reasons() +
                "; they go to the nearest lines instead of by fixity, the largest part at " +
                point_text(aside.place, plan.units) + '.',
            "Complete the members around such bays, or use \"corner_angles\": \"equal\".", {deck.id});
        problem.point = aside.place;
        sharing.problems.push_back(std::move(problem));
    }
    return true;
}

RUNNEL_NAMESPACE_END
