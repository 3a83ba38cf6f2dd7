#include "framing/members.hpp"

#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

bool lies_inside(const Axis& axis, const Ring& ring, double reach) {
    const Point middle = between(axis.from, axis.to, 0.5);
    bool inside = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Point a = ring[i];
        const Point b = ring[(i + 1) % ring.size()];
        const Axis edge(a, b);
        if (nearest_on(edge, middle).distance <= reach) {
            return false;
        }
        const auto touch = touch_of(axis, edge, 0);
        if (touch && !axis.is_end(touch->station, reach)) {
            return false;
        }
        if ((a.y > middle.y) != (b.y > middle.y) &&
            middle.x < a.x + (middle.y - a.y) / (b.y - a.y) * (b.x - a.x)) {
            inside = !inside;
        }
    }
    return inside;
}

namespace {

using SectionNumbers = std::unordered_map<std::string_view, std::uint32_t>;

SectionNumbers number_sections(const Plan& plan) {
    SectionNumbers numbers;
    for (std::uint32_t i = 0; i < plan.sections.size(); ++i) {
        numbers.emplace(plan.sections[i].id, i);
    }
    return numbers;
}

std::uint32_t section_of(const SectionNumbers& numbers, std::string_view id) {
    const auto found = numbers.find(id);
    return found == numbers.end() ? none : found->second;
}

/// A place where a joist is cut.
struct Cut {
    double station;
    Point at;
};

struct JoistPiece {
    Axis axis;
    std::uint32_t line;
    bool along;  ///< lies along a member or wall
    bool inside; ///< lies inside an opening
};

class JoistCutter {
public:
    explicit JoistCutter(LevelDraft& draft) : draft_(draft) {
        std::vector<Box> boxes;
        for (const FramedDeck& deck : draft.level.decks) {
            for (const Ring& opening : deck.openings) {
                if (opening.empty()) {
                    continue;
                }
                boxes.push_back(box_of(opening));
                openings_.push_back(&opening);
            }
        }
        if (!boxes.empty()) {
            opening_index_ = BoxTree(boxes);
        }
    }

    /// Appends the pieces of a joist's line, in order along it.
    void cut(std::uint32_t line, std::vector<JoistPiece>& pieces) {
        cuts_.clear();
        along_.clear();
        for (const std::uint32_t e : draft_.near[line]) {
            meet(line, e);
        }
        std::sort(cuts_.begin(), cuts_.end(),
                  [](const Cut& a, const Cut& b) { return a.station < b.station; });
        const Axis& axis = draft_.lines[line].axis;
        Cut last{0, axis.from};
        for (const Cut& next : cuts_) {
            if (next.station > last.station + draft_.reach() && !axis.is_end(next.station, draft_.reach())) {
                add_piece(line, last, next, pieces);
                last = next;
            }
        }
        add_piece(line, last, {axis.length, axis.to}, pieces);
    }

private:
    /// What an element does to a joist: it cuts it, or has it lie along.
    void meet(std::uint32_t line_number, std::uint32_t element) {
        const Line& line = draft_.lines[line_number];
        const bool cut = draft_.lists.joist_fields[line.field].what->cut;
        if (draft_.elements.is_column(element)) {
            return;
        }
        if (draft_.elements.is_wall(element)) {
            const Axis wall = draft_.wall_axis(draft_.wall_of(element));
            if (lie_along(line.axis, wall) || !cut) {
                return;
            }
            if (const auto touch = touch_of(line.axis, wall, draft_.reach())) {
                cuts_.push_back({touch->station, touch->other_at});
            }
            return;
        }
        const Line& other = draft_.lines[element];
        if (!other.usable) {
            return;
        }
        const bool goes_first = other.field == none || other.field < line.field;
        if (goes_first && lie_along(line.axis, other.axis)) {
            return;
        }
        if (cut && other.role > Role::joist) {
            cut_at_member(line_number, other);
        }
    }

    bool lie_along(const Axis& joist, const Axis& other) {
        const auto stretch = stretch_along(joist, other, draft_.reach());
        if (!stretch) {
            return false;
        }
        along_.push_back(*stretch);
        for (const double station : {stretch->from, stretch->to}) {
            const Point at = joist.at(station);
            const Point end = distance(at, other.from) < distance(at, other.to) ? other.from : other.to;
            cuts_.push_back({station, distance(at, end) <= draft_.reach() ? end : at});
        }
        return true;
    }

    /// A member that runs through under the joist cuts it. One that ends there does so only over a column,
    /// where a line of girders goes on: a header that ends on a trimmer joist leaves the trimmer whole.
    void cut_at_member(std::uint32_t line_number, const Line& other) {
        const auto touch = touch_of(draft_.lines[line_number].axis, other.axis, draft_.reach());
        if (!touch) {
            return;
        }
        if (!other.axis.is_end(touch->other_station, draft_.reach())) {
            cuts_.push_back({touch->station, touch->other_at});
            return;
        }
        for (const std::uint32_t e : draft_.near[line_number]) {
            if (draft_.elements.is_column(e)) {
                const Point column = draft_.plan.columns[draft_.column_of(e)].at;
                if (distance(column, touch->other_at) <= draft_.reach()) {
                    cuts_.push_back({touch->station, column});
                }
            }
        }
    }

    void add_piece(std::uint32_t line, const Cut& from, const Cut& to, std::vector<JoistPiece>& pieces) {
        JoistPiece piece{{from.at, to.at}, line, false, false};
        const double middle = (from.station + to.station) / 2;
        for (const Stretch& stretch : along_) {
            piece.along = piece.along || (stretch.from < middle && middle < stretch.to);
        }
        piece.inside = !piece.along && is_inside_an_opening(piece.axis);
        pieces.push_back(piece);
    }

    bool is_inside_an_opening(const Axis& piece) {
        if (openings_.empty()) {
            return false;
        }
        found_.clear();
        const Point middle = between(piece.from, piece.to, 0.5);
        opening_index_.find(box_of(middle, middle), found_);
        return std::any_of(found_.begin(), found_.end(), [&](std::uint32_t i) {
            return lies_inside(piece, *openings_[i], draft_.reach());
        });
    }

    LevelDraft& draft_;
    std::vector<const Ring*> openings_;
    BoxTree opening_index_;
    std::vector<Cut> cuts_;
    std::vector<Stretch> along_;
    std::vector<std::uint32_t> found_;
};

FramedMember member_of(const Listed<Member>& listed, const Line& line, const SectionNumbers& sections) {
    FramedMember member;
    member.id = listed.what->id;
    member.role = line.role;
    member.carries_deck = listed.what->carries_deck;
    member.from = line.axis.from;
    member.to = line.axis.to;
    member.length = line.axis.length;
    member.section = section_of(sections, listed.what->section);
    member.origin = listed.origin;
    return member;
}

class MemberMaker {
public:
    MemberMaker(LevelDraft& draft, std::size_t& room)
        : draft_(draft), room_(room), sections_(number_sections(draft.plan)), cutter_(draft),
          left_out_(draft.lists.joist_fields.size()) {}

    void run() {
        draft_.level.members.reserve(draft_.lines.size());
        draft_.line_of.reserve(draft_.lines.size());
        draft_.first_member.reserve(draft_.lines.size() + 1);
        std::uint32_t line = 0;
        for (; line < draft_.lines.size() && draft_.lines[line].field == none; ++line) {
            start_line();
            draft_.level.members.push_back(
                member_of(draft_.lists.members[draft_.lines[line].source], draft_.lines[line], sections_));
            draft_.line_of.push_back(line);
        }
        while (line < draft_.lines.size()) {
            line = make_joist(line);
        }
        start_line();
        note_left_out();
    }

private:
    void start_line() {
        draft_.first_member.push_back(static_cast<std::uint32_t>(draft_.level.members.size()));
    }

    /// A joist may have several lines where its field's outline is concave; its pieces are numbered through.
    std::uint32_t make_joist(std::uint32_t first) {
        const Line joist = draft_.lines[first];
        pieces_.clear();
        std::uint32_t end = first;
        for (; end < draft_.lines.size() && draft_.lines[end].field == joist.field &&
               draft_.lines[end].source == joist.source;
             ++end) {
            if (draft_.lines[end].usable) {
                cutter_.cut(end, pieces_);
            }
        }
        const Listed<JoistField>& field = draft_.lists.joist_fields[joist.field];
        if (!take_room(joist.field, end - first)) {
            pieces_.clear();
        }
        const std::string id = field.what->id + '.' + std::to_string(joist.source + 1);
        std::uint32_t line = first;
        start_line();
        for (std::size_t k = 0; k < pieces_.size(); ++k) {
            const JoistPiece& piece = pieces_[k];
            for (; line < piece.line; ++line) {
                start_line();
            }
            const std::string piece_id = pieces_.size() == 1 ? id : id + '.' + std::to_string(k + 1);
            if (piece.along) {
                left_out_[joist.field].push_back(piece_id);
            } else if (!piece.inside) {
                add(field, piece, piece_id);
            }
        }
        for (++line; line < end; ++line) {
            start_line();
        }
        return end;
    }

    /// Lines have had their room; pieces beyond them need more.
    bool take_room(std::uint32_t field, std::size_t lines) {
        const std::size_t more = pieces_.size() > lines ? pieces_.size() - lines : 0;
        if (more <= room_) {
            room_ -= more;
            return true;
        }
        if (refused_field_ != field) {
            refused_field_ = field;
            const Listed<JoistField>& listed = draft_.lists.joist_fields[field];
            draft_.problems.add(ProblemCode::too_much, [&] {
                return problem_at(ProblemCode::too_much, listed.origin, "joist_fields",
                                  "Cut where they cross other members, the joists of field " +
                                      listed.what->id +
                                      " are more than the plan's limit of members leaves room for.",
                                  {}, {listed.what->id});
            });
        }
        return false;
    }

    void add(const Listed<JoistField>& field, const JoistPiece& piece, const std::string& id) {
        FramedMember& member = draft_.level.members.emplace_back();
        member.id = id;
        member.role = Role::joist;
        member.from_field = true;
        member.from = piece.axis.from;
        member.to = piece.axis.to;
        member.length = piece.axis.length;
        member.section = section_of(sections_, field.what->section);
        member.origin = field.origin;
        draft_.line_of.push_back(piece.line);
    }

    void note_left_out() {
        for (std::size_t i = 0; i < left_out_.size(); ++i) {
            if (left_out_[i].empty()) {
                continue;
            }
            const Listed<JoistField>& field = draft_.lists.joist_fields[i];
            draft_.problems.add(ProblemCode::joist_left_out, [&] {
                std::vector<std::string> ids{field.what->id};
                ids.insert(ids.end(), left_out_[i].begin(), left_out_[i].end());
                return problem_at(ProblemCode::joist_left_out, field.origin, "joist_fields",
                                  counted(left_out_[i].size(), "joist", "joists") + " of field " +
                                      field.what->id + (left_out_[i].size() == 1 ? " lies" : " lie") +
                                      " along a member or a wall and " +
                                      (left_out_[i].size() == 1 ? "is" : "are") +
                                      " left out: " + listed(left_out_[i], ids_in_a_sentence) + '.',
                                  {}, std::move(ids));
            });
        }
    }

    LevelDraft& draft_;
    std::size_t& room_;
    std::uint32_t refused_field_ = none; ///< the last field whose pieces found no room
    SectionNumbers sections_;
    JoistCutter cutter_;
    std::vector<JoistPiece> pieces_;
    std::vector<std::vector<std::string>> left_out_; ///< by field
};

} // namespace

void make_members(LevelDraft& draft, std::size_t& room) {
    MemberMaker(draft, room).run();
}

RUNNEL_NAMESPACE_END
