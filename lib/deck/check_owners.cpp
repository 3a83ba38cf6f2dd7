#include "deck/probes.hpp"
#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/strip_piece.hpp"
#include "plan/problems.hpp"

#include <runnel/deck.hpp>

#include <algorithm>
#include <cmath>
#include <memory>
#include <random>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

std::vector<ProbedCarrier> carriers_of(const Plan& plan, const FramedLevel& level, const Sharing& sharing) {
    std::vector<ProbedCarrier> carriers;
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        if (level.members[m].carries_deck) {
            carriers.push_back({m, level.members[m].from, level.members[m].to, false});
        }
    }
    for (const std::uint32_t w : level.walls) {
        carriers.push_back(
            {sharing.number_of({CarrierKind::wall, w}), plan.walls[w].from, plan.walls[w].to, false});
    }
    for (const std::uint32_t c : level.columns) {
        const Point at = plan.columns[c].at;
        carriers.push_back({sharing.number_of({CarrierKind::column, c}), at, at, true});
    }
    return carriers;
}

/// The carriers that a deck's rule looks at.
std::vector<ProbedCarrier> carriers_for(const FramedDeck& deck, const Sharing& sharing,
                                        std::span<const ProbedCarrier> all,
                                        std::span<const std::uint32_t> near) {
    std::vector<ProbedCarrier> carriers;
    for (const std::uint32_t i : near) {
        const bool is_member = all[i].number < sharing.members;
        const bool fits = deck.span == SpanKind::columns ? !is_member : !all[i].column;
        if (fits) {
            carriers.push_back(all[i]);
        }
    }
    return carriers;
}

/// How far a point lies within a cell, in m; negative outside.
double depth_in(const Cell& cell, Point p) {
    const double across = std::min(p.y - cell.from, cell.to - p.y);
    if (across < 0) {
        return across;
    }
    const double x = (p.y - cell.from) / (cell.to - cell.from);
    return std::min({across, p.x - cell.low.at(x), cell.high.at(x) - p.x});
}

/// A point somewhere in a cell.
Point point_in(const Cell& cell, const StripAxes& axes, double x, double t) {
    const double across = (1 - x) * cell.from + x * cell.to;
    return axes.to_plan({(1 - t) * cell.low.at(x) + t * cell.high.at(x), across});
}

/// The cells of one deck, which stand together.
struct DeckCells {
    std::size_t first = 0, last = 0;
};

std::vector<DeckCells> cells_by_deck(const Sharing& sharing, std::size_t decks) {
    std::vector<DeckCells> cells(decks);
    for (std::size_t c = 0; c < sharing.cells.size();) {
        std::size_t last = c + 1;
        while (last < sharing.cells.size() && sharing.cells[last].deck == sharing.cells[c].deck) {
            ++last;
        }
        cells[sharing.cells[c].deck] = {c, last};
        c = last;
    }
    return cells;
}

class OwnerChecker {
public:
    OwnerChecker(const Plan& plan, const FramedLevel& level, const Sharing& sharing, const OwnerProbe& probe,
                 std::uint32_t deck, DeckCells cells, double noise)
        : plan_(plan), level_(level), sharing_(sharing), probe_(probe), deck_(deck), cells_(cells),
          noise_(noise) {}

    void ask(Point p, std::vector<Problem>& problems) const {
        const OwnerProbe::Answer answer = probe_.ask(p);
        if (!answer.clear) {
            return;
        }
        std::uint32_t holders = 0;
        std::uint32_t owner = none;
        for (std::size_t c = cells_.first; c < cells_.last; ++c) {
            const Cell& cell = sharing_.cells[c];
            const double depth = depth_in(cell, sharing_.axes[cell.axes].to_strip(p));
            if (std::abs(depth) <= noise_) {
                return; // on a border but for rounding
            }
            if (depth > 0) {
                ++holders;
                owner = sharing_.transfers[c].empty() ? none : sharing_.transfers[c].front().carrier;
            }
        }
        if (holders != (answer.inside ? 1U : 0U) || (answer.inside && !probe_.accepts(p, answer, owner))) {
            problems.push_back(broken(p, holders));
        }
    }

private:
    [[nodiscard]] Problem broken(Point p, std::uint32_t holders) const {
        const FramedDeck& deck = level_.decks[deck_];
        Problem problem = problem_at(ProblemCode::owner_broken, deck.origin, "decks",
                                     "Level " + level_.id + ", deck " + deck.id + ": the point " +
                                         point_text(p, plan_.units) + " lies in " + std::to_string(holders) +
                                         (holders == 1 ? " cell" : " cells") +
                                         ", or has another carrier than its deck's rule gives it.",
                                     "This is a fault of the program; do not use the result.", {deck.id});
        problem.point = p;
        return problem;
    }

    const Plan& plan_;
    const FramedLevel& level_;
    const Sharing& sharing_;
    const OwnerProbe& probe_;
    std::uint32_t deck_;
    DeckCells cells_;
    double noise_;
};

/// Half of the samples anywhere around the deck, half in cells: small cells are asked as often as large ones.
void sample(const FramedDeck& deck, const Sharing& sharing, DeckCells cells, std::uint32_t samples,
            std::mt19937_64& random, const OwnerChecker& checker, std::vector<Problem>& problems) {
    const Box extent = box_of(deck.outline);
    std::uniform_real_distribution<double> fraction(0, 1);
    std::uniform_int_distribution<std::size_t> index(cells.first, cells.last - 1);
    for (std::uint32_t i = 0; i < samples; ++i) {
        const double x = fraction(random);
        const double t = fraction(random);
        if (i % 2 == 0) {
            const Cell& cell = sharing.cells[index(random)];
            checker.ask(point_in(cell, sharing.axes[cell.axes], x, t), problems);
        } else {
            checker.ask(
                {(1 - x) * extent.low.x + x * extent.high.x, (1 - t) * extent.low.y + t * extent.high.y},
                problems);
        }
    }
}

std::unique_ptr<OwnerProbe> probe_of(const FramedDeck& deck, const StripAxes& axes,
                                     std::span<const ProbedCarrier> carriers, Tolerance tolerance) {
    if (deck.span == SpanKind::one_way) {
        return probe_strips(deck, axes, carriers, tolerance);
    }
    const bool by_fixity = deck.span == SpanKind::two_way && deck.corner_angles == CornerAngles::by_fixity;
    return by_fixity ? probe_fixity(deck, carriers, tolerance) : probe_nearest(deck, carriers, tolerance);
}

} // namespace

std::vector<Problem> check_owners(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                                  const Sharing& sharing, std::uint32_t samples, std::uint64_t seed) {
    const FramedLevel& level = framing.levels[level_index];
    const Tolerance tolerance{noise_of(framing.largest_coordinate), plan.settings.snap};
    const std::vector<ProbedCarrier> all = carriers_of(plan, level, sharing);
    std::vector<Box> boxes;
    boxes.reserve(all.size());
    for (const ProbedCarrier& carrier : all) {
        boxes.push_back(box_of(carrier.from, carrier.to));
    }
    const BoxTree tree(boxes);
    const std::vector<DeckCells> cells = cells_by_deck(sharing, level.decks.size());
    std::mt19937_64 random(seed);
    std::vector<Problem> problems;
    std::vector<std::uint32_t> near;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        if (cells[d].first == cells[d].last) {
            continue;
        }
        tree.find(box_of(deck.outline).grown(2 * tolerance.snap), near);
        const std::vector<ProbedCarrier> carriers = carriers_for(deck, sharing, all, near);
        const std::unique_ptr<OwnerProbe> probe =
            probe_of(deck, sharing.axes[sharing.cells[cells[d].first].axes], carriers, tolerance);
        sample(deck, sharing, cells[d], samples, random,
               OwnerChecker(plan, level, sharing, *probe, d, cells[d], 8 * tolerance.noise), problems);
    }
    return problems;
}

RUNNEL_NAMESPACE_END
