#pragma once

#include "deck/deck_beyond.hpp"
#include "deck/one_way.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>

RUNNEL_NAMESPACE_BEGIN

/// Shares one two-way deck with `corner_angles: by_fixity`: in each of its panels the line that divides a
/// corner runs at 45 degrees between like sides, and at 60 degrees from a side over which the deck continues
/// (beyond more than half of its length) where the other is simply supported (DIN 1045:1988-07, 20.1.5). In
/// distances: those from a continuous side are divided by sqrt(3), and each point goes to the side for which
/// that is least. Free sides take nothing; openings are left out.
///
/// Where the sides of a panel that carry are all alike, the rule is the nearest line, and what it gives is
/// what `corner_angles: equal` gives. Panels that are not convex, in which a carrier ends or stands free, or
/// of which a side is carried over a part of its length only, go to the nearest line too; where their sides
/// differ the warning `fixity-set-aside` tells area, place and reasons. The nearest line is sought among all
/// carriers of the deck, whether or not they touch the panel. What goes to a carrier straight across an
/// opening or past the deck's edge is the warning `way-leaves-deck`, once a deck.
///
/// `near`: members and walls whose boxes meet the deck's. Appends axes, cells, transfers and problems, and
/// returns true; if none of them shares more than a point with the deck, appends nothing and returns false.
/// Laws (tests/laws/fixity_test.cpp): cover, owner, order, motion; all alike, as by the nearest line.
[[nodiscard]] bool share_by_fixity(const Plan& plan, const Framing& framing, std::uint32_t level,
                                   std::uint32_t deck, std::span<const LineCarrier> near,
                                   const DecksBeside& beside, Sharing& sharing);

/// How far the line that divides a corner between a continuous and a simply supported side is from the
/// former, as a ratio: tan 60 degrees.
[[nodiscard]] double fixity_weight() noexcept;

RUNNEL_NAMESPACE_END
