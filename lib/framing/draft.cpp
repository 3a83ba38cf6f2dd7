#include "framing/draft.hpp"

RUNNEL_NAMESPACE_BEGIN

Surroundings::Surroundings(const std::vector<Axis>& axes, Point along, double reach) : along_(along) {
    if (axes.empty()) {
        return;
    }
    origin_ = axes.front().from;
    Sum lengths;
    for (const Axis& axis : axes) {
        lengths.add(axis.length);
    }
    typical_ = lengths.value() / static_cast<double>(axes.size());
    std::vector<Box> boxes;
    boxes.reserve(axes.size());
    elements_.reserve(axes.size());
    for (std::uint32_t i = 0; i < axes.size(); ++i) {
        const std::size_t pieces = pieces_of(axes[i].from, axes[i].to);
        for (std::size_t k = 0; k < pieces; ++k) {
            const double from = static_cast<double>(k) / static_cast<double>(pieces);
            const double to = static_cast<double>(k + 1) / static_cast<double>(pieces);
            boxes.push_back(box_around(between(axes[i].from, axes[i].to, from),
                                       between(axes[i].from, axes[i].to, to), reach));
            elements_.push_back(i);
        }
    }
    index_ = BoxTree(boxes);
}

Point Surroundings::turned(Point p) const {
    const Point d = p - origin_;
    return {dot(d, along_), cross(along_, d)};
}

Box Surroundings::box_around(Point a, Point b, double reach) const {
    return box_of(turned(a), turned(b)).grown(reach);
}

/// Boxes of all elements together stay in proportion to the elements: the pieces of one are no more than its
/// length in typical lengths, and one.
std::size_t Surroundings::pieces_of(Point a, Point b) const {
    const Box box = box_around(a, b, 0);
    const double thickness = std::min(box.high.x - box.low.x, box.high.y - box.low.y);
    return typical_ > 0 ? static_cast<std::size_t>(thickness / typical_) + 1 : 1;
}

void Surroundings::find(Point a, Point b, double reach, std::vector<std::uint32_t>& found) const {
    const auto before = static_cast<std::ptrdiff_t>(found.size());
    const std::size_t pieces = pieces_of(a, b);
    for (std::size_t k = 0; k < pieces; ++k) {
        const double from = static_cast<double>(k) / static_cast<double>(pieces);
        const double to = static_cast<double>(k + 1) / static_cast<double>(pieces);
        index_.find_more(box_around(between(a, b, from), between(a, b, to), reach), found);
    }
    for (auto box = found.begin() + before; box != found.end(); ++box) {
        *box = elements_[*box];
    }
    if (found.size() > static_cast<std::size_t>(before) + 1) {
        std::sort(found.begin() + before, found.end());
        found.erase(std::unique(found.begin() + before, found.end()), found.end());
    }
}

namespace {

/// Stations on an axis between which the part of a to b that comes within `limit` of its line lies, widened
/// by `limit`; from > to where none does.
Stretch stations_beside(const Axis& axis, Point a, Point b, double limit) {
    const Point u = (1 / axis.length) * (axis.to - axis.from);
    const double off_a = cross(u, a - axis.from);
    const double off_b = cross(u, b - axis.from);
    double from = 0;
    double to = 1;
    if (off_a != off_b) {
        const double at_left = (limit - off_a) / (off_b - off_a);
        const double at_right = (-limit - off_a) / (off_b - off_a);
        from = std::max(from, std::min(at_left, at_right));
        to = std::min(to, std::max(at_left, at_right));
    }
    if (from > to || (off_a == off_b && std::abs(off_a) > limit)) {
        return {0, -1};
    }
    const double station_a = dot(a - axis.from, u);
    const double station_b = dot(b - axis.from, u);
    const double s = station_a + from * (station_b - station_a);
    const double t = station_a + to * (station_b - station_a);
    return {std::min(s, t) - limit, std::max(s, t) + limit};
}

} // namespace

std::pair<std::uint32_t, std::uint32_t> LevelDraft::members_near(std::uint32_t line, Point a, Point b,
                                                                 double distance) const {
    const std::uint32_t first = first_member[line];
    const std::uint32_t last = first_member[line + 1];
    if (last - first < 2) {
        return {first, last};
    }
    // Pieces stand in order along their line, so that stations on it tell which of them can be near. A piece
    // may lie off its line, and off its stations, by snap.
    const Axis& axis = lines[line].axis;
    const Stretch stations = stations_beside(axis, a, b, distance + reach());
    const auto members = level.members.begin();
    const auto begin = std::partition_point(members + first, members + last, [&](const FramedMember& m) {
        return station_of(m.to, axis.from, axis.to) < stations.from;
    });
    const auto end = std::partition_point(begin, members + last, [&](const FramedMember& m) {
        return station_of(m.from, axis.from, axis.to) <= stations.to;
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

Problem level_problem(const LevelDraft& draft, ProblemCode code, std::string message, std::string hint,
                      std::vector<std::string> ids) {
    Problem problem;
    problem.code = code;
    problem.severity = kind_of(code).severity;
    problem.message = std::move(message);
    problem.hint = std::move(hint);
    problem.ids = std::move(ids);
    const Origin& origin = draft.plan.levels[draft.level.plan_level].origin;
    problem.pointer = "/levels/" + std::to_string(draft.level.plan_level);
    problem.line = origin.line;
    problem.column = origin.column;
    return problem;
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
