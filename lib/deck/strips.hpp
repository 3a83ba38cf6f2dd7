#pragma once

#include "geometry/strip_sweep.hpp"

#include <runnel/deck.hpp>

#include <cstddef>
#include <cstdint>
#include <span>

RUNNEL_NAMESPACE_BEGIN

/// The sweep's marks that bound a bay: two stretches of one carrier are two marks.
struct BayMarks {
    std::uint32_t low = Gap::edge;
    std::uint32_t high = Gap::edge;

    [[nodiscard]] bool bare() const { return low == Gap::edge && high == Gap::edge; }
};

/// Makes the strips of one deck under `lever` or `continuous` from its bays, which are those from `first_bay`
/// on; `marks` bound them. Every point of a bay that some mark bounds lies in one strip.
///
/// Lever: a strip for each span; one for each part of an overhang that has one back span. Continuous: a strip
/// for each chain of bays that follow each other from carrier to carrier, and levels between which the chain
/// stays the same; of long chains, one for each part, on its carriers and those that are felt there. Where no
/// statics holds a strip (one carrier alone, a span shorter than `least_span_ratio` of what hangs on it or,
/// under `continuous`, of the one beside it) what can be is shared by lever, and the rest goes to its one
/// carrier, so that nothing is lost; find_weak_strips says so. Cost: O(n log n).
void make_strips(Share share, std::size_t first_bay, std::span<const BayMarks> marks, double noise,
                 Sharing& sharing);

RUNNEL_NAMESPACE_END
