#include "framing/feet.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

class FootFinder {
public:
    explicit FootFinder(LevelDraft& draft) : draft_(draft) {}

    void run() {
        for (std::uint32_t i = 0; i < draft_.plan.columns.size(); ++i) {
            if (draft_.framing.column_base[i] == draft_.level.plan_level) {
                stand_column(i);
            }
        }
        for (std::uint32_t i = 0; i < draft_.plan.walls.size(); ++i) {
            if (draft_.framing.wall_base[i] == draft_.level.plan_level) {
                stand_wall(i);
            }
        }
    }

private:
    [[nodiscard]] Axis axis_of(Carrier carrier) const {
        switch (carrier.kind) {
        case CarrierKind::member:
            return draft_.axis_of(carrier.index);
        case CarrierKind::wall:
            return draft_.wall_axis(carrier.index);
        case CarrierKind::column:
            break;
        }
        return {draft_.plan.columns[carrier.index].at, draft_.plan.columns[carrier.index].at};
    }

    /// Carriers of this level in a box, members in the order of the plan.
    std::vector<Carrier> carriers_near(Point a, Point b, double reach) {
        found_.clear();
        draft_.surroundings.find(a, b, reach, found_);
        std::vector<Carrier> carriers;
        for (const std::uint32_t e : found_) {
            if (draft_.elements.is_column(e)) {
                carriers.push_back({CarrierKind::column, draft_.column_of(e)});
            } else if (draft_.elements.is_wall(e)) {
                carriers.push_back({CarrierKind::wall, draft_.wall_of(e)});
            } else if (draft_.lines[e].usable) {
                const auto [first, last] = draft_.members_near(e, a, b, reach);
                for (std::uint32_t m = first; m < last; ++m) {
                    carriers.push_back({CarrierKind::member, m});
                }
            }
        }
        return carriers;
    }

    void stand_column(std::uint32_t column) {
        const Point at = draft_.plan.columns[column].at;
        Carrier best;
        NearPoint best_near;
        for (const Carrier carrier : carriers_near(at, at, 2 * draft_.reach())) {
            const NearPoint near = nearest_on(axis_of(carrier), at);
            if (near.distance <= draft_.reach() &&
                (best.index == none || draft_.order_of_choice(carrier) > draft_.order_of_choice(best))) {
                best = carrier;
                best_near = near;
            }
        }
        if (best.index == none) {
            refuse_column(column, at);
            return;
        }
        Foot foot;
        foot.upper = {CarrierKind::column, column};
        foot.lower = best;
        foot.lower_from = foot.lower_to = best_near.station;
        foot.at = foot.to = at;
        foot.on_at = foot.on_to = best_near.at;
        draft_.level.feet.push_back(foot);
    }

    /// A carrier along a wall's line, and the stretch of the wall that it can take.
    struct Under {
        Carrier carrier;
        Stretch stretch;
    };

    void stand_wall(std::uint32_t wall) {
        const Axis axis = draft_.wall_axis(wall);
        std::vector<Under> under;
        std::vector<double> breaks{0, axis.length};
        for (const Carrier carrier : carriers_near(axis.from, axis.to, 2 * draft_.reach())) {
            const auto stretch = stretch_along(axis, axis_of(carrier), draft_.reach());
            if (stretch && carrier.kind != CarrierKind::column) {
                under.push_back({carrier, *stretch});
                breaks.push_back(stretch->from);
                breaks.push_back(stretch->to);
            }
        }
        std::sort(breaks.begin(), breaks.end());
        std::vector<Under> taken = take_stretches(under, breaks);
        close_small_gaps(taken);
        for (const Under& part : taken) {
            if (part.carrier.index == none) {
                refuse_stretch(wall, axis, part.stretch);
            } else {
                add_foot(wall, axis, part);
            }
        }
    }

    /// Each stretch between breaks goes to the carrier that the order of choice names; neighbours on one
    /// carrier are one.
    std::vector<Under> take_stretches(const std::vector<Under>& under,
                                      const std::vector<double>& breaks) const {
        std::vector<Under> taken;
        for (std::size_t i = 0; i + 1 < breaks.size(); ++i) {
            const Stretch stretch{breaks[i], breaks[i + 1]};
            if (stretch.length() <= 0) {
                continue;
            }
            const double middle = (stretch.from + stretch.to) / 2;
            Carrier best;
            for (const Under& candidate : under) {
                if (candidate.stretch.from <= middle && middle <= candidate.stretch.to &&
                    (best.index == none ||
                     draft_.order_of_choice(candidate.carrier) > draft_.order_of_choice(best))) {
                    best = candidate.carrier;
                }
            }
            if (!taken.empty() && taken.back().carrier == best) {
                taken.back().stretch.to = stretch.to;
            } else {
                taken.push_back({best, stretch});
            }
        }
        return taken;
    }

    /// What is no longer than snap is no stretch of its own: its neighbour takes it.
    void close_small_gaps(std::vector<Under>& parts) const {
        std::vector<Under> kept;
        double from = 0;
        for (const Under& part : parts) {
            const bool small = part.stretch.length() <= draft_.reach();
            if (small && !kept.empty()) {
                kept.back().stretch.to = part.stretch.to;
                from = part.stretch.to;
            } else if (!small) {
                if (!kept.empty() && kept.back().carrier == part.carrier) {
                    kept.back().stretch.to = part.stretch.to;
                } else {
                    kept.push_back({part.carrier, {from, part.stretch.to}});
                }
                from = part.stretch.to;
            }
        }
        parts = std::move(kept);
    }

    void add_foot(std::uint32_t wall, const Axis& axis, const Under& part) {
        const Axis lower = axis_of(part.carrier);
        Foot foot;
        foot.upper = {CarrierKind::wall, wall};
        foot.lower = part.carrier;
        foot.upper_from = part.stretch.from;
        foot.upper_to = part.stretch.to;
        foot.at = axis.at(foot.upper_from);
        foot.to = axis.at(foot.upper_to);
        const NearPoint from = nearest_on(lower, foot.at);
        const NearPoint to = nearest_on(lower, foot.to);
        foot.lower_from = from.station;
        foot.lower_to = to.station;
        foot.on_at = from.at;
        foot.on_to = to.at;
        draft_.level.feet.push_back(foot);
    }

    std::string near_text(const Axis& axis) {
        const double limit = snaps_of_a_near_miss * draft_.tolerance.snap;
        std::optional<std::pair<Carrier, Gap>> best;
        for (const Carrier carrier : carriers_near(axis.from, axis.to, limit + draft_.reach())) {
            const Gap gap = gap_between(axis, axis_of(carrier));
            if (gap.distance <= limit && gap.distance > draft_.reach() &&
                (!best || gap.distance < best->second.distance)) {
                best.emplace(carrier, gap);
            }
        }
        return best ? "It misses " + label_of(draft_, best->first) + " by " +
                          length_text(best->second.distance, draft_.plan.units) + " at " +
                          place_text(draft_.plan, best->second.other_at) + '.'
                    : std::string{};
    }

    Origin origin_of(const Origin& given, std::uint32_t index) const {
        Origin origin = given;
        if (origin.index == Origin::nowhere) {
            origin.index = index;
        }
        return origin;
    }

    void refuse_column(std::uint32_t column, Point at) {
        draft_.problems.add(ProblemCode::stands_on_nothing, [&] {
            const Column& given = draft_.plan.columns[column];
            Problem problem =
                problem_at(ProblemCode::stands_on_nothing, origin_of(given.origin, column), "columns",
                           "Column " + given.id + " stands on level " + draft_.level.id +
                               ", but there is no column, wall or member under it at " +
                               place_text(draft_.plan, at) + '.',
                           near_text({at, at}), {given.id});
            if (problem.hint.empty()) {
                problem.hint = "Put a carrier under it, or give it a lower base.";
            }
            problem.point = at;
            return problem;
        });
    }

    void refuse_stretch(std::uint32_t wall, const Axis& axis, const Stretch& stretch) {
        draft_.problems.add(ProblemCode::stands_on_nothing, [&] {
            const Wall& given = draft_.plan.walls[wall];
            const Units units = draft_.plan.units;
            Problem problem = problem_at(
                ProblemCode::stands_on_nothing, origin_of(given.origin, wall), "walls",
                "Wall " + given.id + " stands on level " + draft_.level.id +
                    ", but has nothing under it from station " + length_text(stretch.from, units) + " to " +
                    length_text(stretch.to, units) + " (" + place_text(draft_.plan, axis.at(stretch.from)) +
                    " to " + place_text(draft_.plan, axis.at(stretch.to)) + ").",
                near_text({axis.at(stretch.from), axis.at(stretch.to)}), {given.id});
            if (problem.hint.empty()) {
                problem.hint = "Put a wall or a member along its line there, or give it a lower base.";
            }
            problem.point = axis.at(stretch.from);
            return problem;
        });
    }

    LevelDraft& draft_;
    std::vector<std::uint32_t> found_;
};

} // namespace

void find_feet(LevelDraft& draft) {
    FootFinder(draft).run();
}

RUNNEL_NAMESPACE_END
