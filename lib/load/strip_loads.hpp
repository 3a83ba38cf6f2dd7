#pragma once

#include "deck/pressure.hpp"
#include "load/collector.hpp"

#include <cstddef>
#include <cstdint>

RUNNEL_NAMESPACE_BEGIN

/// Area loads of a one-way deck under `lever` or `continuous`, by statics of its strips; what the drawing is
/// off by (cells that go to points of their carriers) as the cells say. `first_cell` and `last_cell` bound
/// the deck's cells, `pressure` acts on it.
///
/// Laws (tests/laws/strips_test.cpp): force and moment of what presses on the strips are kept; where carriers
/// are parallel or the load's borders keep their places between them, the lines are exact polynomials, else
/// within the collector's `curve_error`.
void load_strips(const Sharing& sharing, std::uint32_t deck, std::size_t first_cell, std::size_t last_cell,
                 const DeckPressure& pressure, Collector& collector);

/// A stretch of line load from a to b (plan) that stands on one strip. `w_a`, `w_b`: kN per m of it. Across
/// the strips it becomes lines on the carriers; along them (no more than `snap` across), points.
void share_line_on_strip(const Sharing& sharing, std::uint32_t strip, Point a, Point b, double w_a,
                         double w_b, double snap, std::uint32_t load_case, Source source,
                         Collector& collector);

void share_point_on_strip(const Sharing& sharing, std::uint32_t strip, Point at, double p,
                          std::uint32_t load_case, Source source, Collector& collector);

RUNNEL_NAMESPACE_END
