#include "path/balance.hpp"

#include "path/case_sums.hpp"
#include "path/member_path.hpp"

#include <algorithm>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// The carriers that feet name on one of their sides, each once.
std::vector<Carrier> different(const std::vector<Foot>& feet, Carrier Foot::*side) {
    std::vector<Carrier> carriers;
    carriers.reserve(feet.size());
    for (const Foot& foot : feet) {
        carriers.push_back(foot.*side);
    }
    const auto before = [](const Carrier& a, const Carrier& b) {
        return std::pair(a.kind, a.index) < std::pair(b.kind, b.index);
    };
    std::sort(carriers.begin(), carriers.end(), before);
    carriers.erase(std::unique(carriers.begin(), carriers.end()), carriers.end());
    return carriers;
}

bool is_foot(const Source& source) {
    return source.kind == SourceKind::column || source.kind == SourceKind::wall;
}

/// What columns and walls that end at a level bring to one of its carriers.
void add_feet_on(const Takedown& takedown, std::uint32_t level_index, Carrier carrier, CaseSums& sums) {
    const LevelTakedown& level = takedown.levels[level_index];
    const Axis axis = axis_of(takedown.plan, takedown.framing.levels[level_index], carrier);
    const std::uint32_t number = level.sharing.number_of(carrier);
    for (const CarrierLine& line : level.lines[number]) {
        if (is_foot(line.source)) {
            sums.add_line(line.load_case, axis, line.piece);
        }
    }
    for (const CarrierPoint& point : level.points[number]) {
        if (is_foot(point.source)) {
            sums.add_point(point.load_case, axis.at(point.station), point.p);
        }
    }
}

/// What a column or wall brings to its foot, on its own axis.
void add_foot_of(const Takedown& takedown, Carrier upper, CaseSums& sums) {
    if (upper.kind == CarrierKind::column) {
        const std::vector<Lift>& lifts = takedown.columns[upper.index].lifts;
        for (std::uint32_t c = 0; !lifts.empty() && c < sums.cases(); ++c) {
            sums.add_point(c, takedown.plan.columns[upper.index].at, lifts.back().total[c]);
        }
        return;
    }
    const Wall& wall = takedown.plan.walls[upper.index];
    const std::vector<WallLift>& lifts = takedown.walls[upper.index].lifts;
    if (!lifts.empty()) {
        sums.add_loads(axis_between(wall.from, wall.to), lifts.back().line, lifts.back().point);
    }
}

void add_fixed_moments(const Takedown& takedown, std::uint32_t level_index, CaseSums& sums) {
    const FramedLevel& framed = takedown.framing.levels[level_index];
    const LevelTakedown& level = takedown.levels[level_index];
    if (level.fixed_moments.empty()) {
        return;
    }
    for (std::uint32_t m = 0; m < framed.members.size(); ++m) {
        const std::span<const Bearing> bearings = framed.bearings[m];
        const Axis axis = axis_of(takedown.plan, framed, {CarrierKind::member, m});
        for (std::size_t b = 0; b < bearings.size(); ++b) {
            const double* const moments = &level.fixed_moments[(framed.bearings.first(m) + b) * sums.cases()];
            const double sign = holds_falling(framed.members[m], bearings, b) ? -1 : 1;
            for (std::uint32_t c = 0; bearings[b].fixed && c < sums.cases(); ++c) {
                sums.add_moment(c, sign * moments[c] * axis.direction);
            }
        }
    }
}

/// Calls visit(at, on_at, bearing, reactions by case) for every bearing of a level.
template <class Visit>
void for_bearings(const Takedown& takedown, std::uint32_t level_index, std::size_t cases,
                  const Visit& visit) {
    const FramedLevel& framed = takedown.framing.levels[level_index];
    const LevelTakedown& level = takedown.levels[level_index];
    for (std::uint32_t m = 0; m < framed.members.size(); ++m) {
        const Axis axis = axis_of(takedown.plan, framed, {CarrierKind::member, m});
        const std::size_t first = framed.bearings.first(m);
        for (std::size_t b = 0; b < framed.bearings[m].size(); ++b) {
            const Bearing& bearing = framed.bearings[m][b];
            const Point on_at = axis_of(takedown.plan, framed, bearing.on).at(bearing.on_station);
            visit(axis.at(bearing.station), on_at, bearing,
                  std::span<const double>(level.reactions).subspan((first + b) * cases, cases));
        }
    }
}

/// Supports of a level take what members bring them and what stands straight on them.
void add_level_arrivals(const Takedown& takedown, std::uint32_t level_index, CaseSums& arrived) {
    const FramedLevel& framed = takedown.framing.levels[level_index];
    const LevelTakedown& level = takedown.levels[level_index];
    for_bearings(takedown, level_index, arrived.cases(),
                 [&](Point at, Point on_at, const Bearing& bearing, std::span<const double> reactions) {
                     for (std::uint32_t c = 0; c < reactions.size(); ++c) {
                         if (reactions[c] == 0) {
                             continue;
                         }
                         if (bearing.on.kind == CarrierKind::member) {
                             arrived.add_moment(c, -reactions[c] * (on_at - at));
                         } else {
                             arrived.add_point(c, at, reactions[c]);
                         }
                     }
                 });
    for (std::uint32_t n = level.sharing.members; n < level.sharing.carrier_count(); ++n) {
        arrived.add_loads(axis_of(takedown.plan, framed, level.sharing.carrier(n)), level.loads.lines[n],
                          level.loads.points[n]);
    }
    add_fixed_moments(takedown, level_index, arrived);
}

/// Takes off what first moments gain where loads pass from one axis to another beside it.
void take_off_gaps(const Takedown& takedown, std::uint32_t level_index, CaseSums& arrived) {
    const FramedLevel& framed = takedown.framing.levels[level_index];
    const std::size_t cases = arrived.cases();
    for_bearings(takedown, level_index, cases,
                 [&](Point at, Point on_at, const Bearing&, std::span<const double> reactions) {
                     for (std::uint32_t c = 0; c < reactions.size(); ++c) {
                         if (reactions[c] != 0) {
                             arrived.add_moment(c, -reactions[c] * (on_at - at));
                         }
                     }
                 });

    // What stands on feet, before and after the step from the upper axis to the lower.
    CaseSums gained(cases);
    CaseSums before(cases);
    for (const Carrier lower : different(framed.feet, &Foot::lower)) {
        add_feet_on(takedown, level_index, lower, gained);
    }
    for (const Carrier upper : different(framed.feet, &Foot::upper)) {
        add_foot_of(takedown, upper, before);
    }
    for (std::uint32_t c = 0; c < cases; ++c) {
        arrived.add_moment(c, before.sum(c).moment - gained.sum(c).moment);
    }
}

Balance close(std::uint32_t load_case, const CaseSums& applied, const CaseSums& shared,
              const CaseSums& arrived, double area, double size) {
    Balance balance;
    balance.load_case = load_case;
    balance.applied = applied.sum(load_case);
    balance.shared = shared.sum(load_case);
    balance.arrived = arrived.sum(load_case);
    const auto [least, most] =
        std::minmax({balance.applied.force, balance.shared.force, balance.arrived.force});
    balance.difference = most - least;
    balance.moment_difference = balance.shared.moment - balance.arrived.moment;
    balance.area = area;
    balance.closes = is_closed(
        balance.difference, balance.moment_difference,
        std::max({balance.applied.magnitude, balance.shared.magnitude, balance.arrived.magnitude}), size);
    return balance;
}

double deck_area(const LevelTakedown& level) {
    Sum area;
    for (const double deck : level.sharing.deck_area) {
        area.add(deck);
    }
    return area.value();
}

} // namespace

double plan_size(const Takedown& takedown) {
    return takedown.framing.largest_coordinate;
}

bool is_closed(double force, Point moment, double magnitude, double size) {
    return std::abs(force) <= closing * magnitude && std::abs(moment.x) <= closing * magnitude * size &&
           std::abs(moment.y) <= closing * magnitude * size;
}

void balance_levels_and_building(Takedown& takedown) {
    const std::size_t cases = takedown.plan.cases.size();
    const double size = plan_size(takedown);
    CaseSums all_applied(cases);
    CaseSums all_shared(cases);
    CaseSums all_arrived(cases);
    double all_area = 0;
    takedown.level_balance.assign(takedown.levels.size(), {});
    for (std::uint32_t l = 0; l < takedown.levels.size(); ++l) {
        const LevelTakedown& level = takedown.levels[l];
        CaseSums applied(cases);
        CaseSums shared(cases);
        CaseSums arrived(cases);
        for (const DeckBalance& deck : level.loads.balance) {
            applied.add_sum(deck.load_case, deck.applied);
            shared.add_sum(deck.load_case, deck.shared);
            all_applied.add_sum(deck.load_case, deck.applied);
            all_shared.add_sum(deck.load_case, deck.shared);
        }
        for (const Carrier lower : different(takedown.framing.levels[l].feet, &Foot::lower)) {
            if (lower.kind == CarrierKind::member) {
                add_feet_on(takedown, l, lower, applied);
                add_feet_on(takedown, l, lower, shared);
            }
        }
        add_level_arrivals(takedown, l, arrived);
        const double area = deck_area(level);
        for (std::uint32_t c = 0; c < cases; ++c) {
            takedown.level_balance[l].push_back(close(c, applied, shared, arrived, area, size));
        }
        all_area += area;
        add_fixed_moments(takedown, l, all_arrived);
        take_off_gaps(takedown, l, all_arrived);
    }
    add_own_weight(takedown, all_applied);
    add_own_weight(takedown, all_shared);
    add_foundations(takedown, all_arrived);
    takedown.balance.clear();
    for (std::uint32_t c = 0; c < cases; ++c) {
        takedown.balance.push_back(close(c, all_applied, all_shared, all_arrived, all_area, size));
    }
}

RUNNEL_NAMESPACE_END
