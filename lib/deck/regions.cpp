#include <runnel/deck.hpp>

#include "deck/region_edges.hpp"
#include "deck/region_rings.hpp"
#include "geometry/basic.hpp"
#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"

#include <algorithm>
#include <array>
#include <cmath>

// Cells are joined to regions by cancelling the edges that two of them share, never by a boolean union.

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Rounding in strip coordinates, from the size of what is there.
double noise_in(const Sharing& sharing) {
    double largest = 0;
    for (const StripAxes& axes : sharing.axes) {
        largest = std::max({largest, std::abs(axes.origin.x), std::abs(axes.origin.y)});
    }
    for (const Cell& cell : sharing.cells) {
        largest = std::max({largest, std::abs(cell.low.start), std::abs(cell.high.start), std::abs(cell.to)});
    }
    return 2 * noise_of(largest);
}

/// Where a deck's cells are those of strips, in one pair of axes and with straight borders.
std::vector<bool> decks_in_strips(const Sharing& sharing) {
    std::vector<bool> in_strips;
    for (const Bay& bay : sharing.bays) {
        if (bay.deck >= in_strips.size()) {
            in_strips.resize(bay.deck + std::size_t{1}, false);
        }
        in_strips[bay.deck] = true;
    }
    return in_strips;
}

using CellList = std::span<const std::uint32_t>;

std::uint32_t owner_of(const Sharing& sharing, std::uint32_t cell) {
    return sharing.transfers[cell].front().carrier;
}

/// Sums areas and first moments of cells to a region's area and centroid.
class Measure {
public:
    void add(double area, Point moment) {
        area_.add(area);
        x_.add(moment.x);
        y_.add(moment.y);
    }
    [[nodiscard]] double area() const { return area_.value(); }
    [[nodiscard]] Point centroid() const {
        return area() != 0 ? Point{x_.value() / area(), y_.value() / area()} : Point{};
    }

private:
    Sum area_, x_, y_;
};

Region region_of_strips(const Sharing& sharing, CellList cells, double noise) {
    Region region;
    region.deck = sharing.cells[cells.front()].deck;
    region.carrier = owner_of(sharing, cells.front());
    const StripAxes& axes = sharing.axes[sharing.cells[cells.front()].axes];
    Measure measure;
    for (const std::uint32_t c : cells) {
        const Cell& cell = sharing.cells[c];
        const std::array<Point, 4> corners{Point{cell.low.start, cell.from},
                                           Point{cell.high.start, cell.from}, Point{cell.high.end, cell.to},
                                           Point{cell.low.end, cell.to}};
        const AreaMoments moments = moments_of(corners, {0, 0});
        measure.add(moments.area, moments.moment);
    }
    region.area = measure.area();
    region.centroid = axes.to_plan(measure.centroid());
    region.rings = trace_rings(edges_of_strips(sharing, cells, noise), noise);
    for (Ring& ring : region.rings) {
        for (Point& p : ring) {
            p = axes.to_plan(p);
        }
    }
    return region;
}

/// The regions of one deck whose cells stand in any axes; `cells`: its cells, sorted by carrier.
class PieceRegions {
public:
    PieceRegions(const Sharing& sharing, CellList cells, double noise, double chord_error)
        : sharing_(sharing), cells_(cells), noise_(noise),
          about_(sharing.axes[sharing.cells[cells.front()].axes].origin),
          loops_(sharing, cells, about_, noise, chord_error) {}

    /// Of the cells from `first` to `last` in the list, which have one carrier.
    [[nodiscard]] Region region_of(std::size_t first, std::size_t last) const {
        Region region;
        region.deck = sharing_.cells[cells_[first]].deck;
        region.carrier = owner_of(sharing_, cells_[first]);
        Measure measure;
        for (std::size_t i = first; i < last; ++i) {
            const Cell& cell = sharing_.cells[cells_[i]];
            StripAxes axes = sharing_.axes[cell.axes];
            const AreaMoments moments = moments_of(StripPiece{cell.from, cell.to, cell.low, cell.high});
            const Point from_about = axes.origin - about_;
            axes.origin = {};
            measure.add(moments.area, axes.to_plan(moments.moment) + moments.area * from_about);
        }
        region.area = measure.area();
        region.centroid = about_ + measure.centroid();
        region.rings = trace_rings(loops_.border_of(first, last), noise_);
        for (Ring& ring : region.rings) {
            for (Point& p : ring) {
                p = about_ + p;
            }
        }
        return region;
    }

private:
    const Sharing& sharing_;
    CellList cells_;
    double noise_;
    Point about_;
    CellLoops loops_;
};

/// Calls f(first, last) for every run of equal keys in a sorted list.
template <class Key, class F>
void for_each_run(CellList list, Key key, F f) {
    for (std::size_t first = 0; first < list.size();) {
        std::size_t last = first + 1;
        while (last < list.size() && key(list[last]) == key(list[first])) {
            ++last;
        }
        f(first, last);
        first = last;
    }
}

} // namespace

std::vector<Region> regions_of(const Sharing& sharing, double chord_error) {
    std::vector<std::uint32_t> order;
    order.reserve(sharing.cells.size());
    for (std::uint32_t c = 0; c < sharing.cells.size(); ++c) {
        if (!sharing.transfers[c].empty()) {
            order.push_back(c);
        }
    }
    const auto deck_of = [&](std::uint32_t c) { return sharing.cells[c].deck; };
    const auto owner = [&](std::uint32_t c) { return owner_of(sharing, c); };
    std::stable_sort(order.begin(), order.end(), [&](std::uint32_t l, std::uint32_t r) {
        return std::pair(deck_of(l), owner(l)) < std::pair(deck_of(r), owner(r));
    });
    const double noise = noise_in(sharing);
    const std::vector<bool> in_strips = decks_in_strips(sharing);
    std::vector<Region> regions;
    const auto keep = [&regions](Region region) {
        if (!region.rings.empty()) {
            regions.push_back(std::move(region));
        }
    };
    for_each_run(order, deck_of, [&](std::size_t first, std::size_t last) {
        const CellList cells = CellList(order).subspan(first, last - first);
        const std::uint32_t deck = deck_of(cells.front());
        if (deck < in_strips.size() && in_strips[deck]) {
            for_each_run(cells, owner, [&](std::size_t from, std::size_t to) {
                keep(region_of_strips(sharing, cells.subspan(from, to - from), noise));
            });
        } else {
            const PieceRegions pieces(sharing, cells, noise, chord_error);
            for_each_run(cells, owner,
                         [&](std::size_t from, std::size_t to) { keep(pieces.region_of(from, to)); });
        }
    });
    return regions;
}

RUNNEL_NAMESPACE_END
