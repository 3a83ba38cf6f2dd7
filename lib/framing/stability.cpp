#include "framing/stability.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A rigid piece has two ways to move, by its deflection and its turn. How many of them its bearings, and the
/// hinge on its left where that is held, take away.
struct PieceHold {
    int held = 0;       ///< 0, 1 or 2
    double station = 0; ///< where, if held at one station
};

PieceHold hold_of(const Stretch& piece, std::span<const Bearing> bearings, bool left_hinge_held,
                  double reach) {
    PieceHold hold;
    const auto hold_at = [&](double station) {
        if (hold.held == 0) {
            hold = {1, station};
        } else if (std::abs(station - hold.station) > reach) {
            hold.held = 2;
        }
    };
    if (left_hinge_held) {
        hold_at(piece.from);
    }
    for (const Bearing& bearing : bearings) {
        if (bearing.fixed) {
            hold.held = 2;
        }
        hold_at(bearing.station);
    }
    return hold;
}

} // namespace

FreeMotion free_motion(double length, std::span<const Bearing> bearings, std::span<const double> hinges,
                       double reach) {
    // From left to right over the rigid pieces. `hinge_moves`: whether the hinge on the left can still move
    // with what lies left of it; a piece then takes it along, or holds it.
    constexpr int ways_of_a_piece = 2;
    FreeMotion motion;
    bool hinge_moves = false;
    std::size_t next = 0;
    for (std::size_t i = 0; i <= hinges.size(); ++i) {
        const Stretch piece{i == 0 ? 0 : hinges[i - 1], i == hinges.size() ? length : hinges[i]};
        const std::size_t first = next;
        while (next < bearings.size() && (i == hinges.size() || bearings[next].station <= piece.to + reach)) {
            ++next;
        }
        const PieceHold hold =
            hold_of(piece, bearings.subspan(first, next - first), i > 0 && !hinge_moves, reach);
        const int ways = ways_of_a_piece - hold.held;
        motion.ways += ways - (hinge_moves ? 1 : 0);
        if (ways > 0) {
            motion.piece = piece;
        }
        hinge_moves = hold.held == 0 || (hold.held == 1 && std::abs(hold.station - piece.to) > reach);
    }
    return motion;
}

namespace {

const Member* listed_member(const LevelDraft& draft, std::uint32_t m) {
    const Line& line = draft.lines[draft.line_of[m]];
    return line.field == none ? draft.lists.members[line.source].what : nullptr;
}

void build_in(LevelDraft& draft, std::uint32_t m, bool from_end) {
    const auto bearings = draft.level.bearings[m];
    const double length = draft.level.members[m].length;
    if (from_end && !bearings.empty() && bearings.front().station <= draft.reach()) {
        bearings.front().fixed = true;
    } else if (!from_end && !bearings.empty() && bearings.back().station >= length - draft.reach()) {
        bearings.back().fixed = true;
    } else {
        draft.problems.add(ProblemCode::too_few_bearings, [&] {
            const FramedMember& member = draft.level.members[m];
            const Point at = from_end ? member.from : member.to;
            const std::string id = label_of(draft, m);
            return member_problem(draft, ProblemCode::too_few_bearings, m,
                                  id + " is built in at its `" + (from_end ? "from" : "to") +
                                      "` end, but has no bearing there at " + place_text(draft.plan, at) +
                                      '.',
                                  "Put a carrier there, or take the end out of `fixed_ends`.", {id}, at);
        });
    }
}

/// Hinges of the member, at bearings where they are within snap of one, and those of `cut`: at each bearing
/// but the first and the last.
std::vector<double> hinges_of(LevelDraft& draft, std::uint32_t m, const Member& member) {
    const auto bearings = draft.level.bearings[m];
    const double length = draft.level.members[m].length;
    std::vector<double> hinges;
    for (double station : member.hinges) {
        for (const Bearing& bearing : bearings) {
            if (std::abs(bearing.station - station) <= draft.reach()) {
                station = bearing.station;
            }
        }
        if (station > draft.reach() && station < length - draft.reach()) {
            hinges.push_back(station); // at an end there is nothing to release
        }
    }
    if (member.cut) {
        for (std::size_t i = 1; i + 1 < bearings.size(); ++i) {
            hinges.push_back(bearings[i].station);
        }
    }
    std::sort(hinges.begin(), hinges.end());
    hinges.erase(
        std::unique(hinges.begin(), hinges.end(), [&](double a, double b) { return b - a <= draft.reach(); }),
        hinges.end());
    return hinges;
}

void refuse_stations_beyond(LevelDraft& draft, std::uint32_t m, const Member& member) {
    for (std::size_t i = 0; i < member.hinges.size(); ++i) {
        const double length = draft.level.members[m].length;
        if (member.hinges[i] >= -draft.reach() && member.hinges[i] <= length + draft.reach()) {
            continue;
        }
        draft.problems.add(ProblemCode::out_of_range, [&] {
            const std::string id = label_of(draft, m);
            return problem_inside(
                ProblemCode::out_of_range, draft.level.members[m].origin, "members",
                "/hinges/" + std::to_string(i),
                "The hinge of " + id + " at station " + length_text(member.hinges[i], draft.plan.units) +
                    " lies outside the member, which is " + length_text(length, draft.plan.units) + " long.",
                {}, {id});
        });
    }
}

} // namespace

void set_fixity(LevelDraft& draft) {
    for (std::uint32_t m = 0; m < draft.level.members.size(); ++m) {
        const Member* member = listed_member(draft, m);
        if (!member) {
            break; // joists of fields come last and have no hinges and no fixed ends
        }
        if (!draft.lines[draft.line_of[m]].usable) {
            continue;
        }
        if (member->fixed_from) {
            build_in(draft, m, true);
        }
        if (member->fixed_to) {
            build_in(draft, m, false);
        }
        refuse_stations_beyond(draft, m, *member);
        draft.level.members[m].hinges = hinges_of(draft, m, *member);
    }
}

namespace {

std::string bearings_text(const LevelDraft& draft, std::uint32_t m) {
    const auto bearings = draft.level.bearings[m];
    if (bearings.empty()) {
        return "has no bearing";
    }
    return "bears at one point only, on " + label_of(draft, bearings.front().on) + " at " +
           place_text(draft.plan, bearings.front().at);
}

std::string mechanism_text(const LevelDraft& draft, std::uint32_t m, const FreeMotion& motion) {
    const FramedMember& member = draft.level.members[m];
    std::vector<std::string> stations;
    for (const double hinge : member.hinges) {
        stations.push_back(length_text(hinge, draft.plan.units));
    }
    return label_of(draft, m) + " is a mechanism: on " +
           counted(draft.level.bearings[m].size(), "bearing", "bearings") + ", with " +
           (stations.size() == 1 ? "a hinge" : "hinges") + " at " + listed(stations, ids_in_a_sentence) +
           ", its piece from station " + length_text(motion.piece.from, draft.plan.units) + " to " +
           length_text(motion.piece.to, draft.plan.units) + " can move.";
}

void refuse(LevelDraft& draft, std::uint32_t m, const FreeMotion& motion, const NearMisses& near_misses) {
    const auto bearings = draft.level.bearings[m];
    const bool fixed =
        std::any_of(bearings.begin(), bearings.end(), [](const Bearing& b) { return b.fixed; });
    const bool too_few = bearings.size() < 2 && !fixed;
    const ProblemCode code = too_few ? ProblemCode::too_few_bearings : ProblemCode::mechanism;
    draft.problems.add(code, [&] {
        const std::string id = label_of(draft, m);
        const auto near = near_misses.by_member.find(m);
        std::string hint = near != near_misses.by_member.end() ? near->second
                           : too_few ? "Put a carrier under it, or build one end in."
                                     : "Take a hinge away, or put a carrier under the piece.";
        const FramedMember& member = draft.level.members[m];
        const Point at = too_few && !bearings.empty() ? bearings.front().at
                         : too_few                    ? member.from
                                                      : draft.axis_of(m).at(motion.piece.from);
        return member_problem(draft, code, m,
                              too_few ? id + ' ' + bearings_text(draft, m) +
                                            "; it needs two bearings, or a built-in end."
                                      : mechanism_text(draft, m, motion),
                              std::move(hint), {id}, at);
    });
}

} // namespace

void check_stability(LevelDraft& draft, const NearMisses& near_misses) {
    for (std::uint32_t m = 0; m < draft.level.members.size(); ++m) {
        const FramedMember& member = draft.level.members[m];
        if (!draft.lines[draft.line_of[m]].usable) {
            continue;
        }
        const auto bearings = draft.level.bearings[m];
        if (member.hinges.empty() && bearings.size() > 1) {
            continue; // bearings of a member are apart
        }
        const FreeMotion motion = free_motion(member.length, bearings, member.hinges, draft.reach());
        if (motion.ways > 0) {
            refuse(draft, m, motion, near_misses);
        }
    }
}

void note_continuous(LevelDraft& draft) {
    std::size_t count = 0;
    std::vector<std::string> ids;
    for (std::uint32_t m = 0; m < draft.level.members.size(); ++m) {
        const auto bearings = draft.level.bearings[m];
        const std::vector<double>& hinges = draft.level.members[m].hinges;
        bool runs_on = false;
        for (std::size_t i = 1; i + 1 < bearings.size() && !runs_on; ++i) {
            runs_on = !std::binary_search(hinges.begin(), hinges.end(), bearings[i].station);
        }
        if (runs_on && count++ < ids_in_a_sentence) {
            ids.push_back(label_of(draft, m));
        }
    }
    if (count == 0) {
        return;
    }
    draft.problems.add(ProblemCode::continuous_as_drawn, [&] {
        return level_problem(draft, ProblemCode::continuous_as_drawn,
                             "On level " + draft.level.id + ", " +
                                 counted(count, "member runs", "members run") +
                                 " on over inner bearings and " + (count == 1 ? "is" : "are") +
                                 " taken as continuous, as drawn: " + listed(ids, ids.size(), count) + '.',
                             "Pieces that are lapped or laid end to end load their bearings otherwise: `cut` "
                             "or `hinges` say so.",
                             ids);
    });
}

RUNNEL_NAMESPACE_END
