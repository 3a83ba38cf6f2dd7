#include "framing/bearings.hpp"
#include "framing/contacts.hpp"
#include "framing/draft.hpp"
#include "framing/expand.hpp"
#include "framing/feet.hpp"
#include "framing/lifts.hpp"
#include "framing/lines.hpp"
#include "framing/members.hpp"
#include "framing/near_miss.hpp"
#include "framing/order.hpp"
#include "framing/overlap.hpp"
#include "framing/snap.hpp"
#include "framing/stability.hpp"

#include <runnel/framing.hpp>

RUNNEL_NAMESPACE_BEGIN

namespace {

void start_level(LevelDraft& draft, std::uint32_t number) {
    const Level& given = draft.plan.levels[number];
    draft.level.id = given.id;
    draft.level.elevation = given.elevation;
    draft.level.plan_level = number;
    draft.level.area_loads = std::move(draft.lists.area_loads);
    draft.level.line_loads = std::move(draft.lists.line_loads);
    draft.level.point_loads = std::move(draft.lists.point_loads);
    set_supports(draft.plan, draft.framing, draft.level);
}

/// A joist's id may read like one that the plan gave: "J.2" beside a field J. Ids without a dot cannot.
void refuse_taken_ids(LevelDraft& draft) {
    const auto has_dot = [](const std::string& id) { return id.find('.') != std::string::npos; };
    bool any = false;
    std::unordered_set<std::string_view> taken;
    for (const std::uint32_t c : draft.level.columns) {
        taken.insert(draft.plan.columns[c].id);
        any = any || has_dot(draft.plan.columns[c].id);
    }
    for (const std::uint32_t w : draft.level.walls) {
        taken.insert(draft.plan.walls[w].id);
        any = any || has_dot(draft.plan.walls[w].id);
    }
    for (const Listed<Member>& member : draft.lists.members) {
        any = any || has_dot(member.what->id);
    }
    for (const Listed<JoistField>& field : draft.lists.joist_fields) {
        any = any || has_dot(field.what->id);
    }
    for (std::uint32_t m = 0; any && m < draft.level.members.size(); ++m) {
        const FramedMember& member = draft.level.members[m];
        if (!taken.insert(member.id).second && member.from_field) {
            draft.problems.add(ProblemCode::duplicate_id, [&] {
                return member_problem(draft, ProblemCode::duplicate_id, m,
                                      "Level " + draft.level.id + ": the joist " + member.id +
                                          " of this field has the id of another carrier.",
                                      "Give that carrier or the field another id.", {member.id}, member.from);
            });
        }
    }
}

/// One floor, from the plan's lists to bearings and order. `room`: how many members the plan may still have.
void frame_level(LevelDraft& draft, std::uint32_t number, std::size_t& room) {
    start_level(draft, number);

    draw_members(draft);
    lay_joists(draft, room);

    find_surroundings(draft);
    snap_lines(draft);
    refuse_short_lines(draft);
    snap_decks(draft);
    refuse_overlaps(draft);

    make_members(draft, room);
    refuse_taken_ids(draft);
    node_decks(draft);
    note_moves(draft);

    find_bearings(draft, find_contacts(draft));
    set_fixity(draft);
    find_feet(draft);

    const NearMisses near_misses = find_near_misses(draft);
    find_idle_supports(draft, near_misses);
    check_stability(draft, near_misses);
    note_continuous(draft);

    order_load_path(draft);
}

/// Ids that more than one level uses: messages then say LEVEL/ID.
std::unordered_set<std::string_view> ids_on_several_levels(const std::vector<LevelLists>& lists) {
    std::unordered_set<std::string_view> seen;
    std::unordered_set<std::string_view> repeated;
    const auto see = [&](const std::string& id) {
        if (!seen.insert(id).second) {
            repeated.insert(id);
        }
    };
    if (lists.size() > 1) {
        for (const LevelLists& level : lists) {
            for (const Listed<Member>& member : level.members) {
                see(member.what->id);
            }
            for (const Listed<JoistField>& field : level.joist_fields) {
                see(field.what->id);
            }
        }
    }
    return repeated;
}

} // namespace

Framing frame_plan(const Plan& plan, const Limits& limits) {
    Framing framing;
    framing.largest_coordinate = largest_coordinate_of(plan);
    set_lifts(plan, framing);

    std::vector<LevelLists> lists = expand_levels(plan);
    const std::unordered_set<std::string_view> repeated_ids = ids_on_several_levels(lists);
    const Tolerance tolerance{noise_of(framing.largest_coordinate), plan.settings.snap};
    ProblemList problems(limits.problems);
    refuse_twin_columns(plan, framing, problems);
    std::size_t room = limits.members;
    for (const LevelLists& level : lists) {
        room -= std::min(room, level.members.size());
    }
    for (std::uint32_t i = 0; i < plan.levels.size(); ++i) {
        LevelDraft draft(plan, framing, std::move(lists[i]), tolerance, problems);
        draft.repeated_ids = &repeated_ids;
        frame_level(draft, i, room);
        framing.levels.push_back(std::move(draft.level));
    }
    framing.problems = problems.take();
    return framing;
}

RUNNEL_NAMESPACE_END
