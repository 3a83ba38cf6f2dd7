#include "framing/contacts.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

class ContactFinder {
public:
    explicit ContactFinder(LevelDraft& draft) : draft_(draft) {}

    Contacts run() {
        const auto members = static_cast<std::uint32_t>(draft_.level.members.size());
        contacts_.supports.reserve(members, members);
        for (std::uint32_t m = 0; m < members; ++m) {
            const std::uint32_t line = draft_.line_of[m];
            if (draft_.lines[line].usable) {
                for (const std::uint32_t e : draft_.near[line]) {
                    meet(m, e);
                }
                meet_own_pieces(m, line);
            }
            contacts_.supports.end_group();
        }
        return std::move(contacts_);
    }

private:
    void meet(std::uint32_t m, std::uint32_t element) {
        if (draft_.elements.is_column(element)) {
            meet_column(m, draft_.column_of(element));
        } else if (draft_.elements.is_wall(element)) {
            meet_wall(m, draft_.wall_of(element));
        } else if (draft_.lines[element].usable) {
            for (std::uint32_t other = draft_.first_member[element]; other < draft_.first_member[element + 1];
                 ++other) {
                if (m < other) {
                    meet_member(m, other);
                }
            }
        }
    }

    /// Pieces of one joist meet where it was cut.
    void meet_own_pieces(std::uint32_t m, std::uint32_t line) {
        for (std::uint32_t other = m + 1; other < draft_.first_member[line + 1]; ++other) {
            meet_member(m, other);
        }
    }

    void meet_column(std::uint32_t m, std::uint32_t column) {
        const NearPoint near = nearest_on(draft_.axis_of(m), draft_.plan.columns[column].at);
        if (near.distance <= draft_.reach()) {
            contacts_.supports.push({{CarrierKind::column, column}, near.station, 0});
        }
    }

    void meet_wall(std::uint32_t m, std::uint32_t wall) {
        const Axis axis = draft_.axis_of(m);
        const Axis wall_axis = draft_.wall_axis(wall);
        if (const auto stretch = stretch_along(axis, wall_axis, draft_.reach())) {
            refuse_along(m, {CarrierKind::wall, wall}, *stretch);
        } else if (const auto touch = touch_of(axis, wall_axis, draft_.reach())) {
            contacts_.supports.push({{CarrierKind::wall, wall}, touch->station, touch->other_station});
        }
    }

    void meet_member(std::uint32_t m, std::uint32_t other) {
        const Axis axis = draft_.axis_of(m);
        const Axis other_axis = draft_.axis_of(other);
        if (const auto stretch = stretch_along(axis, other_axis, draft_.reach())) {
            refuse_along(m, {CarrierKind::member, other}, *stretch);
        } else if (const auto touch = touch_of(axis, other_axis, draft_.reach())) {
            contacts_.meetings.push_back({m, other, touch->station, touch->other_station});
        }
    }

    void refuse_along(std::uint32_t m, Carrier on, const Stretch& stretch) {
        draft_.problems.add(ProblemCode::lies_along, [&] {
            const Point from = draft_.axis_of(m).at(stretch.from);
            const Point to = draft_.axis_of(m).at(stretch.to);
            const std::string id = label_of(draft_, m);
            const std::string other = label_of(draft_, on);
            const Units units = draft_.plan.units;
            return member_problem(draft_, ProblemCode::lies_along, m,
                                  id + " lies along " + other + " for " +
                                      length_text(stretch.length(), units) + ", from " +
                                      place_text(draft_.plan, from) + " to " + place_text(draft_.plan, to) +
                                      "; it may touch it over no more than snap (" +
                                      length_text(draft_.tolerance.snap, units) + ").",
                                  "Take one of the two away, or shorten it.", {id, other}, from);
        });
    }

    LevelDraft& draft_;
    Contacts contacts_;
};

} // namespace

Contacts find_contacts(LevelDraft& draft) {
    return ContactFinder(draft).run();
}

RUNNEL_NAMESPACE_END
