#include "deck/fixity.hpp"

#include "deck/convex_panel.hpp"
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
    }

    /// Length of the part of a panel's edge with deck on its other side.
    [[nodiscard]] double beyond(const PanelEdge& edge) const {
        const bool forward = edge.station_from < edge.station_to;
        const double from = std::min(edge.station_from, edge.station_to);
        const double to = std::max(edge.station_from, edge.station_to);
        double length = 0;
        for (const Stretch& stretch : (forward ? right_ : left_)[edge.carrier]) {
            length += std::max(0.0, std::min(to, stretch.to) - std::max(from, stretch.from));
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

/// A panel that the rule does not fit.
struct Misfit {
    Point place; ///< in the plan
    const char* why = "";
};

/// The panels of a deck with their sides, weighted.
class FixityPanels {
public:
    FixityPanels(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> carriers,
                 const DecksBeside& beside, Tolerance tolerance)
        : panels_(divide_into_panels(deck.outline, {}, carriers, tolerance)),
          deck_(deck, index, carriers, panels_.origin, tolerance), beside_(beside),
          inside_(deck.openings.empty() ? panels_ : divide_into_panels(deck, carriers, tolerance),
                  carriers.size()) {}

    /// Shapes all panels; stops at the first that does not fit. One that lies in openings is no panel.
    [[nodiscard]] std::optional<Misfit> shape() {
        for (const Panel& panel : panels_.panels) {
            PanelShape shape = shape_of(panel, deck_.tolerance.snap);
            const bool carried = std::any_of(shape.sides.begin(), shape.sides.end(),
                                             [](const PanelSide& side) { return side.carries; });
            if ((shape.not_convex || !carried) && !is_nothing(panel)) {
                if (shape.not_convex) {
                    return Misfit{panels_.origin + *shape.not_convex,
                                  "is not convex there, or a member or wall ends in it"};
                }
                return Misfit{panels_.origin + panel.outer.front().from,
                              "has no member or wall along its sides"};
            }
            if (shape.not_convex || !carried) {
                shape.sides.clear();
            }
            for (PanelSide& side : shape.sides) {
                side.weight = continues(panel, side) ? fixity_weight() : 1;
            }
            shapes_.push_back(std::move(shape));
        }
        return std::nullopt;
    }

    void share(Sharing& sharing) const {
        CarrierAxes axes(deck_.carriers, sharing);
        for (std::size_t p = 0; p < panels_.panels.size(); ++p) {
            if (!shapes_[p].sides.empty()) {
                share_convex_panel(deck_, panels_.panels[p], shapes_[p].sides, axes, sharing);
            }
        }
    }

private:
    [[nodiscard]] bool is_nothing(const Panel& panel) const {
        return !deck_.openings.empty() &&
               area_without_openings(deck_, panel) <= deck_.tolerance.snap * std::sqrt(panel.area);
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
    DeckBesideCarriers inside_;
    std::vector<PanelShape> shapes_; ///< by panel
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
    if (const std::optional<Misfit> misfit = panels.shape()) {
        Problem problem = problem_at(
            ProblemCode::fixity_set_aside, deck.origin, "decks",
            "Level " + level.id + ", deck " + deck.id +
                ": corner angles by fixity need convex panels; the one at " +
                point_text(misfit->place, plan.units) + ' ' + misfit->why +
                ". The whole deck goes to the nearest lines instead.",
            "Complete the members around the panel, or use \"corner_angles\": \"equal\".", {deck.id});
        problem.point = misfit->place;
        sharing.problems.push_back(std::move(problem));
        return false;
    }
    panels.share(sharing);
    return true;
}

RUNNEL_NAMESPACE_END
