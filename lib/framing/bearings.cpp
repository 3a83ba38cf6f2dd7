#include "framing/bearings.hpp"

#include "framing/named.hpp"
#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A bearing as found, before those at one place are made one.
struct Found {
    Carrier on;
    double station = 0;
    double on_station = 0;
};

class BearingRules {
public:
    BearingRules(LevelDraft& draft, const Contacts& contacts)
        : draft_(draft), contacts_(contacts), named_(draft), runs_through_(2 * draft.level.members.size(), 0),
          highest_meeting_(2 * draft.level.members.size(), nobody),
          reported_(2 * draft.level.members.size(), 0) {}

    Grouped<Found> run() {
        bear_on_supports();
        see_what_meets();
        for (std::size_t i = 0; i < contacts_.meetings.size(); ++i) {
            if (!decide_by_name(contacts_.meetings[i]) && !over_support_[i]) {
                decide_by_role(contacts_.meetings[i]);
            }
        }
        refuse_meetings();
        named_.refuse_untouched();
        return Grouped<Found>::from_pairs(draft_.level.members.size(), std::move(found_));
    }

private:
    static constexpr std::int8_t nobody = -1;

    [[nodiscard]] Role role(std::uint32_t m) const { return draft_.level.members[m].role; }
    [[nodiscard]] bool ends(std::uint32_t m, double station) const {
        return draft_.axis_of(m).is_end(station, draft_.reach());
    }
    /// Number of the end of a member that a station is at.
    [[nodiscard]] std::size_t end(std::uint32_t m, double station) const {
        return 2 * static_cast<std::size_t>(m) + (station <= draft_.reach() ? 0 : 1);
    }
    static Carrier member(std::uint32_t m) { return {CarrierKind::member, m}; }

    void bear(std::uint32_t m, Carrier on, double station, double on_station) {
        found_.emplace_back(m, Found{on, station, on_station});
    }

    /// Rule 1, first half.
    void bear_on_supports() {
        found_.reserve(contacts_.supports.items().size() + contacts_.meetings.size());
        for (std::uint32_t m = 0; m < contacts_.supports.size(); ++m) {
            for (const SupportContact& contact : contacts_.supports[m]) {
                named_.mark_touched(m, contact.on);
                if (!named_.has_list(m) || named_.names(m, contact.on)) {
                    bear(m, contact.on, contact.station, contact.on_station);
                }
            }
        }
    }

    /// Rule 1, second half: whether both have a column or wall where they meet.
    [[nodiscard]] bool meet_over_support(const MemberContact& meeting) const {
        // A support within snap of both axes may be up to two snaps from where they meet.
        const double near = 2 * draft_.reach();
        bool a_stands = false;
        for (const SupportContact& contact : contacts_.supports[meeting.a]) {
            a_stands = a_stands || std::abs(contact.station - meeting.station_a) <= near;
            for (const SupportContact& other : contacts_.supports[meeting.b]) {
                if (contact.on == other.on && contact.on.kind == CarrierKind::column) {
                    return true;
                }
            }
        }
        if (!a_stands) {
            return false;
        }
        const auto of_b = contacts_.supports[meeting.b];
        return std::any_of(of_b.begin(), of_b.end(), [&](const SupportContact& contact) {
            return std::abs(contact.station - meeting.station_b) <= near;
        });
    }

    /// What must be known of a place before its meetings are judged: whether something runs through, and the
    /// highest role that ends there.
    void see_what_meets() {
        over_support_.resize(contacts_.meetings.size());
        for (std::size_t i = 0; i < contacts_.meetings.size(); ++i) {
            const MemberContact& meeting = contacts_.meetings[i];
            over_support_[i] = meet_over_support(meeting);
            if (over_support_[i]) {
                continue;
            }
            const bool a_ends = ends(meeting.a, meeting.station_a);
            const bool b_ends = ends(meeting.b, meeting.station_b);
            const std::size_t a_end = end(meeting.a, meeting.station_a);
            const std::size_t b_end = end(meeting.b, meeting.station_b);
            if (a_ends && b_ends) {
                raise(highest_meeting_[a_end], role(meeting.b));
                raise(highest_meeting_[b_end], role(meeting.a));
            } else if (a_ends) {
                runs_through_[a_end] = 1;
            } else if (b_ends) {
                runs_through_[b_end] = 1;
            }
        }
    }

    static void raise(std::int8_t& highest, Role role) {
        highest = std::max(highest, static_cast<std::int8_t>(role));
    }

    bool decide_by_name(const MemberContact& meeting) {
        named_.mark_touched(meeting.a, member(meeting.b));
        named_.mark_touched(meeting.b, member(meeting.a));
        const bool a_names = named_.names(meeting.a, member(meeting.b));
        const bool b_names = named_.names(meeting.b, member(meeting.a));
        if (a_names) {
            bear(meeting.a, member(meeting.b), meeting.station_a, meeting.station_b);
        }
        if (b_names) {
            bear(meeting.b, member(meeting.a), meeting.station_b, meeting.station_a);
        }
        return a_names || b_names;
    }

    void decide_by_role(const MemberContact& meeting) {
        const bool a_ends = ends(meeting.a, meeting.station_a);
        const bool b_ends = ends(meeting.b, meeting.station_b);
        if (a_ends && b_ends) {
            decide_meeting(meeting);
        } else if (a_ends) {
            end_on(meeting);
        } else if (b_ends) {
            end_on(swapped(meeting));
        } else {
            decide_crossing(meeting);
        }
    }

    static MemberContact swapped(const MemberContact& m) { return {m.b, m.a, m.station_b, m.station_a}; }

    /// Problems name two equals in the order of their ids, not of the list.
    [[nodiscard]] MemberContact by_id(const MemberContact& m) const {
        return draft_.level.members[m.a].id < draft_.level.members[m.b].id ? m : swapped(m);
    }

    /// a with its station first, the lower role.
    void lower_on_higher(const MemberContact& meeting) {
        const MemberContact ordered = role(meeting.a) < role(meeting.b) ? meeting : swapped(meeting);
        if (!named_.has_list(ordered.a)) {
            bear(ordered.a, member(ordered.b), ordered.station_a, ordered.station_b);
        }
    }

    /// Rule 2: a ends on b, which runs through.
    void end_on(const MemberContact& meeting) {
        if (named_.has_list(meeting.a)) {
            return;
        }
        bear(meeting.a, member(meeting.b), meeting.station_a, meeting.station_b);
        if (role(meeting.a) > role(meeting.b)) {
            warn_higher_on_lower(meeting);
        }
    }

    /// Rule 2: both end.
    void decide_meeting(const MemberContact& meeting) {
        const std::size_t a_end = end(meeting.a, meeting.station_a);
        const std::size_t b_end = end(meeting.b, meeting.station_b);
        if (runs_through_[a_end] && runs_through_[b_end]) {
            return;
        }
        if (role(meeting.a) != role(meeting.b)) {
            lower_on_higher(meeting);
            return;
        }
        const auto own = static_cast<std::int8_t>(role(meeting.a));
        const bool both_listed = named_.has_list(meeting.a) && named_.has_list(meeting.b);
        if (own < highest_meeting_[a_end] || own < highest_meeting_[b_end] || both_listed) {
            return;
        }
        uncarried_.push_back(by_id(meeting));
    }

    /// Of many ends at one place each is named once, in pairs by id: the order of the list does not show.
    void refuse_meetings() {
        const auto& members = draft_.level.members;
        std::sort(uncarried_.begin(), uncarried_.end(), [&](const MemberContact& x, const MemberContact& y) {
            return x.a != y.a ? members[x.a].id < members[y.a].id : members[x.b].id < members[y.b].id;
        });
        for (const MemberContact& meeting : uncarried_) {
            const std::size_t a_end = end(meeting.a, meeting.station_a);
            const std::size_t b_end = end(meeting.b, meeting.station_b);
            if (!(reported_[a_end] && reported_[b_end])) {
                reported_[a_end] = reported_[b_end] = 1;
                refuse_meeting(meeting);
            }
        }
    }

    /// Rule 3.
    void decide_crossing(const MemberContact& meeting) {
        if (role(meeting.a) != role(meeting.b)) {
            lower_on_higher(meeting);
        } else if (!(named_.has_list(meeting.a) && named_.has_list(meeting.b))) {
            refuse_crossing(meeting);
        }
    }

    void warn_higher_on_lower(const MemberContact& meeting) {
        draft_.problems.add(ProblemCode::higher_on_lower, [&] {
            const Point at = draft_.axis_of(meeting.a).at(meeting.station_a);
            const std::string a = label_of(draft_, meeting.a);
            const std::string b = label_of(draft_, meeting.b);
            return member_problem(draft_, ProblemCode::higher_on_lower, meeting.a,
                                  "The " + std::string(name_of(role(meeting.a))) + ' ' + a + " ends on the " +
                                      std::string(name_of(role(meeting.b))) + ' ' + b + " at " +
                                      place_text(draft_.plan, at) + " and bears on it.",
                                  "Is a column missing there? If it is meant, let " + a + " name " + b +
                                      " in `bears_on`.",
                                  {a, b}, at);
        });
    }

    void refuse_meeting(const MemberContact& meeting) {
        draft_.problems.add(ProblemCode::equal_roles_meet, [&] {
            const Point at = draft_.axis_of(meeting.a).at(meeting.station_a);
            const std::string a = label_of(draft_, meeting.a);
            const std::string b = label_of(draft_, meeting.b);
            return member_problem(draft_, ProblemCode::equal_roles_meet, meeting.a,
                                  "The " + std::string(name_of(role(meeting.a))) + "s " + a + " and " + b +
                                      " meet at " + place_text(draft_.plan, at) +
                                      " with no column, wall or member running through to carry them.",
                                  "Draw them as one member, put a column there, or say which bears on which "
                                  "with `bears_on`.",
                                  {a, b}, at);
        });
    }

    void refuse_crossing(const MemberContact& found) {
        const MemberContact meeting = by_id(found);
        draft_.problems.add(ProblemCode::equal_roles_cross, [&] {
            const Point at = draft_.axis_of(meeting.a).at(meeting.station_a);
            const std::string a = label_of(draft_, meeting.a);
            const std::string b = label_of(draft_, meeting.b);
            return member_problem(draft_, ProblemCode::equal_roles_cross, meeting.a,
                                  "The " + std::string(name_of(role(meeting.a))) + "s " + a + " and " + b +
                                      " cross at " + place_text(draft_.plan, at) +
                                      "; geometry does not say which bears on which.",
                                  crossing_hint(meeting, a, b), {a, b}, at);
        });
    }

    /// An end a little past the crossing was most likely meant to end there.
    [[nodiscard]] std::string crossing_hint(const MemberContact& meeting, const std::string& a,
                                            const std::string& b) const {
        const auto past = [&](std::uint32_t m, double station) {
            return std::min(station, draft_.level.members[m].length - station);
        };
        const double a_past = past(meeting.a, meeting.station_a);
        const double b_past = past(meeting.b, meeting.station_b);
        if (std::min(a_past, b_past) <= snaps_of_a_near_miss * draft_.tolerance.snap) {
            const bool a_runs = a_past <= b_past;
            return (a_runs ? a : b) + " runs " + length_text(std::min(a_past, b_past), draft_.plan.units) +
                   " past " + (a_runs ? b : a) + ": end it there.";
        }
        return "Give one of them a higher role, or `bears_on`.";
    }

    LevelDraft& draft_;
    const Contacts& contacts_;
    NamedCarriers named_;
    std::vector<bool> over_support_;           ///< by meeting
    std::vector<std::uint8_t> runs_through_;   ///< by end: it ends on the inside of another
    std::vector<std::int8_t> highest_meeting_; ///< by end: highest role of other ends there
    std::vector<std::uint8_t> reported_;       ///< by end
    std::vector<MemberContact> uncarried_;     ///< equal roles that meet over nothing
    std::vector<std::pair<std::uint32_t, Found>> found_;
};

/// Makes bearings of what was found: by rising station, one at a place.
class BearingMaker {
public:
    explicit BearingMaker(LevelDraft& draft) : draft_(draft) {}

    void run(Grouped<Found>& found) {
        draft_.level.bearings.reserve(found.size(), found.items().size());
        for (std::uint32_t m = 0; m < found.size(); ++m) {
            make(m, found[m]);
            draft_.level.bearings.end_group();
        }
    }

private:
    void make(std::uint32_t m, std::span<Found> found) {
        std::sort(found.begin(), found.end(),
                  [](const Found& a, const Found& b) { return a.station < b.station; });
        for (std::size_t i = 0; i < found.size();) {
            const Found* best = &found[i];
            std::size_t next = i + 1;
            for (; next < found.size() && found[next].station <= found[i].station + draft_.reach(); ++next) {
                if (goes_before(found[next].on, best->on)) {
                    best = &found[next];
                }
            }
            draft_.level.bearings.push(bearing_of(m, *best));
            i = next;
        }
    }

    /// Column, wall, member of the higher role; of equal ones by id, so that no order of lists matters.
    [[nodiscard]] bool goes_before(Carrier a, Carrier b) const {
        const int rank_a = draft_.order_of_choice(a);
        const int rank_b = draft_.order_of_choice(b);
        return rank_a != rank_b ? rank_a > rank_b : label_of(draft_, a) < label_of(draft_, b);
    }

    [[nodiscard]] Bearing bearing_of(std::uint32_t m, const Found& found) const {
        Bearing bearing;
        bearing.station = found.station;
        bearing.on_station = found.on_station;
        bearing.at = draft_.axis_of(m).at(found.station);
        bearing.on = found.on;
        switch (found.on.kind) {
        case CarrierKind::member:
            bearing.on_at = draft_.axis_of(found.on.index).at(found.on_station);
            break;
        case CarrierKind::wall:
            bearing.on_at = draft_.wall_axis(found.on.index).at(found.on_station);
            break;
        case CarrierKind::column:
            bearing.on_at = draft_.plan.columns[found.on.index].at;
            break;
        }
        return bearing;
    }

    LevelDraft& draft_;
};

} // namespace

void find_bearings(LevelDraft& draft, const Contacts& contacts) {
    Grouped<Found> found = BearingRules(draft, contacts).run();
    BearingMaker(draft).run(found);
}

RUNNEL_NAMESPACE_END
