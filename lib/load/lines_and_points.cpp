#include "load/phases.hpp"

#include "deck/pressure.hpp"
#include "load/carrier_axes.hpp"
#include "load/standing.hpp"
#include "load/standing_nearest.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <cmath>
#include <span>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

class LoadPlacer {
public:
    LoadPlacer(const Plan& plan, const Framing& framing, std::uint32_t level, const Sharing& sharing,
               Collector& collector)
        : plan_(plan), level_(framing.levels[level]), sharing_(sharing), collector_(collector),
          parts_(level_, sharing), cells_(level_, sharing), axes_(plan, level_, sharing),
          columns_(boxes_of_columns()) {}

    void place_lines() {
        for (std::uint32_t i = 0; i < level_.line_loads.size(); ++i) {
            const LineLoad& load = level_.line_loads[i];
            const double length = distance(load.from, load.to);
            const double force = length * (load.w_from + load.w_to) / 2;
            const Point moment =
                length / 6 *
                ((2 * load.w_from + load.w_to) * load.from + (load.w_from + 2 * load.w_to) * load.to);
            const LinePiece whole{0, length, {load.w_from, (load.w_to - load.w_from) / length, 0, 0, 0}};
            collector_.applied(none, case_index(plan_, load.case_id), force, moment, magnitude_of(whole));
            if (load.on.empty()) {
                place_standing(i);
            } else {
                place_on(i);
            }
        }
    }

    void place_points() {
        for (std::uint32_t i = 0; i < level_.point_loads.size(); ++i) {
            const PointLoad& load = level_.point_loads[i];
            collector_.applied(none, case_index(plan_, load.case_id), load.p, load.p * load.at,
                               std::abs(load.p));
            if (load.on.empty()) {
                place_standing_point(i);
            } else {
                place_point_on(i);
            }
        }
    }

private:
    [[nodiscard]] std::vector<Box> boxes_of_columns() const {
        std::vector<Box> boxes;
        boxes.reserve(level_.columns.size());
        for (const std::uint32_t c : level_.columns) {
            boxes.push_back(box_of(plan_.columns[c].at, plan_.columns[c].at));
        }
        return boxes;
    }

    [[nodiscard]] double snap() const { return plan_.settings.snap; }

    /// "Level L, line_loads[2]".
    [[nodiscard]] std::string name(const char* list, std::uint32_t i) const {
        return "Level " + level_.id + ", " + list + '[' + std::to_string(i) + ']';
    }

    /// Puts a stretch of a line straight on an axis: force and place are kept, what stands beside is moved
    /// square on to it.
    void put_along(const CarrierAxis& axis, const LineLoad& load, std::uint32_t index, Interval t) {
        const Point a = between(load.from, load.to, t.from);
        const Point b = between(load.from, load.to, t.to);
        const double w_a = (1 - t.from) * load.w_from + t.from * load.w_to;
        const double w_b = (1 - t.to) * load.w_from + t.to * load.w_to;
        double sa = std::clamp(station_of(a, axis.from, axis.to), 0.0, axis.length);
        double sb = std::clamp(station_of(b, axis.from, axis.to), 0.0, axis.length);
        const double length = distance(a, b);
        const std::uint32_t load_case = case_index(plan_, load.case_id);
        const Source source{SourceKind::line_load, index};
        if (std::abs(sb - sa) <= collector_.noise()) {
            collector_.put_point(axis.number, none,
                                 {load_case, source, (sa + sb) / 2, length * (w_a + w_b) / 2});
            return;
        }
        const double scale = length / std::abs(sb - sa);
        double start = w_a * scale;
        double end = w_b * scale;
        if (sb < sa) {
            std::swap(sa, sb);
            std::swap(start, end);
        }
        collector_.put_line(axis.number, none,
                            {load_case, source, {sa, sb, {start, (end - start) / (sb - sa), 0, 0, 0}}});
    }

    /// Takes `t` out of what is left, and hands the parts that were left to `put`.
    template <class Put>
    static void take(std::vector<Interval>& left, Interval t, double tolerance, Put put) {
        std::vector<Interval> rest;
        for (const Interval& open : left) {
            double from = std::max(open.from, t.from);
            double to = std::min(open.to, t.to);
            if (to - from <= tolerance) {
                rest.push_back(open);
                continue;
            }
            // Ends that differ by the tolerance alone are one end: nothing is left between neighbours.
            from = from - open.from <= tolerance ? open.from : from;
            to = open.to - to <= tolerance ? open.to : to;
            put(Interval{from, to});
            if (from > open.from) {
                rest.push_back({open.from, from});
            }
            if (to < open.to) {
                rest.push_back({to, open.to});
            }
        }
        left.swap(rest);
    }

    void take_along_axes(const LineLoad& load, std::uint32_t index, std::vector<Interval>& left) {
        const double tolerance = collector_.noise() / distance(load.from, load.to);
        axes_.find(box_of(load.from, load.to).grown(snap()), near_);
        for (const std::uint32_t i : near_) {
            if (const auto t = stretch_along(axes_[i], load.from, load.to, snap())) {
                take(left, *t, tolerance, [&](Interval part) { put_along(axes_[i], load, index, part); });
            }
        }
    }

    /// The parts of one-way decks and the cells of others that a line runs over.
    struct Under {
        std::vector<DeckPartFinder::Hit> parts;
        std::vector<CellFinder::Hit> cells;
    };
    [[nodiscard]] Under what_lies_under(const LineLoad& load, double margin) {
        return {parts_.over(load.from, load.to, margin), cells_.over(load.from, load.to, margin)};
    }

    /// Borders of neighbouring parts or cells differ by rounding; a stretch of that size, by fractions of the
    /// line, belongs to either.
    [[nodiscard]] double tolerance_on(const LineLoad& load) const {
        return 4 * collector_.noise() / distance(load.from, load.to);
    }

    void take_over(const Under& under, const LineLoad& load, std::uint32_t index,
                   std::vector<Interval>& left) {
        const double tolerance = tolerance_on(load);
        const std::uint32_t load_case = case_index(plan_, load.case_id);
        const Source source{SourceKind::line_load, index};
        const auto at = [&load](double t) { return between(load.from, load.to, t); };
        const auto w = [&load](double t) { return (1 - t) * load.w_from + t * load.w_to; };
        for (const DeckPartFinder::Hit& hit : under.parts) {
            take(left, {hit.from, hit.to}, tolerance, [&](Interval t) {
                share_line(sharing_, hit.part, at(t.from), at(t.to), w(t.from), w(t.to), snap(), load_case,
                           source, collector_);
            });
        }
        for (const CellFinder::Hit& hit : under.cells) {
            take(left, {hit.from, hit.to}, tolerance, [&](Interval t) {
                put_line_on_cell(sharing_, hit.cell, at(t.from), at(t.to), w(t.from), w(t.to), snap(),
                                 load_case, source, collector_);
            });
        }
    }

    /// Whether parts and cells cover all that is left.
    [[nodiscard]] bool cover(const Under& under, const LineLoad& load, std::vector<Interval> left) const {
        const double tolerance = tolerance_on(load);
        for (const DeckPartFinder::Hit& hit : under.parts) {
            take(left, {hit.from, hit.to}, tolerance, [](Interval) {});
        }
        for (const CellFinder::Hit& hit : under.cells) {
            take(left, {hit.from, hit.to}, tolerance, [](Interval) {});
        }
        return left.empty();
    }

    void place_standing(std::uint32_t index) {
        const LineLoad& load = level_.line_loads[index];
        std::vector<Interval> left{{0, 1}};
        take_along_axes(load, index, left);
        if (!left.empty()) {
            take_over(what_lies_under(load, collector_.noise()), load, index, left);
        }
        if (!left.empty()) {
            // What is drawn beside the deck by no more than `snap` stands on it.
            const Under under = what_lies_under(load, snap());
            if (cover(under, load, left)) {
                take_over(under, load, index, left);
            }
        }
        double off = 0;
        for (const Interval& t : left) {
            off += t.to - t.from;
        }
        if (off > 0) {
            const Point place = between(load.from, load.to, (left.front().from + left.front().to) / 2);
            const double length = distance(load.from, load.to);
            Problem problem =
                problem_at(ProblemCode::load_off_decks, load.origin, "line_loads",
                           name("line_loads", index) + " (" + load.case_id +
                               "): " + length_text(off * length, plan_.units) + " of its " +
                               length_text(length, plan_.units) + " stand on no deck, around " +
                               point_text(place, plan_.units) + '.',
                           "End it at the deck's edge, or name the member or wall it stands on with `on`.");
            problem.point = place;
            collector_.problems.push_back(std::move(problem));
        }
    }

    void refuse_on(const Origin& origin, const char* list, std::uint32_t index, const std::string& on) {
        collector_.problems.push_back(problem_inside(ProblemCode::unknown_id, origin, list, "/on",
                                                     name(list, index) + " stands `on` " + on +
                                                         ", which is no member or wall of this level.",
                                                     {}, {on}));
    }

    /// How far a load named `on` an axis reaches past its ends and stands beside it; says so where it
    /// matters.
    bool fits(const CarrierAxis& axis, std::initializer_list<Point> points, const Origin& origin,
              const char* list, std::uint32_t index) {
        double past = 0;
        double beside = 0;
        for (const Point& p : points) {
            const double s = station_of(p, axis.from, axis.to);
            past = std::max({past, -s, s - axis.length});
            beside = std::max(beside, distance(p, between(axis.from, axis.to, s / axis.length)));
        }
        const std::string subject = name(list, index) + " stands `on` " + std::string(axis.id);
        if (past > snap()) {
            Problem problem =
                problem_at(ProblemCode::load_beyond_its_carrier, origin, list,
                           subject + " but reaches " + length_text(past, plan_.units) +
                               " past its end (limit: `snap`, " + length_text(snap(), plan_.units) + ").",
                           "Shorten the load or lengthen its carrier.", {std::string(axis.id)});
            problem.point = *points.begin();
            collector_.problems.push_back(std::move(problem));
            return false;
        }
        if (beside > snap()) {
            Problem problem = problem_at(
                ProblemCode::load_off_its_carrier, origin, list,
                subject + " but lies " + length_text(beside, plan_.units) +
                    " beside its axis; it is put on the axis, and what that turns is left out.",
                "Right if the load hangs on the member's side; else check the id.", {std::string(axis.id)});
            problem.point = *points.begin();
            collector_.problems.push_back(std::move(problem));
        }
        return true;
    }

    void place_on(std::uint32_t index) {
        const LineLoad& load = level_.line_loads[index];
        const CarrierAxis* axis = axes_.named(load.on);
        if (axis == nullptr) {
            refuse_on(load.origin, "line_loads", index, load.on);
        } else if (fits(*axis, {load.from, load.to}, load.origin, "line_loads", index)) {
            put_along(*axis, load, index, {0, 1});
        }
    }

    void place_point_on(std::uint32_t index) {
        const PointLoad& load = level_.point_loads[index];
        const CarrierAxis* axis = axes_.named(load.on);
        if (axis == nullptr) {
            refuse_on(load.origin, "point_loads", index, load.on);
        } else if (fits(*axis, {load.at}, load.origin, "point_loads", index)) {
            put_point_on(*axis, load, index);
        }
    }

    void put_point_on(const CarrierAxis& axis, const PointLoad& load, std::uint32_t index) {
        const double station = std::clamp(station_of(load.at, axis.from, axis.to), 0.0, axis.length);
        collector_.put_point(
            axis.number, none,
            {case_index(plan_, load.case_id), {SourceKind::point_load, index}, station, load.p});
    }

    /// A column, wall or member at the point, in this order; of members the lowest role, since a deck lies on
    /// it.
    bool place_on_what_is_there(std::uint32_t index) {
        const PointLoad& load = level_.point_loads[index];
        columns_.find(box_of(load.at, load.at).grown(snap()), near_);
        for (const std::uint32_t i : near_) {
            const std::uint32_t c = level_.columns[i];
            if (distance(plan_.columns[c].at, load.at) <= snap()) {
                collector_.put_point(
                    sharing_.number_of({CarrierKind::column, c}), none,
                    {case_index(plan_, load.case_id), {SourceKind::point_load, index}, 0, load.p});
                return true;
            }
        }
        axes_.find(box_of(load.at, load.at).grown(snap()), near_);
        const CarrierAxis* best = nullptr;
        for (const std::uint32_t i : near_) {
            const CarrierAxis& axis = axes_[i];
            if (distance_to_segment(load.at, axis.from, axis.to) > snap()) {
                continue;
            }
            if (best == nullptr || (axis.wall && !best->wall) || (!best->wall && axis.role < best->role)) {
                best = &axis;
            }
        }
        if (best != nullptr) {
            put_point_on(*best, load, index);
        }
        return best != nullptr;
    }

    void place_standing_point(std::uint32_t index) {
        const PointLoad& load = level_.point_loads[index];
        if (place_on_what_is_there(index)) {
            return;
        }
        const std::uint32_t load_case = case_index(plan_, load.case_id);
        const Source source{SourceKind::point_load, index};
        for (const double margin : {collector_.noise(), snap()}) {
            if (const std::optional<DeckPart> part = parts_.under(load.at, margin)) {
                share_point(sharing_, *part, load.at, load.p, load_case, source, collector_);
                return;
            }
            if (const std::uint32_t cell = cells_.under(load.at, margin); cell != none) {
                put_point_on_cell(sharing_, cell, load.at, load.p, load_case, source, collector_);
                return;
            }
        }
        Problem problem =
            problem_at(ProblemCode::load_off_decks, load.origin, "point_loads",
                       name("point_loads", index) + " (" + load.case_id + ") at " +
                           point_text(load.at, plan_.units) + " stands on no deck.",
                       "Move it on to a deck, or name the member or wall it stands on with `on`.");
        problem.point = load.at;
        collector_.problems.push_back(std::move(problem));
    }

    const Plan& plan_;
    const FramedLevel& level_;
    const Sharing& sharing_;
    Collector& collector_;
    DeckPartFinder parts_;
    CellFinder cells_;
    CarrierAxes axes_;
    BoxFinder columns_; ///< by their place in the level's list
    std::vector<std::uint32_t> near_;
};

} // namespace

void load_lines_and_points(const Plan& plan, const Framing& framing, std::uint32_t level,
                           const Sharing& sharing, Collector& collector) {
    if (framing.levels[level].line_loads.empty() && framing.levels[level].point_loads.empty()) {
        return;
    }
    LoadPlacer placer(plan, framing, level, sharing, collector);
    placer.place_lines();
    placer.place_points();
}

RUNNEL_NAMESPACE_END
