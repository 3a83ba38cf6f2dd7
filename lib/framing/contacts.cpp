#include "framing/contacts.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

class ContactFinder {
public:
    explicit ContactFinder(LevelDraft& draft) : draft_(draft) {}

    Contacts run() {
        const std::size_t members = draft_.level.members.size();
        contacts_.supports.reserve(members, members);
        for (std::uint32_t line = 0; line < draft_.elements.lines; ++line) {
            if (draft_.lines[line].usable) {
                for (const std::uint32_t e : draft_.near[line]) {
                    meet(line, e);
                }
                meet_own_pieces(line);
            }
            flush_supports(line);
        }
        return std::move(contacts_);
    }

private:
    void meet(std::uint32_t line, std::uint32_t element) {
        if (draft_.elements.is_column(element)) {
            const std::uint32_t column = draft_.column_of(element);
            const Point at = draft_.plan.columns[column].at;
            const auto [first, last] = draft_.members_near(line, at, at, draft_.reach());
            for (std::uint32_t m = first; m < last; ++m) {
                meet_column(m, column);
            }
        } else if (draft_.elements.is_wall(element)) {
            const std::uint32_t wall = draft_.wall_of(element);
            const Axis axis = draft_.wall_axis(wall);
            const auto [first, last] = draft_.members_near(line, axis.from, axis.to, draft_.reach());
            for (std::uint32_t m = first; m < last; ++m) {
                meet_wall(m, wall);
            }
        } else if (line < element && draft_.lines[element].usable) {
            meet_line(line, element);
        }
    }

    void meet_line(std::uint32_t line, std::uint32_t other_line) {
        const Axis& axis = draft_.lines[other_line].axis;
        const auto [first, last] = draft_.members_near(line, axis.from, axis.to, draft_.reach());
        for (std::uint32_t m = first; m < last; ++m) {
            const FramedMember& member = draft_.level.members[m];
            const auto [other_first, other_last] =
                draft_.members_near(other_line, member.from, member.to, draft_.reach());
            for (std::uint32_t other = other_first; other < other_last; ++other) {
                meet_member(m, other);
            }
        }
    }

    /// Pieces of one joist meet where it was cut.
    void meet_own_pieces(std::uint32_t line) {
        for (std::uint32_t m = draft_.first_member[line]; m + 1 < draft_.first_member[line + 1]; ++m) {
            meet_member(m, m + 1);
        }
    }

    /// Closes the groups of a line's members: supports were found support by support, not piece by piece.
    void flush_supports(std::uint32_t line) {
        std::stable_sort(found_.begin(), found_.end(),
                         [](const auto& a, const auto& b) { return a.first < b.first; });
        std::size_t next = 0;
        for (std::uint32_t m = draft_.first_member[line]; m < draft_.first_member[line + 1]; ++m) {
            for (; next < found_.size() && found_[next].first == m; ++next) {
                contacts_.supports.push(found_[next].second);
            }
            contacts_.supports.end_group();
        }
        found_.clear();
    }

    void meet_column(std::uint32_t m, std::uint32_t column) {
        const NearPoint near = nearest_on(draft_.axis_of(m), draft_.plan.columns[column].at);
        if (near.distance <= draft_.reach()) {
            found_.emplace_back(m, SupportContact{{CarrierKind::column, column}, near.station, 0});
        }
    }

    void meet_wall(std::uint32_t m, std::uint32_t wall) {
        const Axis axis = draft_.axis_of(m);
        const Axis wall_axis = draft_.wall_axis(wall);
        if (const auto stretch = stretch_along(axis, wall_axis, draft_.reach())) {
            refuse_along(m, {CarrierKind::wall, wall}, *stretch);
        } else if (const auto touch = touch_of(axis, wall_axis, draft_.reach())) {
            found_.emplace_back(
                m, SupportContact{{CarrierKind::wall, wall}, touch->station, touch->other_station});
        }
    }

    void meet_member(std::uint32_t m, std::uint32_t other) {
        const Axis axis = draft_.axis_of(m);
        const Axis other_axis = draft_.axis_of(other);
        if (const auto stretch = stretch_along(axis, other_axis, draft_.reach())) {
            if (is_the_one_along(m, other)) {
                refuse_along(m, {CarrierKind::member, other}, *stretch);
            } else {
                refuse_along(other, {CarrierKind::member, m},
                             *stretch_along(other_axis, axis, draft_.reach()));
            }
        } else if (const auto touch = touch_of(axis, other_axis, draft_.reach())) {
            contacts_.meetings.push_back({m, other, touch->station, touch->other_station});
        }
    }

    /// Of two that lie along each other the lower role is told so; of equal roles the shorter, then by id.
    [[nodiscard]] bool is_the_one_along(std::uint32_t m, std::uint32_t other) const {
        const FramedMember& a = draft_.level.members[m];
        const FramedMember& b = draft_.level.members[other];
        return a.role != b.role                                         ? a.role < b.role
               : std::abs(a.length - b.length) > draft_.tolerance.noise ? a.length < b.length
                                                                        : a.id < b.id;
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
    std::vector<std::pair<std::uint32_t, SupportContact>> found_; ///< of the line at hand, by member
};

} // namespace

Contacts find_contacts(LevelDraft& draft) {
    return ContactFinder(draft).run();
}

RUNNEL_NAMESPACE_END
