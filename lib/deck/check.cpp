#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "plan/problems.hpp"

#include <runnel/deck.hpp>

#include <algorithm>
#include <cmath>
#include <limits>
#include <random>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// What a straight line along the strip meets on one side of a point: the nearest edge and the nearest
/// carrier.
struct Beside {
    double edge = std::numeric_limits<double>::infinity();
    double carrier = std::numeric_limits<double>::infinity();
    double second = std::numeric_limits<double>::infinity(); ///< the next carrier, to see near ties
    std::uint32_t number = none;
};

/// Brute force along the strip through a point, from the framed deck and the carriers alone.
class StripProbe {
public:
    StripProbe(const Plan& plan, const FramedLevel& level, const FramedDeck& deck, const Sharing& sharing,
               const StripAxes& axes, double noise)
        : axes_(axes), noise_(noise) {
        add_edges(deck.outline);
        for (const Ring& opening : deck.openings) {
            add_edges(opening);
        }
        for (std::uint32_t m = 0; m < level.members.size(); ++m) {
            const FramedMember& member = level.members[m];
            if (member.carries_deck) {
                add_carrier(m, member.from, member.to, plan.settings.snap);
            }
        }
        for (const std::uint32_t w : level.walls) {
            add_carrier(sharing.number_of({CarrierKind::wall, w}), plan.walls[w].from, plan.walls[w].to,
                        plan.settings.snap);
        }
    }

    struct Answer {
        bool clear = false; ///< no near tie, no corner on the strip
        bool inside = false;
        std::uint32_t carrier = none;
    };

    /// The answer at p, clear only if all points within `reach` of it have the same: carriers and edges may
    /// have been fitted to each other by that much.
    [[nodiscard]] Answer ask_around(Point p, double margin, double reach) const {
        Answer answer = ask(p, margin);
        for (const Point d : {Point{reach, 0}, Point{-reach, 0}, Point{0, reach}, Point{0, -reach}}) {
            const Answer beside = ask(p + d, margin);
            answer.clear = answer.clear && beside.clear && beside.inside == answer.inside &&
                           beside.carrier == answer.carrier;
        }
        return answer;
    }

    [[nodiscard]] Answer ask(Point p, double margin) const {
        Beside low;
        Beside high;
        std::size_t crossings = 0;
        Answer answer;
        for (const Line& line : edges_) {
            if (near_end(line, p.y, margin)) {
                return answer;
            }
            if (const auto along = at(line, p.y)) {
                crossings += *along > p.x ? 1 : 0;
                double& nearest = *along > p.x ? high.edge : low.edge;
                nearest = std::min(nearest, std::abs(*along - p.x));
            }
        }
        for (const Line& line : carriers_) {
            if (near_end(line, p.y, margin)) {
                return answer;
            }
            if (const auto along = at(line, p.y)) {
                Beside& side = *along > p.x ? high : low;
                const double d = std::abs(*along - p.x);
                if (d < side.carrier) {
                    side.second = side.carrier;
                    side.carrier = d;
                    side.number = line.number;
                } else {
                    side.second = std::min(side.second, d);
                }
            }
        }
        answer.inside = crossings % 2 == 1;
        decide(low, high, margin, answer);
        return answer;
    }

private:
    struct Line {
        Point a, b;
        std::uint32_t number = none;
    };

    void add_edges(const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            edges_.push_back({axes_.to_strip(ring[i]), axes_.to_strip(ring[(i + 1) % ring.size()]), none});
        }
    }
    void add_carrier(std::uint32_t number, Point from, Point to, double snap) {
        const Line line{axes_.to_strip(from), axes_.to_strip(to), number};
        if (std::abs(line.b.y - line.a.y) > snap) {
            carriers_.push_back(line);
        }
    }

    static bool near_end(const Line& line, double across, double margin) {
        return std::abs(line.a.y - across) <= margin || std::abs(line.b.y - across) <= margin;
    }
    static std::optional<double> at(const Line& line, double across) {
        if ((line.a.y > across) == (line.b.y > across)) {
            return std::nullopt;
        }
        return line.a.x + (line.b.x - line.a.x) * ((across - line.a.y) / (line.b.y - line.a.y));
    }

    void decide(const Beside& low, const Beside& high, double margin, Answer& answer) const {
        // A carrier on the deck's edge carries it: it counts as before the edge. One a little behind it may
        // have been fitted to it or not.
        const auto behind = [&](const Beside& side) {
            return side.carrier > side.edge + noise_ && side.carrier <= side.edge + margin;
        };
        if (behind(low) || behind(high)) {
            return;
        }
        const bool low_first = low.carrier <= low.edge + noise_ && low.number != none;
        const bool high_first = high.carrier <= high.edge + noise_ && high.number != none;
        const bool tie = (low_first && high_first && std::abs(low.carrier - high.carrier) <= 2 * margin) ||
                         (low_first && low.second - low.carrier <= margin) ||
                         (high_first && high.second - high.carrier <= margin) || low.edge <= margin ||
                         high.edge <= margin || low.carrier <= margin || high.carrier <= margin;
        if (tie) {
            return;
        }
        answer.clear = true;
        if (low_first && (!high_first || low.carrier < high.carrier)) {
            answer.carrier = low.number;
        } else if (high_first) {
            answer.carrier = high.number;
        }
    }

    const StripAxes& axes_;
    double noise_;
    std::vector<Line> edges_;
    std::vector<Line> carriers_;
};

double area_of(const Cell& cell) {
    const double start = cell.high.start - cell.low.start;
    const double end = cell.high.end - cell.low.end;
    return (cell.to - cell.from) * (start + end) / 2;
}

Box box_of(const Cell& cell) {
    Box box = box_of(Point{cell.low.start, cell.from}, Point{cell.high.end, cell.to});
    box.add({cell.high.start, cell.from});
    box.add({cell.low.end, cell.to});
    return box;
}

bool holds(const Cell& cell, Point p) {
    if (p.y < cell.from || p.y >= cell.to) {
        return false;
    }
    const double x = (p.y - cell.from) / (cell.to - cell.from);
    return p.x >= cell.low.at(x) && p.x < cell.high.at(x);
}

} // namespace

std::vector<Problem> check_cover(const Framing& framing, std::uint32_t level_index, const Sharing& sharing,
                                 double relative) {
    const FramedLevel& level = framing.levels[level_index];
    std::vector<Sum> covered(level.decks.size());
    for (const Cell& cell : sharing.cells) {
        covered[cell.deck].add(area_of(cell));
    }
    std::vector<Problem> problems;
    for (std::size_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        double area = std::abs(signed_area(deck.outline));
        for (const Ring& opening : deck.openings) {
            area -= std::abs(signed_area(opening));
        }
        const double found = covered[d].value();
        if (!(std::abs(found - area) <= relative * area)) {
            problems.push_back(problem_at(
                ProblemCode::cover_broken, deck.origin, "decks",
                "Level " + level.id + ", deck " + deck.id + ": regions of " + exact_text(found) +
                    " m2 do not add up to its " + exact_text(area) + " m2.",
                "This is a fault of the program or of overlapping openings; do not use the result.",
                {deck.id}));
        }
    }
    return problems;
}

std::vector<Problem> check_owners(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                                  const Sharing& sharing, std::uint32_t samples, std::uint64_t seed) {
    const FramedLevel& level = framing.levels[level_index];
    std::vector<std::pair<std::uint32_t, std::uint32_t>> by_deck;
    for (std::uint32_t c = 0; c < sharing.cells.size(); ++c) {
        by_deck.emplace_back(sharing.cells[c].deck, c);
    }
    const auto cells = Grouped<std::uint32_t>::from_pairs(level.decks.size(), std::move(by_deck));
    // Points nearer than this to a border are left out: rounding, or fitting carriers to edges within `snap`,
    // may put them on either side.
    const double noise = 4 * noise_of(framing.largest_coordinate);
    const double margin = noise + 2 * plan.settings.snap;
    std::mt19937_64 random(seed);
    std::vector<Problem> problems;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        const FramedDeck& deck = level.decks[d];
        if (cells[d].empty()) {
            continue;
        }
        const StripAxes& axes = sharing.axes[sharing.cells[cells[d].front()].axes];
        const StripProbe probe(plan, level, deck, sharing, axes, noise);
        std::vector<Box> boxes;
        Box extent = box_of(sharing.cells[cells[d].front()]);
        for (const std::uint32_t c : cells[d]) {
            boxes.push_back(box_of(sharing.cells[c]));
            extent.add(boxes.back().low);
            extent.add(boxes.back().high);
        }
        const BoxTree tree(boxes);
        std::uniform_real_distribution<double> along(extent.low.x, extent.high.x);
        std::uniform_real_distribution<double> across(extent.low.y, extent.high.y);
        std::vector<std::uint32_t> near;
        for (std::uint32_t i = 0; i < samples; ++i) {
            const Point p{along(random), across(random)};
            const StripProbe::Answer answer = probe.ask_around(p, margin, 2 * plan.settings.snap);
            if (!answer.clear) {
                continue;
            }
            std::uint32_t holders = 0;
            std::uint32_t owner = none;
            tree.find(box_of(p, p), near);
            for (const std::uint32_t k : near) {
                const std::uint32_t c = cells[d][k];
                if (holds(sharing.cells[c], p)) {
                    ++holders;
                    owner = sharing.transfers[c].empty() ? none : sharing.transfers[c].front().carrier;
                }
            }
            if (holders != (answer.inside ? 1U : 0U) || (answer.inside && owner != answer.carrier)) {
                const Point where = axes.to_plan(p);
                Problem problem =
                    problem_at(ProblemCode::owner_broken, deck.origin, "decks",
                               "Level " + level.id + ", deck " + deck.id + ": the point " +
                                   point_text(where, plan.units) + " lies in " + std::to_string(holders) +
                                   " cells and has another carrier than its strip gives it.",
                               "This is a fault of the program; do not use the result.", {deck.id});
                problem.point = where;
                problems.push_back(std::move(problem));
            }
        }
    }
    return problems;
}

RUNNEL_NAMESPACE_END
