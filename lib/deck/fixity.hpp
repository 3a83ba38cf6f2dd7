#pragma once

#include "deck/one_way.hpp"
#include "geometry/box_tree.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
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

/// Shares one two-way deck with `corner_angles: by_fixity`: in each of its panels the line that divides a
/// corner runs at 45 degrees between like sides, and at 60 degrees from a side over which the deck continues
/// (beyond more than half of its length) where the other is simply supported (DIN 1045:1988-07, 20.1.5). In
/// distances: those from a continuous side are divided by sqrt(3), and each point goes to the side for which
/// that is least. Free sides take nothing; openings are left out.
///
/// Appends axes, cells and transfers, and returns true; or, where a panel is not convex, has no carrier, or a
/// carrier ends or stands free inside it, appends nothing but the warning `fixity-set-aside` with its place
/// and returns false: the deck is then to be shared by the nearest line. Laws (tests/laws/fixity_test.cpp):
/// cover, owner, order, motion.
[[nodiscard]] bool share_by_fixity(const Plan& plan, const Framing& framing, std::uint32_t level,
                                   std::uint32_t deck, std::span<const LineCarrier> carriers,
                                   const DecksBeside& beside, LostLoads& lost, Sharing& sharing);

/// How far the line that divides a corner between a continuous and a simply supported side is from the
/// former, as a ratio: tan 60 degrees.
[[nodiscard]] double fixity_weight() noexcept;

RUNNEL_NAMESPACE_END
