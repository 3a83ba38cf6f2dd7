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
