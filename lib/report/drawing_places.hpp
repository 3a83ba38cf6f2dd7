#pragma once

#include "geometry/box_tree.hpp"

#include <runnel/geometry.hpp>

#include <span>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Where labels that may stand anywhere in an area keep clear of lines and of other labels. Sizes are those
/// of the sheet; y runs downward.
class ClearPlaces {
public:
    explicit ClearPlaces(std::vector<std::pair<Point, Point>> lines);

    /// The place inside `outline` and outside `openings` at which a box, given by its corners as seen from
    /// the place, is clear of all lines: the usual place if it is, else the nearest clear one; where there is
    /// none, the clearest.
    [[nodiscard]] Point find(const Ring& outline, std::span<const Ring> openings, Point usual,
                             const Box& box) const;

private:
    [[nodiscard]] double clearance(const Box& box, std::vector<std::uint32_t>& near) const;

    std::vector<std::pair<Point, Point>> lines_;
    BoxFinder finder_;
};

RUNNEL_NAMESPACE_END
