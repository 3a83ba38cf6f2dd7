#include "deck/doubtful.hpp"

#include "geometry/basic.hpp"
#include "geometry/box_tree.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t named_at_most = 12;

bool is_inside(Point p, const Ring& ring) {
    bool inside = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (b.x - a.x) * ((p.y - a.y) / (b.y - a.y))) {
            inside = !inside;
        }
    }
    return inside;
}

/// Length of a member inside a ring: where it crosses the edges, and which of the stretches between lie
/// inside. A stretch within `snap` of an edge runs along it.
double length_inside(const FramedMember& member, const Ring& ring, double snap) {
    std::vector<double> cuts{0, 1};
    const Point d = member.to - member.from;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point e = ring[(i + 1) % ring.size()] - a;
        const double along = cross(d, e);
        if (along != 0) {
            cuts.push_back(std::clamp(cross(a - member.from, e) / along, 0.0, 1.0));
        }
    }
    std::sort(cuts.begin(), cuts.end());
    double length = 0;
    for (std::size_t k = 0; k + 1 < cuts.size(); ++k) {
        const Point middle = between(member.from, member.to, (cuts[k] + cuts[k + 1]) / 2);
        bool beside_edge = false;
        for (std::size_t i = 0; i < ring.size() && !beside_edge; ++i) {
            beside_edge = distance_to_segment(middle, ring[i], ring[(i + 1) % ring.size()]) <= snap;
        }
        if (!beside_edge && is_inside(middle, ring)) {
            length += (cuts[k + 1] - cuts[k]) * member.length;
        }
    }
    return length;
}

std::string listed(const std::vector<std::string>& ids, std::size_t count) {
    std::string text;
    for (std::size_t i = 0; i < ids.size(); ++i) {
        text += (i > 0 ? ", " : "") + ids[i];
    }
    return count > ids.size() ? text + ", ..." : text;
}

/// Which members get anything from any deck.
std::vector<bool> loaded_members(const Sharing& sharing) {
    std::vector<bool> loaded(sharing.members, false);
    for (const Transfer& transfer : sharing.transfers.items()) {
        if (transfer.carrier < sharing.members) {
            loaded[transfer.carrier] = true;
        }
    }
    return loaded;
}

void warn_of_idle_joists(const FramedLevel& level, std::uint32_t deck_index,
                         std::span<const std::uint32_t> near, const std::vector<bool>& loaded,
                         Sharing& sharing) {
    const FramedDeck& deck = level.decks[deck_index];
    std::vector<std::string> ids;
    std::size_t count = 0;
    Point place;
    for (const std::uint32_t m : near) {
        const FramedMember& member = level.members[m];
        const Point middle = between(member.from, member.to, 0.5);
        if (member.role != Role::joist || !member.carries_deck || loaded[m] ||
            !is_inside(middle, deck.outline)) {
            continue;
        }
        if (count++ == 0) {
            place = middle;
        }
        if (ids.size() < named_at_most) {
            ids.push_back(member.id);
        }
    }
    if (count == 0) {
        return;
    }
    const std::string names = listed(ids, count);
    ids.insert(ids.begin(), deck.id);
    Problem problem =
        problem_at(ProblemCode::carries_nothing, deck.origin, "decks",
                   "Level " + level.id + ", deck " + deck.id + ": " + std::to_string(count) +
                       (count == 1 ? " joist carries" : " joists carry") +
                       " nothing of it, since it spans along them: " + names + '.',
                   "Turn `direction` across the joists, or say \"carries_deck\": false of them.", ids);
    problem.point = place;
    sharing.problems.push_back(std::move(problem));
}

void warn_of_crossings(const Plan& plan, const FramedLevel& level, std::uint32_t deck_index,
                       std::span<const std::uint32_t> near, Sharing& sharing) {
    const FramedDeck& deck = level.decks[deck_index];
    for (std::size_t o = 0; o < deck.openings.size(); ++o) {
        const Box box = box_of(deck.openings[o]);
        for (const std::uint32_t m : near) {
            const FramedMember& member = level.members[m];
            if (!member.carries_deck || !box_of(member.from, member.to).meets(box)) {
                continue;
            }
            const double length = length_inside(member, deck.openings[o], plan.settings.snap);
            if (length <= plan.settings.snap) {
                continue;
            }
            Problem problem = problem_at(
                ProblemCode::crosses_opening, deck.origin, "decks",
                "Level " + level.id + ", deck " + deck.id + ": " + member.id + " runs across its opening " +
                    std::to_string(o) + " for " + length_text(length, plan.units) + '.',
                "Trim the opening: members along its edges, and joists cut at them (`cut`).",
                {deck.id, member.id});
            problem.point = deck.openings[o].front();
            sharing.problems.push_back(std::move(problem));
        }
    }
}

} // namespace

void find_doubtful_members(const Plan& plan, const FramedLevel& level, Sharing& sharing) {
    const std::vector<bool> loaded = loaded_members(sharing);
    std::vector<Box> boxes;
    boxes.reserve(level.members.size());
    bool any_idle = false;
    for (std::uint32_t m = 0; m < level.members.size(); ++m) {
        boxes.push_back(box_of(level.members[m].from, level.members[m].to));
        any_idle =
            any_idle || (level.members[m].role == Role::joist && level.members[m].carries_deck && !loaded[m]);
    }
    const bool any_opening = std::any_of(level.decks.begin(), level.decks.end(),
                                         [](const FramedDeck& deck) { return !deck.openings.empty(); });
    if (!any_idle && !any_opening) {
        return;
    }
    const BoxTree tree(boxes);
    std::vector<std::uint32_t> near;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        if (level.decks[d].span != SpanKind::one_way || (!any_idle && level.decks[d].openings.empty())) {
            continue;
        }
        tree.find(box_of(level.decks[d].outline), near);
        warn_of_idle_joists(level, d, near, loaded, sharing);
        warn_of_crossings(plan, level, d, near, sharing);
    }
}

RUNNEL_NAMESPACE_END
