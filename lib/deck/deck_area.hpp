#pragma once

#include "geometry/convex.hpp"

#include <runnel/framing.hpp>

RUNNEL_NAMESPACE_BEGIN

/// Area of a deck less its openings, m2, and its first moments about the axes' origin, in these axes.
/// Openings may overlap each other or the deck's edge by up to `snap`: what two of them take away counts
/// once.
[[nodiscard]] AreaMoments moments_of_deck(const FramedDeck& deck, const StripAxes& axes, double noise);

[[nodiscard]] double area_of_deck(const FramedDeck& deck, double noise);

RUNNEL_NAMESPACE_END
