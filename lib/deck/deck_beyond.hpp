#pragma once

#include "deck/panels.hpp"
#include "geometry/box_tree.hpp"

#include <runnel/deck.hpp>

#include <cstddef>
#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The outlines of a level's decks, to find where one deck goes on beside another. Built once a level.
class DecksBeside {
public:
    DecksBeside(const FramedLevel& level, double snap);

    /// Length of the part of a stretch from a to b (plan), with deck `deck` on its left, along whose right
    /// side the outline of another deck runs within `snap`.
    [[nodiscard]] double length_along(std::uint32_t deck, Point a, Point b) const;

private:
    struct Edge {
        std::uint32_t deck = none;
        Point a, b;
    };
    std::vector<Edge> edges_;
    BoxFinder finder_;
    double snap_;
};

/// Where a deck goes on beside its own carriers, by stations.
class DeckBesideCarriers {
public:
    /// `panels`: of the deck less its openings, cut by so many carriers.
    DeckBesideCarriers(const Panels& panels, std::size_t carriers);

    /// Length in m of the part of a panel's edge, which has a carrier, with deck on its other side.
    [[nodiscard]] double beyond(const PanelEdge& edge) const;

private:
    struct Stretch {
        double from, to;
    };

    void add(const std::vector<PanelEdge>& border);

    std::vector<std::vector<Stretch>> left_, right_; ///< by carrier
};

RUNNEL_NAMESPACE_END
