#include "framing/near_miss.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A carrier that an end misses.
struct Miss {
    Carrier carrier;
    NearPoint near;
};

class EndWatcher {
public:
    explicit EndWatcher(LevelDraft& draft)
        : draft_(draft), limit_(snaps_of_a_near_miss * draft.tolerance.snap) {}

    NearMisses run() {
        for (std::uint32_t m = 0; m < draft_.level.members.size(); ++m) {
            if (!draft_.lines[draft_.line_of[m]].usable) {
                continue;
            }
            const auto bearings = draft_.level.bearings[m];
            const double length = draft_.level.members[m].length;
            if (bearings.empty() || bearings.front().station > draft_.reach()) {
                watch(m, true);
            }
            if (bearings.empty() || bearings.back().station < length - draft_.reach()) {
                watch(m, false);
            }
        }
        return std::move(misses_);
    }

private:
    void watch(std::uint32_t m, bool from_end) {
        const Axis axis = draft_.axis_of(m);
        const Point end = from_end ? axis.from : axis.to;
        found_.clear();
        draft_.surroundings.find(end, limit_ + draft_.reach(), found_);
        std::optional<Miss> best;
        for (const std::uint32_t e : found_) {
            if (draft_.elements.is_column(e)) {
                const Point at = draft_.plan.columns[draft_.column_of(e)].at;
                offer(m, end, {at, at}, {CarrierKind::column, draft_.column_of(e)}, best);
            } else if (draft_.elements.is_wall(e)) {
                offer(m, end, draft_.wall_axis(draft_.wall_of(e)), {CarrierKind::wall, draft_.wall_of(e)},
                      best);
            } else if (draft_.lines[e].usable && draft_.lines[e].role >= draft_.level.members[m].role) {
                const auto [first, last] = draft_.members_near(e, end, end, limit_);
                for (std::uint32_t q = first; q < last; ++q) {
                    if (q != m) {
                        offer(m, end, draft_.axis_of(q), {CarrierKind::member, q}, best);
                    }
                }
            }
        }
        if (best) {
            report(m, from_end, end, *best);
        }
    }

    /// What touches the member anywhere is no miss: it has been judged as what it is.
    void offer(std::uint32_t m, Point end, const Axis& axis, Carrier carrier,
               std::optional<Miss>& best) const {
        const NearPoint near = nearest_on(axis, end);
        if (near.distance > limit_ || near.distance <= draft_.reach() ||
            (best && best->near.distance <= near.distance)) {
            return;
        }
        const Axis own = draft_.axis_of(m);
        if (gap_between(own, axis).distance > draft_.reach()) {
            best = Miss{carrier, near};
        }
    }

    void report(std::uint32_t m, bool from_end, Point end, const Miss& miss) {
        const Axis axis = draft_.axis_of(m);
        const Point outward = from_end ? axis.from - axis.to : axis.to - axis.from;
        const Point way = miss.near.at - end;
        // Within 45 degrees of the member's own direction it stops short, else it passes beside.
        const bool short_of = dot(way, outward) >= std::abs(cross(way, outward));
        const std::string on = label_of(draft_, miss.carrier);
        if (miss.carrier.kind == CarrierKind::column) {
            misses_.columns.insert(miss.carrier.index);
        } else if (miss.carrier.kind == CarrierKind::wall) {
            misses_.walls.insert(miss.carrier.index);
        }
        if (!draft_.problems.has_room(ProblemCode::near_miss)) {
            draft_.problems.add(ProblemCode::near_miss, [] { return Problem{}; }); // counted, not listed
            return;
        }
        const std::string end_name = from_end ? "`from` end" : "`to` end";
        std::string miss_text = length_text(miss.near.distance, draft_.plan.units);
        miss_text += (short_of ? " short of " : " beside ") + on + " at " + place_text(draft_.plan, end);
        std::string& known = misses_.by_member[m];
        known += (known.empty() ? "Its " : " Its ") + end_name + " is " + miss_text + '.';
        draft_.problems.add(ProblemCode::near_miss, [&] {
            const std::string id = label_of(draft_, m);
            return member_problem(draft_, ProblemCode::near_miss, m,
                                  "The " + end_name + " of " + id + " is " + miss_text +
                                      "; points are one within snap (" +
                                      length_text(draft_.tolerance.snap, draft_.plan.units) + ") only.",
                                  "To bear on " + on + ", end at " + place_text(draft_.plan, miss.near.at) +
                                      ", or set a larger snap.",
                                  {id, on}, end);
        });
    }

    LevelDraft& draft_;
    double limit_;
    NearMisses misses_;
    std::vector<std::uint32_t> found_;
};

} // namespace

NearMisses find_near_misses(LevelDraft& draft) {
    return EndWatcher(draft).run();
}

RUNNEL_NAMESPACE_END
