#include "path/balance.hpp"
#include "path/case_sums.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// What should add up to nothing, by case.
class Tally {
public:
    explicit Tally(std::size_t cases) : rest_(cases), magnitude_(cases, 0.0) {}

    void add(std::uint32_t load_case, double p) {
        rest_[load_case].add(p);
        magnitude_[load_case] += std::abs(p);
    }
    [[nodiscard]] double rest(std::uint32_t load_case) const { return rest_[load_case].value(); }
    [[nodiscard]] bool closes(std::uint32_t load_case) const {
        return is_closed(rest(load_case), {}, magnitude_[load_case], 0);
    }

private:
    std::vector<Sum> rest_;
    std::vector<double> magnitude_;
};

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
        for (std::uint32_t c = 0; c < takedown_.columns.size(); ++c) {
            check_column_lifts(c);
        }
        for (std::uint32_t w = 0; w < takedown_.walls.size(); ++w) {
            check_wall_lifts(w);
        }
        check_building();
        return std::move(problems_);
    }

private:
    void check_members(std::uint32_t level_index);
    void check_member(std::uint32_t level_index, std::uint32_t member);
    void check_level(std::uint32_t level_index);
    void put_on_level(std::uint32_t level_index, Tally& tally) const;
    void check_column_lifts(std::uint32_t column);
    void check_wall_lifts(std::uint32_t wall);
    void check_lift(const std::string& what, const std::string& id, std::uint32_t level, double self_weight,
                    const std::vector<double>& total, Tally& tally);
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
        if (!is_closed(put, {put_moment, 0}, magnitude, member.length)) {
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

/// What was put on a level: on its decks and straight on its carriers, and feet that its members carry. Feet
/// on columns and walls go straight into their lifts.
void BalanceChecker::put_on_level(std::uint32_t level_index, Tally& tally) const {
    const FramedLevel& framed = takedown_.framing.levels[level_index];
    const LevelTakedown& level = takedown_.levels[level_index];
    for (const DeckBalance& deck : level.loads.balance) {
        tally.add(deck.load_case, deck.applied.force);
    }
    for (const Foot& foot : framed.feet) {
        if (foot.lower.kind != CarrierKind::member || foot.upper.kind != CarrierKind::column) {
            continue;
        }
        const std::vector<Lift>& lifts = takedown_.columns[foot.upper.index].lifts;
        for (std::uint32_t c = 0; !lifts.empty() && c < cases_; ++c) {
            tally.add(c, lifts.back().total[c]);
        }
    }
    for (std::uint32_t m = 0; m < level.sharing.members && !framed.feet.empty(); ++m) {
        for (const CarrierLine& line : level.lines[m]) {
            if (line.source.kind == SourceKind::wall) {
                tally.add(line.load_case, line.piece.total());
            }
        }
        for (const CarrierPoint& point : level.points[m]) {
            if (point.source.kind == SourceKind::wall) {
                tally.add(point.load_case, point.p);
            }
        }
    }
}

/// Every level: what was put on it against what its columns and walls took on from it.
void BalanceChecker::check_level(std::uint32_t level_index) {
    const LevelTakedown& level = takedown_.levels[level_index];
    const std::string name = "Level " + takedown_.framing.levels[level_index].id;
    Tally tally(cases_);
    put_on_level(level_index, tally);
    const auto take = [&tally](std::uint32_t load_case, const Source& source, double p) {
        if (source.kind != SourceKind::wall && source.kind != SourceKind::column) {
            tally.add(load_case, -p);
        }
    };
    for (std::uint32_t n = level.sharing.members; n < level.sharing.carrier_count(); ++n) {
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
        } else if (!tally.closes(c)) {
            open(name, c, "load and what its columns and walls took on differ by " + force(tally.rest(c)));
        }
    }
}

/// Every lift of a column: what came in and its own weight against its total.
void BalanceChecker::check_column_lifts(std::uint32_t column) {
    const std::string& id = takedown_.plan.columns[column].id;
    for (const Lift& lift : takedown_.columns[column].lifts) {
        Tally tally(cases_);
        for (const LiftLoad& load : lift.from) {
            tally.add(load.load_case, load.p);
        }
        check_lift("Column " + id, id, lift.level, lift.self_weight, lift.total, tally);
    }
}

/// Every lift of a wall: what stands on it at the level, the lift above and its own weight against its total.
void BalanceChecker::check_wall_lifts(std::uint32_t wall) {
    const std::string& id = takedown_.plan.walls[wall].id;
    std::vector<double> above(cases_, 0.0);
    for (const WallLift& lift : takedown_.walls[wall].lifts) {
        const LevelTakedown& level = takedown_.levels[lift.level];
        const std::uint32_t carrier = level.sharing.number_of({CarrierKind::wall, wall});
        Tally tally(cases_);
        for (const CarrierLine& line : level.lines[carrier]) {
            tally.add(line.load_case, line.piece.total());
        }
        for (const CarrierPoint& point : level.points[carrier]) {
            tally.add(point.load_case, point.p);
        }
        for (std::uint32_t c = 0; c < cases_; ++c) {
            tally.add(c, above[c]);
        }
        check_lift("Wall " + id, id, lift.level, lift.self_weight, lift.total, tally);
        above = lift.total;
    }
}

void BalanceChecker::check_lift(const std::string& what, const std::string& id, std::uint32_t level,
                                double self_weight, const std::vector<double>& total, Tally& tally) {
    for (std::uint32_t c = 0; c < cases_; ++c) {
        tally.add(c, c == takedown_.self_weight_case ? self_weight : 0);
        tally.add(c, -total[c]);
        if (!tally.closes(c)) {
            open(what + " under level " + takedown_.framing.levels[level].id, c,
                 "what came in and its total differ by " + force(tally.rest(c)), {id});
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
