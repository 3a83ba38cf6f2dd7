#include "plan/check_levels.hpp"

#include "geometry/basic.hpp"
#include "plan/problems.hpp"
#include "plan/ring_checks.hpp"
#include "plan/words.hpp"

#include <algorithm>
#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

void check_bears_on(CheckContext& context, const LevelIndex& index, std::size_t level, const Member& member,
                    const Subject& subject) {
    const double elevation = context.plan.levels[level].elevation;
    for (std::size_t i = 0; i < member.bears_on.size(); ++i) {
        const std::string& name = member.bears_on[i];
        if (context.is_unread(name)) {
            continue;
        }
        const std::string inside = "/bears_on/" + std::to_string(i);
        const std::optional<std::string_view> id = index.local_id(level, name);
        if (id && *id == member.id) {
            context.report(subject, ProblemCode::load_path_loop, inside,
                           subject.name() + " bears on itself.");
            continue;
        }
        const Column* column = id ? context.columns.find(*id) : nullptr;
        const Wall* wall = id ? context.walls.find(*id) : nullptr;
        const bool is_there = (column != nullptr && context.bears_at(*column, elevation)) ||
                              (wall != nullptr && context.bears_at(*wall, elevation)) ||
                              (id && (index.member(level, *id) != nullptr || index.is_joist(level, *id)));
        if (!is_there && !context.doubts.supports) {
            const bool elsewhere = column != nullptr || wall != nullptr;
            context.refuse_reference(name, "carrier on this level", subject, inside,
                                     elsewhere
                                         ? "It is no bearing at this level: its base is not below it, or "
                                           "its top is."
                                         : "");
        }
    }
}

void check_hinges(CheckContext& context, const Member& member, const Subject& subject) {
    const double length = distance(member.from, member.to);
    for (std::size_t i = 0; i < member.hinges.size(); ++i) {
        const double hinge = member.hinges[i];
        const std::string inside = "/hinges/" + std::to_string(i);
        if (context.good_number(hinge, subject, inside, dimension::length) &&
            (hinge < -context.snap || hinge > length + context.snap)) {
            context.report(subject, ProblemCode::out_of_range, inside,
                           "A hinge of " + subject.name() + " is at station " + context.lengths(hinge) +
                               ", outside its length of " + context.lengths(length) + '.');
        }
        if ((member.fixed_from && std::abs(hinge) <= context.snap) ||
            (member.fixed_to && std::abs(hinge - length) <= context.snap)) {
            context.report(subject, ProblemCode::conflicting_keys, inside,
                           "A hinge of " + subject.name() + " is at station " + context.lengths(hinge) +
                               ", where `fixed_ends` builds it in.",
                           "Take one of them out.");
        }
    }
}

} // namespace

void check_members(CheckContext& context, const LevelIndex& index, std::size_t level) {
    const std::vector<Member>& members = context.plan.levels[level].members;
    const Section* section = nullptr; // the last one; neighbours mostly share it
    for (std::size_t i = 0; i < members.size(); ++i) {
        const Member& member = members[i];
        const Subject subject =
            CheckContext::subject(member, "members", "member", i, static_cast<std::uint32_t>(level));
        if (context.good_line(member.from, member.to, subject)) {
            check_hinges(context, member, subject);
        }
        if (!member.section.empty() && (section == nullptr || section->id != member.section)) {
            section = context.refer(member.section, context.sections, "section", context.doubts.sections,
                                    subject, "/section");
            context.use_section(section);
        }
        check_bears_on(context, index, level, member, subject);
    }
}

void check_joist_fields(CheckContext& context, std::size_t level) {
    const std::vector<JoistField>& fields = context.plan.levels[level].joist_fields;
    for (std::size_t i = 0; i < fields.size(); ++i) {
        const JoistField& field = fields[i];
        const Subject subject =
            CheckContext::subject(field, "joist_fields", "joist field", i, static_cast<std::uint32_t>(level));
        (void)context.good_ring(field.outline, subject, "/outline");
        context.good_number(field.direction, subject, "/direction", dimension::none);
        const bool spaced =
            context.good_number(field.spacing, subject, "/spacing", dimension::length, Range::positive);
        const double joists = joists_of(field);
        const bool too_many = joists > static_cast<double>(context.limits.members); // said by check_amounts
        if (spaced && !too_many && field.spacing <= context.snap) {
            context.report(subject, ProblemCode::out_of_range, "/spacing",
                           "`spacing` of " + subject.name() + " is " + context.lengths(field.spacing) +
                               ", no more than `snap`, " + context.lengths(context.snap) +
                               ": its joists would be one.");
        }
        const bool placed =
            context.good_number(field.offset, subject, "/offset", dimension::length, Range::not_negative);
        if (spaced && placed && std::isfinite(joists) && field.offset > joists * field.spacing) {
            context.report(subject, ProblemCode::out_of_range, "/offset",
                           "`offset` of " + subject.name() + " is " + context.lengths(field.offset) +
                               ", beyond the far edge of its outline.");
        }
        if (!field.section.empty()) {
            context.use_section(context.refer(field.section, context.sections, "section",
                                              context.doubts.sections, subject, "/section"));
        }
    }
}

namespace {

/// Under another span all load goes to what is nearest.
void warn_of_keys_without_effect(CheckContext& context, const Deck& deck, const Subject& subject) {
    if (deck.span == SpanKind::one_way) {
        return;
    }
    const std::string follow = "which only one-way decks follow; this one is `" +
                               std::string(name_of(deck.span)) + "`, where all load goes to what is nearest.";
    constexpr const char* hint = "Leave it out, or make the deck one-way.";
    if (deck.direction) {
        context.report(subject, ProblemCode::key_has_no_effect, "/direction",
                       "`direction` of " + subject.name() + " is given, " + follow, hint);
    }
    if (deck.share.value_or(Share::half) != Share::half) {
        context.report(subject, ProblemCode::key_has_no_effect, "/share",
                       "`share` of " + subject.name() + " is `" + std::string(name_of(*deck.share)) + "`, " +
                           follow,
                       hint);
    }
}

} // namespace

void check_decks(CheckContext& context, std::size_t level) {
    const std::vector<Deck>& decks = context.plan.levels[level].decks;
    for (std::size_t i = 0; i < decks.size(); ++i) {
        const Deck& deck = decks[i];
        const Subject subject =
            CheckContext::subject(deck, "decks", "deck", i, static_cast<std::uint32_t>(level));
        const Ring outline = context.good_ring(deck.outline, subject, "/outline");
        if (!deck.openings.empty()) {
            check_openings(context, deck.openings, outline, subject, ProblemCode::opening_outside_deck);
        }
        if (deck.span == SpanKind::one_way && !deck.direction) {
            context.report(subject, ProblemCode::missing_key, "",
                           "`direction` of " + subject.name() + " is missing: a one-way deck needs it.",
                           "The angle in degrees along which it spans, from +x counter-clockwise.");
        }
        if (deck.direction) {
            context.good_number(*deck.direction, subject, "/direction", dimension::none);
        }
        warn_of_keys_without_effect(context, deck, subject);
        if (deck.span != SpanKind::two_way && deck.corner_angles != CornerAngles::equal) {
            context.report(subject, ProblemCode::conflicting_keys, "/corner_angles",
                           "`corner_angles` of " + subject.name() +
                               " goes with a `two-way` span; this one is `" +
                               std::string(name_of(deck.span)) + "`.",
                           "Leave it out, or make the deck two-way.");
        }
        context.good_number(deck.q, subject, "/q", dimension::area_load, Range::not_negative);
        const Build* build = deck.build.empty() ? nullptr
                                                : context.refer(deck.build, context.builds, "build",
                                                                context.doubts.builds, subject, "/build");
        context.uses_own_weight = context.uses_own_weight || deck.q.value_or(0) > 0 ||
                                  (build != nullptr && build->weight_per_area() > 0);
    }
}

RUNNEL_NAMESPACE_END
