#pragma once

#include "deck/panels.hpp"
#include "geometry/basic.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A stretch of a carrier that feels a part of a deck.
struct FeltAlong {
    std::uint32_t carrier = none; ///< as numbered in Sharing
    double station_from = 0, station_to = 0;
};

/// A panel of a two-way deck, or a part of one, and the stretches of carriers that feel a load on it.
struct PanelPart {
    double area = 0; ///< m2
    std::vector<FeltAlong> along;
    std::uint32_t within = none; ///< index of the panel that it is part of, whose carriers feel it too
};

/// The panels of a two-way deck, and parts of them that more carriers feel; those that are in nothing else
/// add up to the cells' area. `carriers`: those that may carry it; `cells`: indices of the deck's cells in
/// `sharing`.
///
/// A panel between carriers is felt whole by all that lie along its border. The nearest carrier may also lie
/// elsewhere, across an opening or a notch: it feels what of the panel it takes, and no more, since nothing
/// else of the panel goes there. So no carrier feels less than its own cells.
///
/// Cost: O((n + k) log n) for n edges, carriers and cells and k meetings of their boxes.
[[nodiscard]] std::vector<PanelPart> panel_parts(const FramedDeck& deck,
                                                 std::span<const LineCarrier> carriers,
                                                 const Sharing& sharing, std::span<const std::uint32_t> cells,
                                                 Tolerance tolerance);

RUNNEL_NAMESPACE_END
