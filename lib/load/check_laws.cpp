#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "load/collector.hpp"
#include "plan/problems.hpp"

#include <runnel/load.hpp>

#include <cmath>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// What the carriers of a level got from each deck, by case, gathered from their loads by other loops than
/// those that made the account.
class GivenByDecks {
public:
    GivenByDecks(const Plan& plan, const FramedLevel& level, const Sharing& sharing, const LevelLoads& loads)
        : plan_(plan), level_(level), sharing_(sharing), cases_(plan.cases.size()),
          sums_(level.decks.size() * plan.cases.size()) {
        for (std::uint32_t c = 0; c < sharing.carrier_count(); ++c) {
            const auto [from, direction] = axis_of(c);
            for (const CarrierLine& line : loads.lines[c]) {
                if (line.source.kind == SourceKind::deck) {
                    const double force = line.piece.total();
                    const double station_moment = line.piece.first_moment() + force * line.piece.from;
                    add(line.source.index, line.load_case, force, force * from + station_moment * direction);
                }
            }
            for (const CarrierPoint& point : loads.points[c]) {
                if (point.source.kind == SourceKind::deck) {
                    add(point.source.index, point.load_case, point.p,
                        point.p * (from + point.station * direction));
                }
            }
        }
    }

    [[nodiscard]] ForceSum sum(std::uint32_t deck, std::uint32_t load_case) const {
        return sums_[deck * cases_ + load_case].sum();
    }

private:
    struct Axis {
        Point from, direction;
    };

    [[nodiscard]] Axis axis_of(std::uint32_t number) const {
        const Carrier carrier = sharing_.carrier(number);
        if (carrier.kind == CarrierKind::column) {
            return {plan_.columns[carrier.index].at, {}};
        }
        const bool wall = carrier.kind == CarrierKind::wall;
        const Point from = wall ? plan_.walls[carrier.index].from : level_.members[carrier.index].from;
        const Point to = wall ? plan_.walls[carrier.index].to : level_.members[carrier.index].to;
        return {from, 1 / distance(from, to) * (to - from)};
    }

    void add(std::uint32_t deck, std::uint32_t load_case, double force, Point moment) {
        sums_[deck * cases_ + load_case].add(force, moment, std::abs(force));
    }

    const Plan& plan_;
    const FramedLevel& level_;
    const Sharing& sharing_;
    std::size_t cases_;
    std::vector<ForceGatherer> sums_;
};

Problem broken(ProblemCode code, const Plan& plan, const FramedLevel& level, const DeckBalance& row,
               const std::string& what) {
    const FramedDeck& deck = level.decks[row.deck];
    Problem problem = problem_at(code, deck.origin, "decks",
                                 "Level " + level.id + ", deck " + deck.id + ", case " +
                                     plan.cases[row.load_case].id + ": " + what,
                                 "This is a fault of the program; do not use the result.", {deck.id});
    problem.point = deck.outline.front();
    return problem;
}

} // namespace

std::vector<Problem> check_force(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                                 const Sharing& sharing, const LevelLoads& loads, double relative) {
    const FramedLevel& level = framing.levels[level_index];
    const GivenByDecks given(plan, level, sharing, loads);
    std::vector<Problem> problems;
    for (const DeckBalance& row : loads.balance) {
        if (row.deck == none) {
            continue;
        }
        const double got = given.sum(row.deck, row.load_case).force;
        if (!(std::abs(got - row.applied.force) <= relative * row.applied.magnitude)) {
            problems.push_back(broken(ProblemCode::force_broken, plan, level, row,
                                      exact_text(row.applied.force) + " kN were put on, carriers get " +
                                          exact_text(got) + " kN."));
        }
    }
    return problems;
}

std::vector<Problem> check_moment(const Plan& plan, const Framing& framing, std::uint32_t level_index,
                                  const Sharing& sharing, const LevelLoads& loads, double relative) {
    const FramedLevel& level = framing.levels[level_index];
    const GivenByDecks given(plan, level, sharing, loads);
    std::vector<Problem> problems;
    for (const DeckBalance& row : loads.balance) {
        if (row.deck == none) {
            continue;
        }
        const FramedDeck& deck = level.decks[row.deck];
        if (deck.span != SpanKind::one_way || deck.share == Share::half) {
            continue;
        }
        // About the deck's own corner: its load's arm counts, not the way to the plan's origin.
        const Point corner = deck.outline.front();
        const ForceSum got = given.sum(row.deck, row.load_case);
        const Point arm =
            (row.applied.moment - row.applied.force * corner) - (got.moment - got.force * corner);
        const Box extent = box_of(deck.outline);
        const double size = distance(extent.low, extent.high);
        const double noise = noise_of(framing.largest_coordinate) * got.magnitude;
        if (!(norm(arm) <= relative * got.magnitude * size + noise + row.moved)) {
            problems.push_back(broken(ProblemCode::moment_broken, plan, level, row,
                                      "its load moved by a moment of " + exact_text(norm(arm)) + " kNm."));
        }
    }
    return problems;
}

RUNNEL_NAMESPACE_END
