#pragma once

#include "deck/panels.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <optional>
#include <span>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

class RingArea;
struct GatheredArea;

/// The axes in which what goes to each line carrier of a deck is described, one for each, entered in Sharing
/// when first asked for: origin at the carrier's `from`, across = station, along = distance square to it,
/// positive on its right.
class CarrierAxes {
public:
    CarrierAxes(std::span<const LineCarrier> carriers, Sharing& sharing)
        : carriers_(carriers), sharing_(sharing), index_(carriers.size(), none) {}

    /// Index into Sharing::axes; `carrier` as in the list given.
    [[nodiscard]] std::uint32_t of(std::uint32_t carrier);

private:
    std::span<const LineCarrier> carriers_;
    Sharing& sharing_;
    std::vector<std::uint32_t> index_;
};

/// A straight side of a panel: one edge of its border or several in a row, straight within `snap`.
struct PanelSide {
    Point a, b; ///< its ends, from Panels::origin; the panel lies on the left
    std::size_t first_edge = 0;
    std::size_t edge_count =
        0;                ///< of the panel's outer border, which goes on from its last edge to its first
    bool carries = false; ///< a carrier lies along some of it
    double weight = 1;    ///< distances from it are divided by this before they are compared
};

/// The sides of a panel, counter-clockwise, and what is against sharing it among them, each with a place
/// (from Panels::origin). A panel no broader than `snap` has the one side that carries most of it, and
/// nothing against it.
struct PanelShape {
    std::vector<PanelSide> sides;
    std::optional<Point> reflex; ///< a corner where it is not convex
    std::optional<Point> inside; ///< where a carrier ends inside or stands free in it
    std::optional<Point> gap;    ///< of a side that is carried over a part of its length
};
/// `index`: of the panel in its list.
[[nodiscard]] PanelShape shape_of(const Panel& panel, std::uint32_t index, double snap);

/// The deck whose panels are shared; what its cells need to know.
struct PanelDeck {
    const FramedDeck& deck;
    std::uint32_t index = none; ///< in its level
    std::span<const LineCarrier> carriers;
    Point origin;               ///< Panels::origin
    std::vector<Ring> openings; ///< from origin
    BoxFinder opening_finder;
    Tolerance tolerance;

    PanelDeck(const FramedDeck& of_deck, std::uint32_t deck_index, std::span<const LineCarrier> line_carriers,
              Point panel_origin, Tolerance deck_tolerance);
};

/// Shares a convex panel, made without the deck's openings, among the sides that carry: each point to the
/// side from which its distance over the side's weight is least, square to it. What lies beyond a carrier's
/// end goes to that end; openings are left out. With all weights 1 and carriers along every side this is the
/// nearest line. `area` is bounded by the deck's rings as seen from Panels::origin; what goes to its carrier
/// straight across an opening or past the deck's edge is added to `way_leaves`.
///
/// Appends cells and transfers. Laws (tests/laws/fixity_test.cpp): cover, owner, motion, and the carriers'
/// order and direction make no difference. Cost: O(n^2) for n sides, far below any diagram for the few that
/// bays have.
void share_convex_panel(const PanelDeck& deck, const Panel& panel, std::span<const PanelSide> sides,
                        RingArea& area, CarrierAxes& axes, GatheredArea& way_leaves, Sharing& sharing);

RUNNEL_NAMESPACE_END
