#pragma once

#include "geometry/box_tree.hpp"
#include "load/collector.hpp"

#include <cstdint>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Finds the cells under points and lines of the plan on decks whose load goes to the nearest carrier.
class CellFinder {
public:
    CellFinder(const FramedLevel& level, const Sharing& sharing);

    /// A stretch of a line from a to b, by fractions of it, that lies over one cell.
    struct Hit {
        double from = 0, to = 0;
        std::uint32_t cell = none;
    };
    /// Where the line runs over cells, within `margin` beside them; by rising `from`, then by cell. A cell
    /// with a curved border may be run over twice.
    [[nodiscard]] std::vector<Hit> over(Point a, Point b, double margin);
    /// The first cell that holds the point within `margin`.
    [[nodiscard]] std::uint32_t under(Point p, double margin);

private:
    struct DeckCells {
        std::uint32_t first = 0, last = 0;
        std::optional<BoxTree> tree; ///< of the cells, in the plan; built when first asked
    };
    /// The cells whose boxes meet `box`, in `near_`.
    void find(const Box& box);

    const Sharing* sharing_;
    std::vector<DeckCells> decks_;
    BoxTree outlines_;
    std::vector<std::uint32_t> near_;
};

/// Gives a stretch of a line load over one cell to the carrier of the cell: as a line load where it runs
/// along the carrier, as a point load where it is square to it, or the cell's load goes to one point. Its
/// force is kept, and its place along the carrier. `w_a` and `w_b` are the intensities at the stretch's ends
/// a and b, per length of it.
void put_line_on_cell(const Sharing& sharing, std::uint32_t cell, Point a, Point b, double w_a, double w_b,
                      double snap, std::uint32_t load_case, Source source, Collector& collector);

void put_point_on_cell(const Sharing& sharing, std::uint32_t cell, Point at, double p,
                       std::uint32_t load_case, Source source, Collector& collector);

RUNNEL_NAMESPACE_END
