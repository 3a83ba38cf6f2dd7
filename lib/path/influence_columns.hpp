#pragma once

#include "geometry/basic.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A part of a deck and the columns and walls that feel a load on it.
struct FeltArea {
    double area = 0;                     ///< m2
    std::vector<std::uint32_t> carriers; ///< as numbered in Sharing, rising
};

/// Divides a deck on columns into the parts that each are felt by the same columns and walls; they add up to
/// the cells' area. `cells`: indices of the deck's cells in `sharing`.
///
/// A panel is the polygon between columns around a point that is equally near to them, and to no other nearer
/// (Delaunay 1934): on a regular grid the bay between four. Two triangles that share the longest side of both
/// are one such bay. A load on a panel is felt at its corners. What lies outside of all panels, as a slab
/// that cantilevers beyond the outer columns, is felt by the nearest column and by those of its neighbours
/// along the floor's rim to whose side it lies. A wall counts by its ends and by the places that face columns
/// next to it.
///
/// Cost: O(n log n + k) for n columns and cells and k cells that meet a panel.
[[nodiscard]] std::vector<FeltArea> felt_areas(const Plan& plan, const FramedDeck& deck,
                                               const Sharing& sharing, std::span<const std::uint32_t> cells,
                                               Tolerance tolerance);

RUNNEL_NAMESPACE_END
