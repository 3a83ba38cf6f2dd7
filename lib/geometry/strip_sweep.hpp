#pragma once

#include <runnel/geometry.hpp>

#include <cstdint>
#include <span>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A line across the strips that the sweep should stop at. Coordinates (x = along the strips, y = across).
struct Mark {
    Point a, b;
};

/// A piece of the swept area between two neighbours along the strips: boundary edges or marks. The four
/// `along` values belong to the two neighbours at `from` and at `to`.
struct Gap {
    static constexpr std::uint32_t edge = 0xffffffff;

    double from = 0, to = 0; ///< across
    double low_start = 0, low_end = 0;
    double high_start = 0, high_end = 0;
    std::uint32_t low = edge; ///< index of the mark, or `edge`
    std::uint32_t high = edge;
};

struct StripSweep {
    std::vector<Gap> gaps;
    /// By mark: its `across` at a and at b after levels that differ by noise alone were made one. Equal: the
    /// mark runs along the strips and took no part.
    std::vector<std::pair<double, double>> mark_across;
};

/// Cuts the area inside `outline` and outside `openings` into gaps by one sweep across the strips.
///
/// Coordinates should have a local origin; `noise` is what rounding did to them, in m. Rings may run either
/// way round; openings may touch or overlap each other and the outline. Marks may reach outside, cross each
/// other and the edges. Laws (tests/laws/one_way_test.cpp, tests/unit/geometry_convex_test.cpp):
///   (1) cover    gap areas add up to the area, signed, whatever rounding does
///   (2) order    the result does not depend on the order of marks, openings and ring starts
/// Cost: O((n + k) log n) for n edges and marks with k crossings.
[[nodiscard]] StripSweep sweep_strips(std::span<const Point> outline, std::span<const Ring> openings,
                                      std::span<const Mark> marks, double noise);

RUNNEL_NAMESPACE_END
