#pragma once

#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Index of a case by its id; `none` if there is none.
[[nodiscard]] std::uint32_t case_index(const Plan& plan, std::string_view id);
/// The case that own weights go to; `none` if the plan has no dead case.
[[nodiscard]] std::uint32_t own_weight_case(const Plan& plan);

/// The area loads that may act on each deck, rising, by their `decks` lists and their outlines' boxes.
[[nodiscard]] Grouped<std::uint32_t> area_loads_by_deck(const FramedLevel& level, double noise);

/// Those of the loads acting on a deck that lie on it by more than rounding: a zone that is drawn along its
/// edge, on the outside, does not act. `pieces`: the deck's area in `axes`.
[[nodiscard]] std::vector<std::uint32_t> really_acting(const FramedLevel& level,
                                                       std::span<const std::uint32_t> acting,
                                                       const std::vector<StripPiece>& pieces,
                                                       const StripAxes& axes, double noise);

/// The area loads with outlines that reach over each deck, whether they are meant for it or not.
[[nodiscard]] Grouped<std::uint32_t> outlines_over_decks(const FramedLevel& level, double noise);

/// Where an area load with an outline acts, seen in `axes`, in convex pieces.
[[nodiscard]] std::vector<Convex> convex_zone(const AreaLoad& load, const StripAxes& axes, double noise);

/// The area of a deck, less its openings, in pieces in the given axes.
[[nodiscard]] std::vector<StripPiece> pieces_of_deck(const FramedDeck& deck, const StripAxes& axes,
                                                     double noise);

/// A ring seen in strip axes.
[[nodiscard]] Ring to_strip(const StripAxes& axes, const Ring& ring);

RUNNEL_NAMESPACE_END
