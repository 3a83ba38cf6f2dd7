#pragma once

#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The outlines of a level's area loads in convex pieces: cut once for all decks, when first asked for, then
/// looked up near each deck.
///
/// Pieces are trapezoids along the axes asked for, so that strips are cut as seldom as can be; each direction
/// of axes has its own. Of many directions only the first few have: in all others pieces are turned, which
/// keeps the cost within a multiple of the corners'. For one thread.
class LevelZones {
public:
    LevelZones(const FramedLevel& level, double noise);

    /// Appends the convex pieces of an area load's outline that may meet `box` (plan), in `axes`; always in
    /// the same order. A convex outline is one piece, as drawn but counter-clockwise.
    void find(std::uint32_t area_load, const Box& box, const StripAxes& axes, std::vector<Convex>& pieces);

private:
    struct Zone {
        bool is_cut = false;
        bool as_drawn = false; ///< pieces in the plan's coordinates, not in those of the direction
        Point origin;
        std::vector<Convex> pieces;
        BoxFinder finder; ///< of `pieces`
    };
    struct Direction {
        double cosine = 1, sine = 0;
        std::vector<Zone> zones; ///< by area load

        [[nodiscard]] StripAxes axes_at(Point origin) const { return {origin, cosine, sine}; }
    };

    [[nodiscard]] Direction& direction_of(const StripAxes& axes);
    void cut(std::uint32_t area_load, Direction& direction) const;

    const FramedLevel& level_;
    double noise_;
    std::vector<Direction> directions_; ///< the plan's own first
};

/// Around all of a deck, as far as snapping may have moved anything.
[[nodiscard]] Box reach_of(const FramedDeck& deck, double snap);

RUNNEL_NAMESPACE_END
