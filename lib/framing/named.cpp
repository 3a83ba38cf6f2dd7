#include "framing/named.hpp"

#include "framing/place.hpp"

#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

namespace {

using Names = std::unordered_map<std::string_view, Carrier>;

/// All names of carriers at this level; made only where a list asks for it.
Names names_of(const LevelDraft& draft) {
    Names names;
    for (std::uint32_t i = 0; i < draft.level.members.size(); ++i) {
        names.emplace(draft.level.members[i].id, Carrier{CarrierKind::member, i});
    }
    for (std::uint32_t i = 0; i < draft.plan.columns.size(); ++i) {
        names.emplace(draft.plan.columns[i].id, Carrier{CarrierKind::column, i});
    }
    for (std::uint32_t i = 0; i < draft.plan.walls.size(); ++i) {
        names.emplace(draft.plan.walls[i].id, Carrier{CarrierKind::wall, i});
    }
    return names;
}

/// "LEVEL/ID" is understood where the level is this one, or one that it repeats.
std::string_view without_level(std::string_view name, const LevelDraft& draft) {
    const std::size_t slash = name.find('/');
    if (slash == std::string_view::npos) {
        return name;
    }
    const std::string_view level = name.substr(0, slash);
    const std::vector<Level>& levels = draft.plan.levels;
    const Level* here = &levels[draft.level.plan_level];
    for (std::size_t steps = 0; here != nullptr && steps <= levels.size(); ++steps) {
        if (here->id == level) {
            return name.substr(slash + 1);
        }
        const auto next = std::find_if(levels.begin(), levels.end(),
                                       [here](const Level& other) { return other.id == here->like; });
        here = here->like.empty() || next == levels.end() ? nullptr : &*next;
    }
    return name;
}

bool stands_here(const FramedLevel& level, Carrier carrier) {
    switch (carrier.kind) {
    case CarrierKind::member:
        return true;
    case CarrierKind::column:
        return std::binary_search(level.columns.begin(), level.columns.end(), carrier.index);
    case CarrierKind::wall:
        return std::binary_search(level.walls.begin(), level.walls.end(), carrier.index);
    }
    return false;
}

std::string place_in_list(std::uint32_t place) {
    return "/bears_on/" + std::to_string(place);
}

} // namespace

NamedCarriers::NamedCarriers(LevelDraft& draft) : draft_(draft), list_of_(draft.level.members.size(), none) {
    for (std::uint32_t m = 0; m < draft.level.members.size(); ++m) {
        const Line& line = draft.lines[draft.line_of[m]];
        if (line.field != none) {
            break; // joists of fields come last and have no lists
        }
        if (!draft.lists.members[line.source].what->bears_on.empty()) {
            list_of_[m] = static_cast<std::uint32_t>(lists_.size());
            lists_.push_back({m, {}});
        }
    }
    if (lists_.empty()) {
        return;
    }
    const Names names = names_of(draft);
    for (List& list : lists_) {
        const Listed<Member>& member = draft.lists.members[draft.lines[draft.line_of[list.member]].source];
        for (std::uint32_t i = 0; i < member.what->bears_on.size(); ++i) {
            const std::string& name = member.what->bears_on[i];
            const auto found = names.find(without_level(name, draft));
            if (found == names.end()) {
                draft.problems.add(ProblemCode::unknown_id, [&] {
                    return problem_inside(ProblemCode::unknown_id, member.origin, "members", place_in_list(i),
                                          label_of(draft, list.member) + " bears on " + name +
                                              ", but level " + draft.level.id + " has no such carrier.",
                                          {}, {label_of(draft, list.member), name});
                });
            } else {
                list.named.push_back({found->second, i, false});
            }
        }
    }
}

bool NamedCarriers::names(std::uint32_t member, Carrier carrier) const {
    if (!has_list(member)) {
        return false;
    }
    const std::vector<Named>& named = lists_[list_of_[member]].named;
    return std::any_of(named.begin(), named.end(), [&](const Named& n) { return n.carrier == carrier; });
}

void NamedCarriers::mark_touched(std::uint32_t member, Carrier carrier) {
    if (has_list(member)) {
        for (Named& named : lists_[list_of_[member]].named) {
            named.touched = named.touched || named.carrier == carrier;
        }
    }
}

void NamedCarriers::refuse_untouched() const {
    for (const List& list : lists_) {
        const Axis axis = draft_.axis_of(list.member);
        const FramedMember& member = draft_.level.members[list.member];
        for (const Named& named : list.named) {
            const Carrier carrier = named.carrier;
            const bool here = stands_here(draft_.level, carrier);
            const Axis other =
                carrier.kind == CarrierKind::member ? draft_.axis_of(carrier.index)
                : carrier.kind == CarrierKind::wall
                    ? draft_.wall_axis(carrier.index)
                    : Axis(draft_.plan.columns[carrier.index].at, draft_.plan.columns[carrier.index].at);
            const Gap gap = gap_between(axis, other);
            if (named.touched || (here && gap.distance <= draft_.reach())) {
                continue; // what lies along it has been refused already
            }
            draft_.problems.add(ProblemCode::bears_on_too_far, [&] {
                const std::string id = label_of(draft_, list.member);
                const std::string on = label_of(draft_, carrier);
                const std::string message =
                    here ? id + " bears on " + on + ", but " + on + " is " +
                               length_text(gap.distance, draft_.plan.units) + " away from it at " +
                               place_text(draft_.plan, gap.at) + "; the limit is snap (" +
                               length_text(draft_.tolerance.snap, draft_.plan.units) + ")."
                         : id + " bears on " + on + ", but " + on + " does not reach level " +
                               draft_.level.id + " from below.";
                Problem problem =
                    problem_inside(ProblemCode::bears_on_too_far, member.origin, "members",
                                   place_in_list(named.place), message,
                                   here ? "Draw the two so that they meet, or name another carrier."
                                        : "Check the base and top of " + on + ", or name another carrier.",
                                   {id, on});
                problem.point = gap.at;
                return problem;
            });
        }
    }
}

RUNNEL_NAMESPACE_END
