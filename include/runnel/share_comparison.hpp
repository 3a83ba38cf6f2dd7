#pragma once

#include <runnel/takedown.hpp>

#include <cstdint>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// One takedown of a comparison.
struct ShareRun {
    std::optional<Share> share; ///< of all decks; none: decks keep those of the plan, which are not all alike
    bool own = false;           ///< what the plan, or the options, ask for: the others are measured by it
    bool complete = false;
    std::vector<Problem> problems; ///< errors that stopped it
};

/// What one carrier gets under each share.
struct ComparedCarrier {
    Carrier carrier;
    std::uint32_t level = none; ///< of the member; of a column or wall: at the head of its lowest lift
    /// Runs x cases, row-major, kN: of a member all load on it, of a column or wall that at its lowest foot.
    std::vector<double> total;
    /// The same of the member's largest reaction, case by case; empty for columns and walls.
    std::vector<double> largest_reaction;
    /// The largest difference from the own run, by total or reaction in any case, as part of what that run
    /// gives in all cases together; infinite where that is nothing. Differences of rounding count as none.
    double difference = 0;
};

/// Which of a carrier's values: &ComparedCarrier::total or &ComparedCarrier::largest_reaction.
using ComparedValues = std::vector<double> ComparedCarrier::*;

/// Which of a carrier's values, by run and case.
struct RunCase {
    std::size_t run = 0; ///< index into ShareComparison::runs
    std::size_t load_case = 0;
};

/// The loads of a plan under each way of sharing its one-way decks.
struct ShareComparison {
    std::vector<ShareRun> runs; ///< half, lever, continuous; before them the plan's own where it mixes them
    std::size_t own = 0;        ///< index into `runs`
    std::size_t cases = 0;
    /// By falling difference, then in the order of the plan: columns, then walls; and members by level.
    std::vector<ComparedCarrier> supports;
    std::vector<ComparedCarrier> members;

    /// Difference of a value from that of the own run, in per cent; none where the own one is nothing and the
    /// value is not, where either run was stopped, or the carrier has no such value.
    [[nodiscard]] RUNNEL_EXPORT std::optional<double> percent(const ComparedCarrier& carrier,
                                                              ComparedValues values, RunCase at) const;

    double noise = 0; ///< kN: what rounding may make of a difference
};

/// Takes the loads down under half, lever and continuous. A share that errors stop says so in its run, and
/// the others go on; without any complete one there is nothing to compare. The plan must be free of errors.
[[nodiscard]] RUNNEL_EXPORT ShareComparison compare_shares(const Plan& plan,
                                                           const TakedownOptions& options = {});
/// The same where the plan's own takedown is there already. `options.share` was used there, and not here.
[[nodiscard]] RUNNEL_EXPORT ShareComparison compare_shares(const Takedown& own,
                                                           const TakedownOptions& options = {});

RUNNEL_NAMESPACE_END
