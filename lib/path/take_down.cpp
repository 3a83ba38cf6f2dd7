#include "path/parallel.hpp"
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

/// The laws of a split, after every split: a broken one is a problem with its place, never a wrong number.
void check_split(const Plan& plan, const Framing& framing, std::uint32_t level, const Sharing& sharing,
                 std::vector<Problem>& broken) {
    constexpr std::uint32_t points_a_deck = 4;
    constexpr std::uint64_t seed = 1; // the same points on every run
    for (std::vector<Problem> found :
         {check_cover(framing, level, sharing), check_disjoint(framing, level, sharing),
          check_owners(plan, framing, level, sharing, points_a_deck, seed)}) {
        append(broken, found);
    }
}

void check_loads(const Plan& plan, const Framing& framing, std::uint32_t level, const PathInput& input,
                 std::vector<Problem>& broken) {
    const Sharing& sharing = input.sharing[level];
    const LevelLoads& loads = input.loads[level];
    for (std::vector<Problem> found : {check_force(plan, framing, level, sharing, loads),
                                       check_moment(plan, framing, level, sharing, loads)}) {
        append(broken, found);
    }
}

/// Splits and loads every level; levels know nothing of each other here. Problems come out in the order of
/// phases, then of levels, whatever the number of threads.
std::vector<Problem> share_and_load(const Plan& plan, const Framing& framing, bool framed, unsigned threads,
                                    PathInput& input) {
    const std::size_t levels = framing.levels.size();
    input.sharing.resize(levels);
    input.areas.resize(levels);
    input.loads.resize(levels);
    std::vector<std::vector<Problem>> broken(levels);
    for_each_index(levels, threads, [&](std::size_t l) {
        const auto level = static_cast<std::uint32_t>(l);
        input.sharing[l] = share_decks(plan, framing, level);
        // Where the framing has errors the laws would tell of those again, as if the program were at fault.
        const bool whole = framed && !has_errors(input.sharing[l].problems);
        if (whole) {
            check_split(plan, framing, level, input.sharing[l], broken[l]);
        }
        input.areas[l] = areas_of(input.sharing[l]);
        input.loads[l] = load_carriers(plan, framing, level, input.sharing[l]);
        if (whole && !has_errors(input.loads[l].problems)) {
            check_loads(plan, framing, level, input, broken[l]);
        }
    });
    std::vector<Problem> problems;
    for (std::size_t l = 0; l < levels; ++l) {
        append(problems, input.sharing[l].problems);
        append(problems, broken[l]);
    }
    for (std::size_t l = 0; l < levels; ++l) {
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

    // Sharing and loads need members, not bearings: their problems are found in the same pass as those of
    // framing.
    PathInput input;
    std::vector<Problem> more = share_and_load(plan, framing, !has_errors(problems), options.threads, input);
    append(problems, more);
    if (has_errors(problems)) {
        return stopped(std::move(plan), std::move(framing), std::move(problems));
    }

    Takedown takedown = pass_down(std::move(plan), std::move(framing), std::move(input));
    append(problems, takedown.problems);
    takedown.problems = std::move(problems);
    return takedown;
}

RUNNEL_NAMESPACE_END
