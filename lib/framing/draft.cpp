#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

Surroundings::Surroundings(const std::vector<Axis>& axes, Point along, double reach) : along_(along) {
    if (!axes.empty()) {
        origin_ = axes.front().from;
    }
    std::vector<Box> boxes;
    boxes.reserve(axes.size());
    for (const Axis& axis : axes) {
        boxes.push_back(box_around(axis.from, axis.to, reach));
    }
    index_ = BoxIndex(boxes);
}

Point Surroundings::turned(Point p) const {
    const Point d = p - origin_;
    return {dot(d, along_), cross(along_, d)};
}

Box Surroundings::box_around(Point a, Point b, double reach) const {
    return Box::around(turned(a), turned(b), reach);
}

void Surroundings::find(Point a, Point b, double reach, std::vector<std::uint32_t>& found) const {
    index_.find(box_around(a, b, reach), found);
}

std::pair<std::uint32_t, std::uint32_t> LevelDraft::members_near(std::uint32_t line, Point a, Point b,
                                                                 double distance) const {
    const std::uint32_t first = first_member[line];
    const std::uint32_t last = first_member[line + 1];
    if (last - first < 2) {
        return {first, last};
    }
    // Pieces stand in order along their line, so that stations on it tell which of them can be near. A piece
    // may lie off its line's stations by snap.
    const Axis& axis = lines[line].axis;
    const double station_a = station_of(a, axis.from, axis.to);
    const double station_b = station_of(b, axis.from, axis.to);
    const double low = std::min(station_a, station_b) - distance - reach();
    const double high = std::max(station_a, station_b) + distance + reach();
    const auto members = level.members.begin();
    const auto begin = std::partition_point(members + first, members + last, [&](const FramedMember& m) {
        return station_of(m.to, axis.from, axis.to) < low;
    });
    const auto end = std::partition_point(begin, members + last, [&](const FramedMember& m) {
        return station_of(m.from, axis.from, axis.to) <= high;
    });
    return {static_cast<std::uint32_t>(begin - members), static_cast<std::uint32_t>(end - members)};
}

namespace {
/// The id that the plan gave: that of the field for a generated joist.
std::string_view given_id(const LevelDraft& draft, std::uint32_t member) {
    const Line& line = draft.lines[draft.line_of[member]];
    return line.field == none ? draft.lists.members[line.source].what->id
                              : draft.lists.joist_fields[line.field].what->id;
}
} // namespace

std::string label_of(const LevelDraft& draft, std::uint32_t member) {
    const std::string& id = draft.level.members[member].id;
    return draft.repeated_ids && draft.repeated_ids->count(given_id(draft, member)) != 0
               ? draft.level.id + '/' + id
               : id;
}

std::string label_of(const LevelDraft& draft, Carrier carrier) {
    switch (carrier.kind) {
    case CarrierKind::member:
        return label_of(draft, carrier.index);
    case CarrierKind::column:
        return draft.plan.columns[carrier.index].id;
    case CarrierKind::wall:
        return draft.plan.walls[carrier.index].id;
    }
    return {};
}

Problem member_problem(const LevelDraft& draft, ProblemCode code, std::uint32_t member, std::string message,
                       std::string hint, std::vector<std::string> ids, Point point) {
    const FramedMember& m = draft.level.members[member];
    Problem problem = problem_at(code, m.origin, m.from_field ? "joist_fields" : "members",
                                 std::move(message), std::move(hint), std::move(ids));
    problem.point = point;
    return problem;
}

std::string counted(std::size_t count, std::string_view one, std::string_view many) {
    return std::to_string(count) + ' ' + std::string(count == 1 ? one : many);
}

std::string listed(const std::vector<std::string>& ids, std::size_t limit, std::size_t count) {
    const std::size_t all = std::max(count, ids.size());
    const std::size_t named = std::min(limit, ids.size());
    std::string text;
    for (std::size_t i = 0; i < named; ++i) {
        if (i > 0) {
            text += i + 1 == all ? " and " : ", ";
        }
        text += ids[i];
    }
    if (named < all) {
        text += " and " + std::to_string(all - named) + " more";
    }
    return text;
}

RUNNEL_NAMESPACE_END
