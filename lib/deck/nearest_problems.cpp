#include "deck/nearest.hpp"

#include "deck/acting.hpp"
#include "deck/lost_loads.hpp"
#include "geometry/basic.hpp"
#include "plan/problems.hpp"

#include <algorithm>
#include <string>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t named_at_most = 12;

std::string start_of(const FramedLevel& level, const FramedDeck& deck) {
    return "Level " + level.id + ", deck " + deck.id + ": ";
}

} // namespace

void report_no_carrier(const Plan& plan, const Framing& framing, const UnsupportedPart& part, LostLoads& lost,
                       Sharing& sharing) {
    const FramedLevel& level = framing.levels[part.level];
    const FramedDeck& deck = part.outline;
    const bool whole = &deck == &level.decks[part.deck];
    const bool on_columns = deck.span == SpanKind::columns;
    StripAxes axes;
    axes.origin = deck.outline.front();
    const std::string text =
        lost.text(part.deck, axes, pieces_of_deck(deck, axes, noise_of(framing.largest_coordinate)));
    const std::string place = whole ? "the deck" : "that part";
    Problem problem =
        problem_at(ProblemCode::strip_unsupported, deck.origin, "decks",
                   start_of(level, deck) + area_text(part.area, plan.units) + (whole ? "" : " of it") +
                       " have no carrier, since no " +
                       (on_columns ? "column or wall stands in " + place
                                   : "member or wall runs in " + place + " or along it") +
                       " (" + text + " would be lost), first corner at " +
                       point_text(deck.outline.front(), plan.units) + '.',
                   on_columns ? "Columns have to reach up to the level to carry it; a deck on beams is "
                                "\"two-way\" or \"one-way\"."
                              : "Draw the members along its edges, or let it span to columns.",
                   {deck.id});
    problem.point = deck.outline.front();
    sharing.problems.push_back(std::move(problem));
}

void report_way_leaves(const Plan& plan, const FramedLevel& level, std::uint32_t deck_index,
                       const GatheredArea& doubtful, Sharing& sharing) {
    // Along each way `snap` was let pass; of area, what the drawing may be off by.
    if (doubtful.area <= plan.settings.snap * plan.settings.snap) {
        return;
    }
    const FramedDeck& deck = level.decks[deck_index];
    std::vector<std::uint32_t> carriers = doubtful.carriers;
    std::sort(carriers.begin(), carriers.end());
    carriers.erase(std::unique(carriers.begin(), carriers.end()), carriers.end());
    std::vector<std::string> ids{deck.id};
    for (std::size_t i = 0; i < carriers.size() && i < named_at_most; ++i) {
        ids.push_back(carrier_id(plan, level, sharing.carrier(carriers[i])));
    }
    Problem problem = problem_at(
        ProblemCode::way_leaves_deck, deck.origin, "decks",
        start_of(level, deck) + area_text(doubtful.area, plan.units) +
            " go to a carrier straight across an opening or past the deck's edge, the largest part at " +
            point_text(doubtful.place, plan.units) + '.',
        "Draw the members that trim the opening or the corner, or split the deck there.", std::move(ids));
    problem.point = doubtful.place;
    sharing.problems.push_back(std::move(problem));
}

void report_idle_members(const FramedLevel& level, std::uint32_t deck_index,
                         std::span<const std::uint32_t> members, Sharing& sharing) {
    const FramedDeck& deck = level.decks[deck_index];
    std::vector<std::string> ids{deck.id};
    std::string names;
    for (std::size_t i = 0; i < members.size() && i < named_at_most; ++i) {
        ids.push_back(level.members[members[i]].id);
        names += (i > 0 ? ", " : "") + ids.back();
    }
    names += members.size() > named_at_most ? ", ..." : "";
    Problem problem =
        problem_at(ProblemCode::carries_nothing, deck.origin, "decks",
                   start_of(level, deck) + std::to_string(members.size()) +
                       (members.size() == 1 ? " member takes" : " members take") +
                       " nothing of it, since it spans to columns and walls: " + names + '.',
                   "Where members carry the deck, let it span \"two-way\" or \"one-way\".", std::move(ids));
    problem.severity = Severity::note;
    const FramedMember& first = level.members[members.front()];
    problem.point = between(first.from, first.to, 0.5);
    sharing.problems.push_back(std::move(problem));
}

RUNNEL_NAMESPACE_END
