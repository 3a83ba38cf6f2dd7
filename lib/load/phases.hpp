#pragma once

#include "deck/level_zones.hpp"
#include "load/collector.hpp"

#include <runnel/load.hpp>

RUNNEL_NAMESPACE_BEGIN

/// Area loads and the decks' own weight, on cells and in the account of what was put on.
void load_areas(const Plan& plan, const Framing& framing, std::uint32_t level, const Sharing& sharing,
                LevelZones& zones, Collector& collector);
/// Area loads that reach off the decks: a note each with how much. Planes of pressure that fall below zero
/// where they act: a warning with the lowest place.
void note_zones_off_decks(const Plan& plan, const Framing& framing, std::uint32_t level, LevelZones& zones,
                          Collector& collector);

/// Line and point loads: straight on the carrier that `on` names, along a carrier's axis, or standing on
/// decks.
void load_lines_and_points(const Plan& plan, const Framing& framing, std::uint32_t level,
                           const Sharing& sharing, Collector& collector);

/// The members' own weight.
void load_own_weight(const Plan& plan, const Framing& framing, std::uint32_t level, Collector& collector);

RUNNEL_NAMESPACE_END
