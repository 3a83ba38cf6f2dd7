#pragma once

#include "geometry/basic.hpp"
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
/// stays the same; of long chains, one for each part, on its carriers and those that are felt there. In a
/// wedge, where a span dies out beside a longer one, that span is cut off and shared by lever, and the chain
/// ends on either side of it (strips_cut.hpp). What no statics holds (one carrier alone, a back span shorter
/// than `least_span_ratio` of its overhang) goes to its one carrier, so that nothing is lost.
/// find_weak_strips tells of all these. Cost: O(n log n).
void make_strips(Share share, std::size_t first_bay, std::span<const BayMarks> marks, Tolerance tolerance,
                 Sharing& sharing);

RUNNEL_NAMESPACE_END
