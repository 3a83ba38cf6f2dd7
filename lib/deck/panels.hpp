#pragma once

#include "deck/one_way.hpp"
#include "geometry/basic.hpp"

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A straight stretch of a panel's border. Borders run with the panel on their left.
struct PanelEdge {
    Point from;                   ///< from Panels::origin; the edge runs to the next one's `from`
    std::uint32_t carrier = none; ///< that lies along it, index in the list given; `none`: a free edge
    double station_from = 0;      ///< on the carrier, at `from`
    double station_to = 0;        ///< at the other end; smaller where the carrier runs against the border
    /// The panel on its other side; `none` where the deck or an opening ends here. The panel itself where a
    /// carrier ends inside it: such an edge stands in the border twice, there and back.
    std::uint32_t beyond = none;
};

/// A part of a deck that no carrier divides.
struct Panel {
    std::vector<PanelEdge> outer;              ///< counter-clockwise
    std::vector<std::vector<PanelEdge>> holes; ///< clockwise: openings and carriers that stand free in it
    double area = 0;                           ///< m2, holes taken off
};

struct Panels {
    Point origin; ///< in the plan: points are seen from here, so that far plans lose nothing
    std::vector<Panel> panels;
};

/// Divides a deck, a ring that may be turned either way, into panels: outline less openings, cut by the
/// members and walls that carry it. They may cross, end inside (which divides nothing: the panel lies on both
/// sides), lie along the deck's edges and reach beyond them. What is off by no more than `snap` counts as
/// lying along or ending at. Where several lie along one another, which is refused before, the first counts.
///
/// Laws (tests/unit/deck_panels_test.cpp):
///   (1) cover      panel areas add up to the deck's area less its openings
///   (2) adjacency  what lies beyond an edge has the same edge, run the other way, with the same carrier
///   (3) order      the panels do not depend on the order of carriers, but for their own order
/// Cost: O((n + k) log n) for n edges and carriers whose boxes meet k times.
[[nodiscard]] Panels divide_into_panels(const Ring& outline, std::span<const Ring> openings,
                                        std::span<const LineCarrier> carriers, Tolerance tolerance);
[[nodiscard]] inline Panels divide_into_panels(const FramedDeck& deck, std::span<const LineCarrier> carriers,
                                               Tolerance tolerance) {
    return divide_into_panels(deck.outline, deck.openings, carriers, tolerance);
}

RUNNEL_NAMESPACE_END
