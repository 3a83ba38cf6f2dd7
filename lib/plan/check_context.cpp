#include "plan/check_context.hpp"

#include "geometry/basic.hpp"
#include "plan/problems.hpp"
#include "plan/ring_checks.hpp"
#include "plan/words.hpp"

#include <cmath>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// In kN and m. No quantity of the trade comes near; products of several still fit a double.
constexpr double largest_value = 1e18;

double usable_snap(double snap) {
    return snap > 0 && snap <= 1 ? snap : Settings{}.snap;
}

/// The last step of a pointer that is a key and no index.
std::string_view key_of(std::string_view inside) {
    while (!inside.empty()) {
        const std::size_t slash = inside.rfind('/');
        const std::string_view step = inside.substr(slash + 1);
        if (slash == std::string_view::npos ||
            step.find_first_not_of("0123456789") != std::string_view::npos) {
            return step;
        }
        inside = inside.substr(0, slash);
    }
    return {};
}

} // namespace

std::string Subject::name() const {
    if (id.empty() || id == unread::id) {
        return origin.index == Origin::nowhere ? std::string(noun)
                                               : std::string(list) + '[' + std::to_string(origin.index) + ']';
    }
    return std::string(noun) + ' ' + shown(id);
}

CheckContext::CheckContext(const Plan& the_plan, const Limits& the_limits,
                           const std::optional<Doubts>& the_doubts, ProblemLog& the_log)
    : plan(the_plan), limits(the_limits), log(the_log), from_text(the_doubts.has_value()),
      doubts(the_doubts.value_or(Doubts{})), snap(usable_snap(the_plan.settings.snap)), cases(the_plan.cases),
      sections(the_plan.sections), builds(the_plan.builds), levels(the_plan.levels),
      columns(the_plan.columns), walls(the_plan.walls), like(the_plan.levels.size(), no_level) {}

Problem& CheckContext::report(const Subject& subject, ProblemCode code, std::string_view inside,
                              std::string message, std::string hint) {
    std::vector<std::string> ids;
    if (!subject.id.empty() && !is_unread(subject.id)) {
        ids.emplace_back(subject.id);
    }
    if (!subject.noun.empty() && std::string_view(message).substr(0, subject.noun.size()) == subject.noun) {
        message.front() =
            static_cast<char>(message.front() - 'a' + 'A'); // a sentence that begins with its subject
    }
    return log.add(inside.empty() ? problem_at(code, subject.origin, subject.list, std::move(message),
                                               std::move(hint), std::move(ids))
                                  : problem_inside(code, subject.origin, subject.list, inside,
                                                   std::move(message), std::move(hint), std::move(ids)));
}

bool CheckContext::good_id(const Subject& subject) {
    const std::string_view id = subject.id;
    if (is_unread(id)) {
        return false;
    }
    const auto is_control = [](char c) { return static_cast<unsigned char>(c) < 0x20 || c == 0x7f; };
    const char* fault = nullptr;
    if (id.empty()) {
        fault = "is empty";
    } else if (id.find('/') != std::string_view::npos) {
        fault = "holds a slash, which stands between a level and an id";
    } else {
        for (const char c : id) {
            fault = is_control(c) ? "holds a control character" : fault;
        }
    }
    if (fault != nullptr) {
        report(subject, ProblemCode::bad_id, "/id",
               "The id \"" + shown(id) + "\" of a " + std::string(subject.noun) + ' ' + fault + '.');
        return false;
    }
    return true;
}

void CheckContext::taken(const Subject& subject, const Origin& first, std::string_view first_noun) {
    const std::string where = first.line > 0 ? " in line " + std::to_string(first.line) : std::string{};
    report(subject, ProblemCode::duplicate_id, "/id",
           "The id " + shown(subject.id) + " of a " + std::string(subject.noun) + " is taken already by a " +
               std::string(first_noun) + where + '.',
           "Give it another id.");
}

bool CheckContext::good_number(double value, const Subject& subject, std::string_view inside,
                               Dimension dimension, Range range) {
    if (std::isnan(value) && from_text) {
        return false;
    }
    const std::string lead = [&] {
        if (std::abs(value) <= largest_value &&
            (range == Range::any || value > 0 || (range == Range::not_negative && value == 0))) {
            return std::string{};
        }
        return '`' + std::string(key_of(inside)) + "` of " + subject.name() + " is ";
    }();
    if (lead.empty()) {
        return true;
    }
    if (std::isnan(value)) {
        report(subject, ProblemCode::out_of_range, inside, lead + "not a number.");
        return false;
    }
    const std::string text = quantity_text(value, plan.units, dimension);
    if (!(std::abs(value) <= largest_value)) {
        report(subject, ProblemCode::out_of_range, inside,
               lead + text + ", beyond the limit of " + quantity_text(largest_value, plan.units, dimension) +
                   '.');
    } else if (range == Range::positive) {
        report(subject, ProblemCode::out_of_range, inside, lead + text + "; it must be greater than 0.");
    } else {
        report(subject, ProblemCode::out_of_range, inside, lead + text + "; it must not be less than 0.");
    }
    return false;
}

bool CheckContext::good_point(Point p, const Subject& subject, std::string_view inside) {
    const std::string path(inside);
    const bool x = good_number(p.x, subject, path + "/0", dimension::length);
    const bool y = good_number(p.y, subject, path + "/1", dimension::length);
    if (!x || !y) {
        return false;
    }
    // Decisions are made to `snap`; rounding at that distance from the origin must stay well below it.
    constexpr double margin = 10;
    const double largest = std::max(std::abs(p.x), std::abs(p.y));
    if (noise_of(largest) * margin > snap) {
        report(subject, ProblemCode::out_of_range, inside,
               '`' + std::string(key_of(inside)) + "` of " + subject.name() + " lies " + lengths(largest) +
                   " from the origin, where rounding reaches " + lengths(noise_of(largest)) +
                   "; the limit is a tenth of `snap`, " + lengths(snap / margin) + '.',
               "Move the origin nearer to the building.");
        return false;
    }
    return true;
}

bool CheckContext::good_line(Point from, Point to, const Subject& subject) {
    const bool start = good_point(from, subject, "/from");
    const bool end = good_point(to, subject, "/to");
    if (!start || !end) {
        return false;
    }
    const double length = distance(from, to);
    if (length <= snap) {
        report(subject, ProblemCode::zero_length, "",
               subject.name() + " is " + lengths(length) + " long, which is no more than `snap`, " +
                   lengths(snap) + '.')
            .point = from;
        return false;
    }
    return true;
}

Ring CheckContext::good_ring(const Ring& ring, const Subject& subject, std::string_view inside) {
    if (ring.empty() && from_text) {
        return {};
    }
    const std::string path(inside);
    const std::string name = '`' + std::string(key_of(inside)) + "` of " + subject.name();
    for (std::size_t i = 0; i < ring.size(); ++i) {
        // The path is text only where it is needed.
        const Point p = ring[i];
        const bool plain = std::abs(p.x) < 1e6 && std::abs(p.y) < 1e6 && noise_of(1e6) * 10 < snap;
        if (!plain && !good_point(p, subject, path + '/' + std::to_string(i))) {
            return {};
        }
    }
    Ring kept = without_repeats(ring, snap);
    constexpr std::size_t fewest = 3;
    if (kept.size() < fewest) {
        report(subject, ProblemCode::ring_too_small, inside,
               name + " has " + std::to_string(kept.size()) + (kept.size() == 1 ? " point" : " points") +
                   " further apart than `snap`, " + lengths(snap) + "; a ring takes at least 3.");
        return {};
    }
    const std::optional<SelfContact> contact = self_contact(kept, snap);
    // What is wider only in places is refused too: snapping its corners may leave nothing of it.
    const double width = mean_width(kept);
    if (width <= snap && !(contact && kept.size() > fewest)) {
        report(subject, ProblemCode::ring_too_small, inside,
               name + " has an area of " + area_text(std::abs(signed_area(kept)), plan.units) +
                   " and a mean width (area by half the length around) of " + lengths(width) +
                   ", no more than `snap`, " + lengths(snap) + '.')
            .point = kept.front();
        return {};
    }
    if (contact) {
        const bool crosses =
            contact->gap <= noise_of(std::max(std::abs(contact->at.x), std::abs(contact->at.y)));
        const std::string place = point_text(contact->at, plan.units);
        report(subject, ProblemCode::ring_crosses_itself, inside,
               crosses
                   ? name + " crosses or touches itself at " + place + '.'
                   : name + " comes within " + lengths(contact->gap) + " of itself at " + place +
                         "; what is no further apart than `snap`, " + lengths(snap) + ", is taken as one.",
               crosses ? "List its corners in order, once around."
                       : "Widen or close the gap, or set a smaller `snap`.")
            .point = contact->at;
        return {};
    }
    return kept;
}

Problem& CheckContext::refuse_reference(std::string_view id, std::string_view noun, const Subject& subject,
                                        std::string_view inside, std::string hint) {
    Problem& problem = report(subject, ProblemCode::unknown_id, inside,
                              '`' + std::string(key_of(inside)) + "` of " + subject.name() + " names " +
                                  shown(id) + ", and there is no such " + std::string(noun) + '.',
                              std::move(hint));
    problem.ids.emplace_back(id);
    return problem;
}

std::string CheckContext::lengths(double metres) const {
    return length_text(metres, plan.units);
}

std::optional<double> CheckContext::elevation_of(std::string_view level) const {
    double elevation = plan.settings.ground_elevation;
    if (level != "ground") {
        const Level* found = levels.find(level);
        if (found == nullptr) {
            return std::nullopt;
        }
        elevation = found->elevation;
    }
    return std::isfinite(elevation) ? std::optional(elevation) : std::nullopt;
}

RUNNEL_NAMESPACE_END
