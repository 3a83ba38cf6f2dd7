#pragma once

#include "framing/expand.hpp"
#include "framing/problem_list.hpp"
#include "framing/touch.hpp"
#include "geometry/box_tree.hpp"

#include <runnel/framing.hpp>

#include <cstdint>
#include <string>
#include <string_view>
#include <unordered_set>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A member's axis while the level is in the making: a member of the list, or a joist of a field before it is
/// cut.
struct Line {
    Axis axis;
    std::uint32_t source = 0;   ///< index in the list of members, or the joist's number less one
    std::uint32_t field = none; ///< index in the list of joist fields; `none`: a member of the list
    Role role = Role::beam;
    bool usable = true; ///< false: its ends are one point
};

/// Lines, walls and columns of a level, numbered through in that order.
struct Elements {
    std::uint32_t lines = 0;
    std::uint32_t walls = 0;
    std::uint32_t columns = 0;

    [[nodiscard]] bool is_line(std::uint32_t e) const { return e < lines; }
    [[nodiscard]] bool is_wall(std::uint32_t e) const { return e >= lines && e < lines + walls; }
    [[nodiscard]] bool is_column(std::uint32_t e) const { return e >= lines + walls; }
    [[nodiscard]] std::uint32_t count() const { return lines + walls + columns; }
};

/// Elements by place. The box of a slanting line holds much that is not near the line. So boxes stand in axes
/// turned to the level's main direction, and a line that still slants (a girder askew to the joists) has its
/// box in pieces about as large as the typical element.
class Surroundings {
public:
    Surroundings() = default;
    /// Boxes reach `reach` beyond their elements.
    Surroundings(const std::vector<Axis>& axes, Point along, double reach);

    /// Elements whose boxes come within `reach` of the box around a and b, rising.
    void find(Point a, Point b, double reach, std::vector<std::uint32_t>& found) const;
    void find(Point p, double reach, std::vector<std::uint32_t>& found) const { find(p, p, reach, found); }
    [[nodiscard]] Box box_around(Point a, Point b, double reach) const;

private:
    [[nodiscard]] Point turned(Point p) const;
    [[nodiscard]] std::size_t pieces_of(Point a, Point b) const;

    Point origin_;
    Point along_{1, 0};
    double typical_ = 0;                  ///< length of an element, m
    std::vector<std::uint32_t> elements_; ///< by box
    BoxTree index_;
};

/// What all phases of a level work on.
struct LevelDraft {
    LevelDraft(const Plan& plan_, const Framing& framing_, LevelLists lists_, Tolerance tolerance_,
               ProblemList& problems_)
        : plan(plan_), framing(framing_), lists(std::move(lists_)), tolerance(tolerance_),
          problems(problems_) {}

    const Plan& plan;
    const Framing& framing; ///< with its lifts set
    LevelLists lists;
    Tolerance tolerance;
    ProblemList& problems;
    const std::unordered_set<std::string_view>* repeated_ids = nullptr; ///< ids that several levels use

    FramedLevel level; ///< in the making
    std::vector<Line> lines;
    Elements elements;
    Surroundings surroundings;
    Grouped<std::uint32_t> near; ///< by line: elements within a few `snap` of it, itself left out

    /// By line: its members, as first member and one past the last; a joist that lies along a girder has
    /// none.
    std::vector<std::uint32_t> first_member;
    std::vector<std::uint32_t> line_of; ///< by member

    std::size_t points_moved = 0; ///< by more than noise
    std::size_t edges_bent = 0;   ///< of decks, to points beside them
    double largest_move = 0;      ///< m

    /// `snap` with the noise of coordinates added: two points drawn exactly `snap` apart stay one point
    /// wherever the plan lies.
    [[nodiscard]] double reach() const { return tolerance.snap + tolerance.noise; }

    [[nodiscard]] std::uint32_t wall_of(std::uint32_t element) const {
        return level.walls[element - elements.lines];
    }
    [[nodiscard]] std::uint32_t column_of(std::uint32_t element) const {
        return level.columns[element - elements.lines - elements.walls];
    }
    [[nodiscard]] Axis wall_axis(std::uint32_t wall) const {
        return {plan.walls[wall].from, plan.walls[wall].to};
    }
    [[nodiscard]] Axis axis_of(std::uint32_t member) const {
        const FramedMember& m = level.members[member];
        return {m.from, m.to, m.length};
    }

    /// Where a carrier stands in the order of choice at one place, the higher the better: column, wall,
    /// member of the higher role.
    [[nodiscard]] int order_of_choice(Carrier carrier) const {
        constexpr int wall = 10;
        constexpr int column = 11;
        switch (carrier.kind) {
        case CarrierKind::column:
            return column;
        case CarrierKind::wall:
            return wall;
        case CarrierKind::member:
            return static_cast<int>(level.members[carrier.index].role);
        }
        return 0;
    }

    /// The members of a line that may come within `distance` of the axis from a to b, as first and one past
    /// the last: a joist that runs over a hundred girders has a hundred pieces, of which a girder meets two.
    [[nodiscard]] std::pair<std::uint32_t, std::uint32_t> members_near(std::uint32_t line, Point a, Point b,
                                                                       double distance) const;

    /// Keeps account of a point that snapping moved.
    void count_move(Point before, Point after) {
        const double move = distance(before, after);
        if (move > tolerance.noise) {
            ++points_moved;
            largest_move = std::max(largest_move, move);
        }
    }
    /// And of an edge that was bent to a point beside it.
    void count_bend(double by) {
        ++edges_bent;
        largest_move = std::max(largest_move, by);
    }
};

/// A problem of the level as a whole, at its place in the plan.
[[nodiscard]] Problem level_problem(const LevelDraft& draft, ProblemCode code, std::string message,
                                    std::string hint, std::vector<std::string> ids);

/// An id as messages give it: "LEVEL/ID" where several levels use it.
[[nodiscard]] std::string label_of(const LevelDraft& draft, std::uint32_t member);
[[nodiscard]] std::string label_of(const LevelDraft& draft, Carrier carrier);
/// A problem at a member, or at the field that a joist comes from.
[[nodiscard]] Problem member_problem(const LevelDraft& draft, ProblemCode code, std::uint32_t member,
                                     std::string message, std::string hint, std::vector<std::string> ids,
                                     Point point);

/// "1 member", "3 members".
[[nodiscard]] std::string counted(std::size_t count, std::string_view one, std::string_view many);
/// "A", "A and B", "A, B and C"; past `limit` "... and 7 more". `count`: how many there are, where not all
/// are in `ids`.
[[nodiscard]] std::string listed(const std::vector<std::string>& ids, std::size_t limit,
                                 std::size_t count = 0);

/// An end, column or wall that misses a carrier by at most this many times `snap` is taken as a near miss:
/// with the default of 5 mm, 0.1 m, about half the width of a member.
inline constexpr double snaps_of_a_near_miss = 20;

/// How many ids a sentence names before it counts the rest.
inline constexpr std::size_t ids_in_a_sentence = 20;

RUNNEL_NAMESPACE_END
