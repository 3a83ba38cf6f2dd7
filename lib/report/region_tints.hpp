#pragma once

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

inline constexpr std::size_t tint_count = 7;

/// A tint for each region, so that regions of two carriers that touch differ wherever seven tints suffice.
/// Regions of one carrier in several decks get the tint of the first where its neighbours allow.
[[nodiscard]] std::vector<std::uint8_t> choose_tints(std::span<const Region> regions);

RUNNEL_NAMESPACE_END
