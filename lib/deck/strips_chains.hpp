#pragma once

#include "deck/strips.hpp"

#include <cstdint>
#include <functional>
#include <span>

RUNNEL_NAMESPACE_BEGIN

/// Bays that follow each other along the strips from carrier to carrier, between two levels.
struct Chain {
    std::span<const std::uint32_t> bays; ///< rising along the strips: all that have a say in what `core` does
    std::size_t core = 0;                ///< the bays whose load this is: `core_size` from here on
    std::size_t core_size = 0;
    double from = 0, to = 0; ///< across
};

/// Calls `use` for the chains of a deck's bays, so that every bay that some mark bounds is in the core of
/// just one chain at every level of it.
///
/// A chain of many bays comes in parts, each with as many bays beside it as can be felt from there: else a
/// thousand joists that end one after the other would make a million bays. Cost: O(n log n), n bays.
void for_chains(std::span<const Bay> bays, std::span<const BayMarks> marks,
                const std::function<void(const Chain&)>& use);

RUNNEL_NAMESPACE_END
