#pragma once

#include <runnel/deck.hpp>

#include <span>

RUNNEL_NAMESPACE_BEGIN

class LostLoads;

/// A member or wall that may carry a deck, with its number in Sharing.
struct LineCarrier {
    std::uint32_t number = none;
    Point from, to;
};

/// Shares one one-way deck: appends its axes, bays, cells and transfers to `sharing`; under `lever` and
/// `continuous` its strips as well.
void share_one_way(const FramedDeck& deck, std::uint32_t index, std::span<const LineCarrier> carriers,
                   const Framing& framing, double snap, Sharing& sharing);

/// Problems of the bays of one deck, which are those from `first_bay` on: strips that no carrier crosses,
/// strips on one carrier, overhangs longer than half their back span.
void find_weak_strips(const Plan& plan, const Framing& framing, std::uint32_t level, std::uint32_t deck,
                      std::size_t first_bay, LostLoads& lost, Sharing& sharing);

RUNNEL_NAMESPACE_END
