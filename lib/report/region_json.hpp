#pragma once

#include "report/json_writer.hpp"
#include "report/names.hpp"
#include "report/scale.hpp"

#include <runnel/deck.hpp>

RUNNEL_NAMESPACE_BEGIN

/// A region as an object: deck, carrier, kind, area, centroid, rings.
void write_region(JsonWriter& json, const Region& region, const Sharing& sharing, std::uint32_t level,
                  const Framing& framing, const Names& names, const Scale& scale);

RUNNEL_NAMESPACE_END
