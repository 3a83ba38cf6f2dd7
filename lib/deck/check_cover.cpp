#include "deck/deck_area.hpp"
#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"
#include "plan/problems.hpp"

#include <runnel/deck.hpp>

#include <algorithm>
#include <cmath>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr const char* fault =
    "This is a fault of the program or of overlapping openings; do not use the result.";

StripPiece piece_of(const Cell& cell) {
    return {cell.from, cell.to, cell.low, cell.high};
}

/// A convex polygon of the plan that lies in a cell.
struct Tile {
    std::size_t cell = 0;
    Convex where;
};

/// A straight-edged cell is its own tile. Parabolas are taken from inside, in steps: what the chords miss is
/// less than a thousandth of the bulge.
void tile(const Cell& cell, const StripAxes& axes, std::size_t index, double noise,
          std::vector<Tile>& tiles) {
    constexpr int curved_steps = 16;
    const int steps = cell.low.bulge == 0 && cell.high.bulge == 0 ? 1 : curved_steps;
    const double square = static_cast<double>(steps) * steps;
    const double raise = std::max(0.0, -cell.low.bulge) / (4 * square);
    const double lower = std::max(0.0, cell.high.bulge) / (4 * square);
    for (int i = 0; i < steps; ++i) {
        const double x0 = static_cast<double>(i) / steps;
        const double x1 = static_cast<double>(i + 1) / steps;
        const double v0 = (1 - x0) * cell.from + x0 * cell.to;
        const double v1 = (1 - x1) * cell.from + x1 * cell.to;
        const std::array<Point, 4> corners{
            Point{cell.low.at(x0) + raise, v0}, Point{cell.high.at(x0) - lower, v0},
            Point{cell.high.at(x1) - lower, v1}, Point{cell.low.at(x1) + raise, v1}};
        if (corners[1].x < corners[0].x || corners[2].x < corners[3].x) {
            continue; // thinner than the chords' error
        }
        Convex where;
        for (const Point& p : corners) {
            const Point q = axes.to_plan(p);
            if (where.empty() || distance(q, where.back()) > noise) {
                where.push_back(q);
            }
        }
        while (where.size() > 1 && distance(where.front(), where.back()) <= noise) {
            where.pop_back();
        }
        if (where.size() >= 3) {
            tiles.push_back({index, std::move(where)});
        }
    }
}

/// Area that the tiles of different cells share, and where the largest part of it lies.
struct SharedArea {
    double area = 0;
    double largest = 0;
    Point place;
};

SharedArea shared_by(const std::vector<Tile>& tiles, double noise) {
    std::vector<Box> boxes;
    boxes.reserve(tiles.size());
    for (const Tile& t : tiles) {
        boxes.push_back(box_of(t.where));
    }
    const BoxTree tree(boxes);
    std::vector<std::uint32_t> near;
    SharedArea shared;
    for (std::size_t i = 0; i < tiles.size(); ++i) {
        tree.find(boxes[i], near);
        for (const std::uint32_t k : near) {
            if (k <= i || tiles[k].cell == tiles[i].cell) {
                continue;
            }
            const Convex both = clipped(tiles[i].where, tiles[k].where, noise);
            const double area = both.empty() ? 0 : moments_of(both, both.front()).area;
            shared.area += area;
            if (area > shared.largest) {
                shared.largest = area;
                shared.place = both.front();
            }
        }
    }
    return shared;
}

} // namespace

std::vector<Problem> check_cover(const Framing& framing, std::uint32_t level_index, const Sharing& sharing,
                                 double relative) {
    const FramedLevel& level = framing.levels[level_index];
    std::vector<Sum> covered(level.decks.size());
    for (const Cell& cell : sharing.cells) {
        covered[cell.deck].add(area_of(piece_of(cell)));
    }
    std::vector<Problem> problems;
    for (std::size_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        const double area = area_of_deck(deck, noise_of(framing.largest_coordinate));
        const double found = covered[d].value();
        if (!(std::abs(found - area) <= relative * area)) {
            problems.push_back(problem_at(ProblemCode::cover_broken, deck.origin, "decks",
                                          "Level " + level.id + ", deck " + deck.id + ": regions of " +
                                              exact_text(found) + " m2 do not add up to its " +
                                              exact_text(area) + " m2.",
                                          fault, {deck.id}));
            problems.back().point = deck.outline.front();
        }
    }
    return problems;
}

std::vector<Problem> check_disjoint(const Framing& framing, std::uint32_t level_index, const Sharing& sharing,
                                    double relative) {
    const FramedLevel& level = framing.levels[level_index];
    const double noise = noise_of(framing.largest_coordinate);
    std::vector<Problem> problems;
    std::vector<Tile> tiles;
    for (std::size_t c = 0; c < sharing.cells.size();) {
        const std::uint32_t d = sharing.cells[c].deck;
        tiles.clear();
        for (; c < sharing.cells.size() && sharing.cells[c].deck == d; ++c) {
            tile(sharing.cells[c], sharing.axes[sharing.cells[c].axes], c, noise, tiles);
        }
        const FramedDeck& deck = level.decks[d];
        const SharedArea shared = shared_by(tiles, noise);
        if (shared.area > relative * area_of_deck(deck, noise)) {
            problems.push_back(problem_at(ProblemCode::cells_overlap, deck.origin, "decks",
                                          "Level " + level.id + ", deck " + deck.id +
                                              ": regions overlap by " + exact_text(shared.area) + " m2.",
                                          fault, {deck.id}));
            problems.back().point = shared.place;
        }
    }
    return problems;
}

RUNNEL_NAMESPACE_END
