#pragma once

#include "deck/region_rings.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The border of a carrier's cells of a one-way deck, in the deck's strip axes: what two of them share
/// cancels.
[[nodiscard]] DirectedEdges edges_of_strips(const Sharing& sharing, std::span<const std::uint32_t> cells,
                                            double noise);

/// The borders of cells that stand in any axes, as loops through numbered corners. Corners that agree within
/// `noise` have one number in all cells of the deck, so that regions that lie side by side share their points
/// to the last bit. Parabolas are loops of chords.
class CellLoops {
public:
    /// `cells`: those of one deck; `about`: what corners are measured from.
    CellLoops(const Sharing& sharing, std::span<const std::uint32_t> cells, Point about, double noise,
              double chord_error);

    /// The border of the cells given by their places from `first` to `last` in the list: what two of them
    /// share cancels, also where a corner of the one lies on an edge of the other.
    [[nodiscard]] DirectedEdges border_of(std::size_t first, std::size_t last) const;

private:
    [[nodiscard]] bool is_noise(const StripPiece& piece) const;
    void number_corners();
    [[nodiscard]] DirectedEdges numbered_anew(std::span<const DirectedEdges::Edge> edges) const;

    double noise_;
    std::vector<Point> points_;
    std::vector<std::size_t> begin_{0}; ///< of the loops: points begin_[i] up to begin_[i + 1]
    std::vector<std::uint32_t> corner_; ///< by point
    std::vector<Point> corners_;
};

RUNNEL_NAMESPACE_END
