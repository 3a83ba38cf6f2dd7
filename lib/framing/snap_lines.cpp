#include "framing/snap.hpp"

#include <numeric>

RUNNEL_NAMESPACE_BEGIN

Point move_towards(Point target, Point drawn, double snap) {
    const double far = distance(drawn, target);
    return far <= snap ? target : between(drawn, target, snap / far);
}

namespace {

/// Ends are numbered 2 * line for `from`, 2 * line + 1 for `to`.
struct EndPlan {
    enum class Kind : std::uint8_t { stays, joins_point, joins_end, joins_axis };
    Kind kind = Kind::stays;
    std::uint32_t target = none; ///< an end, or an element with an axis
    Point point;                 ///< of a column or a wall's end
};

/// Settles where every end goes, carriers before what hangs on them.
class EndSnapper {
public:
    explicit EndSnapper(LevelDraft& draft)
        : draft_(draft), ends_(2 * draft.lines.size()), state_(ends_.size(), State::open),
          settled_(ends_.size()), rank_(draft.lines.size()) {}

    void run() {
        rank_lines();
        for (const std::uint32_t line : by_rank_) {
            choose_point(2 * line);
            choose_point(2 * line + 1);
        }
        for (const std::uint32_t line : by_rank_) {
            choose_axis(2 * line);
            choose_axis(2 * line + 1);
        }
        for (const std::uint32_t line : by_rank_) {
            settle(2 * line);
            settle(2 * line + 1);
        }
        move_lines();
    }

private:
    enum class State : std::uint8_t { open, waiting, settled };

    [[nodiscard]] Point drawn(std::uint32_t end) const {
        const Axis& axis = draft_.lines[end / 2].axis;
        return end % 2 == 0 ? axis.from : axis.to;
    }

    /// Girders before beams before joists; members of the list by id, so that the order of the list does not
    /// matter; then fields in the order of the plan.
    void rank_lines() {
        by_rank_.resize(draft_.lines.size());
        std::iota(by_rank_.begin(), by_rank_.end(), 0U);
        const auto listed = std::partition_point(
            by_rank_.begin(), by_rank_.end(), [&](std::uint32_t i) { return draft_.lines[i].field == none; });
        std::sort(by_rank_.begin(), listed, [&](std::uint32_t a, std::uint32_t b) {
            const Line& x = draft_.lines[a];
            const Line& y = draft_.lines[b];
            return x.role != y.role
                       ? x.role > y.role
                       : draft_.lists.members[x.source].what->id < draft_.lists.members[y.source].what->id;
        });
        std::erase_if(by_rank_, [&](std::uint32_t i) { return !draft_.lines[i].usable; });
        for (std::uint32_t r = 0; r < by_rank_.size(); ++r) {
            rank_[by_rank_[r]] = r;
        }
    }

    /// The best point within reach for an end to join, by class and then by distance.
    struct Best {
        int rank = -1; ///< the higher the better
        double far = 0;
        EndPlan plan;

        void offer(int new_rank, double new_far, const EndPlan& new_plan) {
            if (new_rank > rank || (new_rank == rank && new_far < far)) {
                *this = {new_rank, new_far, new_plan};
            }
        }
    };
    enum : int { rank_of_role = 0, rank_of_wall = 10, rank_of_column = 11 };

    void choose_point(std::uint32_t end) {
        Best best;
        const Point at = drawn(end);
        const auto offer_point = [&](int rank, Point p) {
            const double far = distance(at, p);
            if (far <= draft_.reach()) {
                best.offer(rank, far, {EndPlan::Kind::joins_point, none, p});
            }
        };
        for (const std::uint32_t e : draft_.near[end / 2]) {
            if (draft_.elements.is_column(e)) {
                offer_point(rank_of_column, draft_.plan.columns[draft_.column_of(e)].at);
            } else if (draft_.elements.is_wall(e)) {
                const Wall& wall = draft_.plan.walls[draft_.wall_of(e)];
                offer_point(rank_of_wall, wall.from);
                offer_point(rank_of_wall, wall.to);
            } else if (draft_.lines[e].usable && rank_[e] < rank_[end / 2]) {
                offer_end(best, at, 2 * e);
                offer_end(best, at, 2 * e + 1);
            }
        }
        ends_[end] = best.plan;
    }

    /// Only an end that stays where it is, or moves onto an axis, is one to join.
    void offer_end(Best& best, Point at, std::uint32_t other) const {
        const double far = distance(at, drawn(other));
        if (far <= draft_.reach() && ends_[other].kind == EndPlan::Kind::stays) {
            best.offer(rank_of_role + static_cast<int>(draft_.lines[other / 2].role), far,
                       {EndPlan::Kind::joins_end, other, {}});
        }
    }

    void choose_axis(std::uint32_t end) {
        if (ends_[end].kind != EndPlan::Kind::stays) {
            return;
        }
        Best best;
        for (const std::uint32_t e : draft_.near[end / 2]) {
            if (draft_.elements.is_column(e) || (draft_.elements.is_line(e) && !draft_.lines[e].usable)) {
                continue;
            }
            const Axis axis = drawn_axis(e);
            const NearPoint near = nearest_on(axis, drawn(end));
            if (near.distance > draft_.reach() || axis.is_end(near.station, draft_.reach())) {
                continue;
            }
            const int rank = draft_.elements.is_wall(e)
                                 ? rank_of_wall
                                 : rank_of_role + static_cast<int>(draft_.lines[e].role);
            best.offer(rank, near.distance, {EndPlan::Kind::joins_axis, e, {}});
        }
        if (best.rank >= 0) {
            ends_[end] = best.plan;
        }
    }

    [[nodiscard]] Axis drawn_axis(std::uint32_t element) const {
        return draft_.elements.is_wall(element) ? draft_.wall_axis(draft_.wall_of(element))
                                                : draft_.lines[element].axis;
    }

    /// Settles an end after all that its place follows from. Where ends hang on each other in a ring, the one
    /// of highest rank goes by the axis as drawn.
    void settle(std::uint32_t first) {
        stack_.push_back(first);
        while (!stack_.empty()) {
            const std::uint32_t end = stack_.back();
            if (state_[end] == State::settled) {
                stack_.pop_back();
                continue;
            }
            if (state_[end] == State::open) {
                state_[end] = State::waiting;
                if (push_what_it_follows(end)) {
                    continue;
                }
            }
            settled_[end] = place_of(end);
            state_[end] = State::settled;
            stack_.pop_back();
        }
    }

    bool push_what_it_follows(std::uint32_t end) {
        const EndPlan& plan = ends_[end];
        const std::size_t before = stack_.size();
        const auto push = [&](std::uint32_t other) {
            if (state_[other] == State::open) {
                stack_.push_back(other);
            }
        };
        if (plan.kind == EndPlan::Kind::joins_end) {
            push(plan.target);
        } else if (plan.kind == EndPlan::Kind::joins_axis && draft_.elements.is_line(plan.target)) {
            push(2 * plan.target);
            push(2 * plan.target + 1);
        }
        return stack_.size() > before;
    }

    [[nodiscard]] Point so_far(std::uint32_t end) const {
        return state_[end] == State::settled ? settled_[end] : drawn(end);
    }

    [[nodiscard]] Point place_of(std::uint32_t end) const {
        const EndPlan& plan = ends_[end];
        const Point at = drawn(end);
        switch (plan.kind) {
        case EndPlan::Kind::stays:
            return at;
        case EndPlan::Kind::joins_point:
            return move_towards(plan.point, at, draft_.tolerance.snap);
        case EndPlan::Kind::joins_end:
            return move_towards(so_far(plan.target), at, draft_.tolerance.snap);
        case EndPlan::Kind::joins_axis:
            break;
        }
        const Axis axis = draft_.elements.is_wall(plan.target)
                              ? drawn_axis(plan.target)
                              : Axis(so_far(2 * plan.target), so_far(2 * plan.target + 1));
        const NearPoint near = nearest_on(axis, at);
        // A point on the axis but for rounding stays as it was drawn, to the bit.
        return near.distance <= draft_.tolerance.noise ? at
                                                       : move_towards(near.at, at, draft_.tolerance.snap);
    }

    void move_lines() {
        for (const std::uint32_t i : by_rank_) {
            Line& line = draft_.lines[i];
            const Point from = settled_[2 * i];
            const Point to = settled_[2 * i + 1];
            if (from == line.axis.from && to == line.axis.to) {
                continue;
            }
            draft_.count_move(line.axis.from, from);
            draft_.count_move(line.axis.to, to);
            line.axis = {from, to};
        }
    }

    LevelDraft& draft_;
    std::vector<EndPlan> ends_;
    std::vector<State> state_;
    std::vector<Point> settled_;
    std::vector<std::uint32_t> rank_;
    std::vector<std::uint32_t> by_rank_;
    std::vector<std::uint32_t> stack_;
};

} // namespace

void snap_lines(LevelDraft& draft) {
    EndSnapper(draft).run();
}

RUNNEL_NAMESPACE_END
