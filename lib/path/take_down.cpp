#include "path/path.hpp"

#include <iterator>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

void append(std::vector<Problem>& problems, std::vector<Problem>& more) {
    problems.insert(problems.end(), std::make_move_iterator(more.begin()),
                    std::make_move_iterator(more.end()));
    more.clear();
}

void override_share(Plan& plan, Share share) {
    plan.settings.share = share;
    for (Level& level : plan.levels) {
        for (Deck& deck : level.decks) {
            deck.share.reset();
        }
    }
}

Takedown stopped(Plan plan, Framing framing, std::vector<Problem> problems) {
    Takedown takedown;
    takedown.plan = std::move(plan);
    takedown.framing = std::move(framing);
    takedown.problems = std::move(problems);
    return takedown;
}

/// Shares the decks of every level, and holds them to the law of cover.
std::vector<Problem> share_levels(const Plan& plan, const Framing& framing, PathInput& input) {
    std::vector<Problem> problems;
    for (std::uint32_t l = 0; l < framing.levels.size(); ++l) {
        input.sharing.push_back(share_decks(plan, framing, l));
        const bool shared = !has_errors(input.sharing[l].problems);
        append(problems, input.sharing[l].problems);
        if (shared) {
            std::vector<Problem> broken = check_cover(framing, l, input.sharing[l]);
            append(problems, broken);
        }
    }
    return problems;
}

std::vector<Problem> load_levels(const Plan& plan, const Framing& framing, PathInput& input) {
    std::vector<Problem> problems;
    for (std::uint32_t l = 0; l < framing.levels.size(); ++l) {
        input.areas.push_back(areas_of(input.sharing[l]));
        input.loads.push_back(load_carriers(plan, framing, l, input.sharing[l]));
        append(problems, input.loads[l].problems);
    }
    return problems;
}

} // namespace

Takedown take_down(Plan plan, const TakedownOptions& options) {
    if (options.share) {
        override_share(plan, *options.share);
    }
    Framing framing = frame_plan(plan, options.limits);
    std::vector<Problem> problems = std::move(framing.problems);
    framing.problems.clear();
    if (has_errors(problems)) {
        return stopped(std::move(plan), std::move(framing), std::move(problems));
    }

    PathInput input;
    std::vector<Problem> of_sharing = share_levels(plan, framing, input);
    append(problems, of_sharing);
    if (has_errors(problems)) {
        return stopped(std::move(plan), std::move(framing), std::move(problems));
    }

    std::vector<Problem> of_loads = load_levels(plan, framing, input);
    append(problems, of_loads);
    if (has_errors(problems)) {
        return stopped(std::move(plan), std::move(framing), std::move(problems));
    }

    Takedown takedown = pass_down(std::move(plan), std::move(framing), std::move(input));
    append(problems, takedown.problems);
    takedown.problems = std::move(problems);
    return takedown;
}

RUNNEL_NAMESPACE_END
