#include "path/balance.hpp"
#include "path/case_sums.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Recomputes the laws of a takedown from its final loads, lifts and foundations, by other loops than those
/// that made the balances.
class BalanceChecker {
public:
    explicit BalanceChecker(const Takedown& takedown)
        : takedown_(takedown), cases_(static_cast<std::uint32_t>(takedown.plan.cases.size())) {}

    std::vector<Problem> run() {
        for (std::uint32_t l = 0; l < takedown_.levels.size(); ++l) {
            check_members(l);
            check_level(l);
        }
        check_lifts();
        check_building();
        return std::move(problems_);
    }

private:
    void check_members(std::uint32_t level_index);
    void check_member(std::uint32_t level_index, std::uint32_t member);
    void check_level(std::uint32_t level_index);
    void check_lifts();
    void check_building();

    void open(std::string what, std::uint32_t load_case, std::string numbers,
              std::vector<std::string> ids = {}) {
        Problem problem;
        problem.code = ProblemCode::balance_open;
        problem.severity = kind_of(problem.code).severity;
        problem.message = std::move(what) + ", case " + takedown_.plan.cases[load_case].id +
                          ": the balance does not close: " + std::move(numbers) + '.';
        problem.ids = std::move(ids);
        problems_.push_back(std::move(problem));
    }
    [[nodiscard]] std::string force(double value) const { return force_text(value, takedown_.plan.units); }
    void report(const std::string& what, const Balance& balance);

    const Takedown& takedown_;
    std::uint32_t cases_;
    std::vector<Problem> problems_;
};

void BalanceChecker::report(const std::string& what, const Balance& balance) {
    const double per_moment = si_per_unit(takedown_.plan.units, dimension::moment);
    open(what, balance.load_case,
         "applied " + force(balance.applied.force) + ", shared " + force(balance.shared.force) +
             ", arrived " + force(balance.arrived.force) + "; moments of shared and arrived differ by (" +
             text_of(balance.moment_difference.x / per_moment) + ", " +
             text_of(balance.moment_difference.y / per_moment) + ") " +
             unit_text(takedown_.plan.units, dimension::moment));
}

/// Every member: its loads against its reactions and held moments, as force and as moment about its `from`
/// end.
void BalanceChecker::check_members(std::uint32_t level_index) {
    const std::size_t members = takedown_.framing.levels[level_index].members.size();
    for (std::uint32_t m = 0; m < members; ++m) {
        check_member(level_index, m);
    }
}

void BalanceChecker::check_member(std::uint32_t level_index, std::uint32_t index) {
    const FramedLevel& framed = takedown_.framing.levels[level_index];
    const LevelTakedown& level = takedown_.levels[level_index];
    const FramedMember& member = framed.members[index];
    const std::span<const Bearing> bearings = framed.bearings[index];
    const std::span<const CarrierLine> lines = level.lines[index];
    const std::span<const CarrierPoint> points = level.points[index];
    auto line = lines.begin();
    auto point = points.begin();
    for (std::uint32_t c = 0; c < cases_; ++c) {
        double put = 0;
        double put_moment = 0;
        double magnitude = 0;
        double lever = member.length;
        for (; line != lines.end() && line->load_case == c; ++line) {
            const double total = line->piece.total();
            put += total;
            put_moment += total * line->piece.from + line->piece.first_moment();
            magnitude += std::abs(total);
        }
        for (; point != points.end() && point->load_case == c; ++point) {
            put += point->p;
            put_moment += point->p * point->station;
            magnitude += std::abs(point->p);
        }
        for (std::size_t b = 0; b < bearings.size(); ++b) {
            const std::size_t i = (framed.bearings.first(index) + b) * cases_ + c;
            put -= level.reactions[i];
            put_moment -= level.reactions[i] * bearings[b].station;
            magnitude += std::abs(level.reactions[i]);
            if (!level.fixed_moments.empty() && bearings[b].fixed) {
                // Positive for a cantilever of falling stations at the `to` end: see LevelTakedown.
                const bool at_to =
                    bearings.size() > 1 ? b + 1 == bearings.size() : bearings[b].station > member.length / 2;
                put_moment -= at_to ? -level.fixed_moments[i] : level.fixed_moments[i];
            }
        }
        if (!is_closed(put, {put_moment, 0}, magnitude, lever)) {
            open("Member " + framed.id + '/' + member.id, c,
                 "its loads and reactions differ by " + force(put) + " and by " +
                     text_of(put_moment / si_per_unit(takedown_.plan.units, dimension::moment)) + ' ' +
                     unit_text(takedown_.plan.units, dimension::moment),
                 {framed.id + '/' + member.id});
        }
    }
    if (line != lines.end() || point != points.end()) {
        open("Member " + framed.id + '/' + member.id, 0, "its loads are not sorted by case",
             {framed.id + '/' + member.id});
    }
}

/// Every level: what was put on its decks and carriers against what its columns and walls took on.
void BalanceChecker::check_level(std::uint32_t level_index) {
    const FramedLevel& framed = takedown_.framing.levels[level_index];
    const LevelTakedown& level = takedown_.levels[level_index];
    const std::string name = "Level " + framed.id;
    std::vector<Sum> put(cases_);
    std::vector<double> magnitude(cases_, 0.0);
    const auto put_on = [&](std::uint32_t load_case, double p) {
        put[load_case].add(p);
        magnitude[load_case] += std::abs(p);
    };
    for (const DeckBalance& deck : level.loads.balance) {
        put_on(deck.load_case, deck.applied.force);
    }
    // Feet on members pass through the level; those on columns and walls go straight into their lifts.
    for (const Foot& foot : framed.feet) {
        if (foot.lower.kind != CarrierKind::member || foot.upper.kind != CarrierKind::column) {
            continue;
        }
        const std::vector<Lift>& lifts = takedown_.columns[foot.upper.index].lifts;
        for (std::uint32_t c = 0; !lifts.empty() && c < cases_; ++c) {
            put_on(c, lifts.back().total[c]);
        }
    }
    for (std::uint32_t m = 0; m < level.sharing.members && !framed.feet.empty(); ++m) {
        for (const CarrierLine& line : level.lines[m]) {
            if (line.source.kind == SourceKind::wall) {
                put_on(line.load_case, line.piece.total());
            }
        }
        for (const CarrierPoint& point : level.points[m]) {
            if (point.source.kind == SourceKind::wall) {
                put_on(point.load_case, point.p);
            }
        }
    }
    for (std::uint32_t n = level.sharing.members; n < level.sharing.carrier_count(); ++n) {
        const auto take = [&](std::uint32_t load_case, const Source& source, double p) {
            if (source.kind != SourceKind::wall && source.kind != SourceKind::column) {
                put[load_case].add(-p);
                magnitude[load_case] += std::abs(p);
            }
        };
        for (const CarrierLine& line : level.lines[n]) {
            take(line.load_case, line.source, line.piece.total());
        }
        for (const CarrierPoint& point : level.points[n]) {
            take(point.load_case, point.source, point.p);
        }
    }
    for (std::uint32_t c = 0; c < cases_; ++c) {
        const Balance& balance = takedown_.level_balance[level_index][c];
        if (!balance.closes) {
            report(name, balance);
        } else if (!is_closed(put[c].value(), {}, magnitude[c], 0)) {
            open(name, c, "load and what its columns and walls took on differ by " + force(put[c].value()));
        }
    }
}

/// Every lift: what came in, what came from the lift above and its own weight against its total.
void BalanceChecker::check_lifts() {
    const Framing& framing = takedown_.framing;
    for (std::size_t i = 0; i < takedown_.columns.size(); ++i) {
        for (const Lift& lift : takedown_.columns[i].lifts) {
            for (std::uint32_t c = 0; c < cases_; ++c) {
                double rest = lift.total[c] - (c == takedown_.self_weight_case ? lift.self_weight : 0);
                double magnitude = std::abs(lift.total[c]);
                for (const LiftLoad& load : lift.from) {
                    rest -= load.load_case == c ? load.p : 0;
                    magnitude += load.load_case == c ? std::abs(load.p) : 0;
                }
                if (!is_closed(rest, {}, magnitude, 0)) {
                    open("Column " + takedown_.plan.columns[i].id + " under level " +
                             framing.levels[lift.level].id,
                         c, "what came in and its total differ by " + force(rest),
                         {takedown_.plan.columns[i].id});
                }
            }
        }
    }
    for (std::uint32_t w = 0; w < takedown_.walls.size(); ++w) {
        std::vector<double> above(cases_, 0.0);
        for (const WallLift& lift : takedown_.walls[w].lifts) {
            const LevelTakedown& level = takedown_.levels[lift.level];
            const std::uint32_t carrier = level.sharing.number_of({CarrierKind::wall, w});
            std::vector<Sum> came(cases_);
            std::vector<double> magnitude(cases_, 0.0);
            for (const CarrierLine& line : level.lines[carrier]) {
                came[line.load_case].add(line.piece.total());
                magnitude[line.load_case] += std::abs(line.piece.total());
            }
            for (const CarrierPoint& point : level.points[carrier]) {
                came[point.load_case].add(point.p);
                magnitude[point.load_case] += std::abs(point.p);
            }
            for (std::uint32_t c = 0; c < cases_; ++c) {
                came[c].add(above[c]);
                came[c].add(c == takedown_.self_weight_case ? lift.self_weight : 0);
                const double rest = came[c].value() - lift.total[c];
                if (!is_closed(rest, {}, magnitude[c] + std::abs(above[c]) + std::abs(lift.total[c]), 0)) {
                    open("Wall " + takedown_.plan.walls[w].id + " under level " +
                             framing.levels[lift.level].id,
                         c, "what came in and its total differ by " + force(rest),
                         {takedown_.plan.walls[w].id});
                }
            }
            above = lift.total;
        }
    }
}

/// The building: all that was put on against what reached the ground.
void BalanceChecker::check_building() {
    CaseSums put(cases_);
    CaseSums arrived(cases_);
    for (std::uint32_t l = 0; l < takedown_.levels.size(); ++l) {
        for (const DeckBalance& deck : takedown_.levels[l].loads.balance) {
            put.add_sum(deck.load_case, deck.applied);
        }
    }
    add_own_weight(takedown_, put);
    for (const Foundation& foundation : takedown_.foundations) {
        for (std::uint32_t c = 0; c < cases_; ++c) {
            arrived.add_point(c, {}, foundation.reactions[c]);
        }
    }
    for (std::uint32_t c = 0; c < cases_; ++c) {
        const ForceSum on = put.sum(c);
        const ForceSum down = arrived.sum(c);
        const Balance& balance = takedown_.balance[c];
        if (!balance.closes) {
            report("The building", balance);
        } else if (!is_closed(on.force - down.force, {}, on.magnitude + down.magnitude, 0)) {
            open("The building", c, "applied " + force(on.force) + ", arrived " + force(down.force));
        }
    }
}

} // namespace

std::vector<Problem> check_balance(const Takedown& takedown) {
    return BalanceChecker(takedown).run();
}

RUNNEL_NAMESPACE_END
