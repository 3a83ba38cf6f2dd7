#pragma once

#include <runnel/deck.hpp>
#include <runnel/export.hpp>
#include <runnel/framing.hpp>
#include <runnel/load.hpp>
#include <runnel/plan.hpp>

#include <cstdint>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// What a bearing returns of one load column: one case, one span of the member that the load stands on, one
/// source. Case totals are sums of these.
struct ReactionColumn {
    std::uint32_t load_case = 0;
    std::uint32_t span = 0; ///< index into the member's spans, overhangs counted
    Source source;
};

/// A stretch of a member between bearings, or beyond the last.
struct Span {
    double from = 0, to = 0; ///< stations
    bool overhang = false;
};

/// A level after the takedown.
struct LevelTakedown {
    Sharing sharing;
    LevelLoads loads; ///< before anything is passed on

    Grouped<CarrierLine> lines;   ///< by carrier: final, walls standing on members included
    Grouped<CarrierPoint> points; ///< by carrier: final, with what other carriers brought

    /// By bearing (FramedLevel::bearings.items()) and case, row-major: reactions in kN, positive upward.
    std::vector<double> reactions;
    /// Same shape, kNm: moments at built-in bearings, acting on the member; positive where they hold a
    /// cantilever that runs in the direction of rising stations (`from` end) or of falling ones (`to` end).
    /// Empty: none is built in.
    std::vector<double> fixed_moments;
    /// By member: its load columns, and their reactions (columns x bearings of the member, row-major), in two
    /// lists that march together: the reactions of column k of member m start at
    /// column_reactions[column_start[m] + k * bearings of m].
    Grouped<ReactionColumn> columns;
    std::vector<double> column_reactions;
    std::vector<std::size_t> column_start;

    Grouped<Span> spans;             ///< by member
    std::vector<double> region_area; ///< by carrier, m2
    std::vector<double>
        tributary_area; ///< by carrier, m2: own regions and what comes through members it carries
    /// By carrier, m2: the floor of this level on which a load is felt by the carrier. The full bays (not
    /// halves) beside it, and of each member that bears on it the influence area of its spans on both sides
    /// of that bearing; what comes by two ways counts once. Never less than the tributary area. A deck ends
    /// at its outline: where two meet and no carrier runs between them, neither is felt by the other's
    /// carriers, as none of its load goes to them.
    std::vector<double> influence_area;
};

/// The closing of a sum by case: applied = shared = arrived, as force and first moment about the plan's
/// origin.
struct Balance {
    std::uint32_t load_case = 0;
    ForceSum applied, shared, arrived;
    double difference = 0;   ///< the largest disagreement of the three forces, kN
    Point moment_difference; ///< of shared and arrived, kNm
    double area = 0;         ///< deck area, m2; per_area is applied / area
    bool closes = true;      ///< both within 1e-9 of the sum of |P| (times the plan's size for moments)
};

/// A load that came to a column's head.
struct LiftLoad {
    Source source; ///< member of the lift's level, column or wall above, or a load put straight on it
    std::uint32_t load_case = 0;
    double p = 0;
};

/// One column between two levels, named by the level at its head.
struct Lift {
    std::uint32_t level = none;
    double height = 0;         ///< m, down to the next level it passes or to its foot
    double tributary_area = 0; ///< m2, of this level
    double influence_area = 0; ///< m2, of this level
    double area_total = 0;     ///< m2, with the levels above
    std::uint32_t floors = 0;  ///< that bring it area
    std::vector<LiftLoad>
        from; ///< loads that come in at its head from this level (columns above are `column` sources)
    std::vector<double>
        added;              ///< by case, kN: sum of `from` without columns and walls above on the same line
    double self_weight = 0; ///< kN, in the plan's self-weight case
    std::vector<double> total; ///< by case, kN, at its foot, own weight included
};

struct WallLift {
    std::uint32_t level = none;
    double height = 0;
    double tributary_area = 0, influence_area = 0, area_total = 0;
    std::uint32_t floors = 0;
    double self_weight = 0;        ///< kN, whole wall
    std::vector<CarrierLine> line; ///< at its foot, own weight included; sources merged by case
    std::vector<CarrierPoint> point;
    std::vector<double> total; ///< by case, kN
};

struct ColumnTakedown {
    std::vector<Lift> lifts; ///< from the top down
};
struct WallTakedown {
    std::vector<WallLift> lifts;
};

/// What arrives at the ground under a column or wall; characteristic, by case.
struct Foundation {
    Carrier under;                 ///< column or wall
    std::vector<double> reactions; ///< by case, kN
};

struct Uplift {
    std::uint32_t level = none; ///< of the member that lifts; `none` for a foundation
    std::uint32_t member = none;
    std::uint32_t bearing = none; ///< index within the member
    Carrier on;                   ///< the carrier it lifts from; for a foundation, what stands there
    double value = 0;             ///< kN, negative: all cases together, factor 1
    Carrier upper; ///< where `member` is `none` on a level: the column or wall whose foot lifts
};

/// Everything the takedown found. Levels are as in Framing.
struct Takedown {
    Plan plan; ///< as given, with the share that the options ask for
    Framing framing;
    std::vector<LevelTakedown> levels;
    std::vector<std::vector<Balance>> level_balance; ///< by level, by case
    std::vector<Balance> balance;                    ///< of the building, by case
    std::vector<ColumnTakedown> columns;
    std::vector<WallTakedown> walls;
    std::vector<Foundation> foundations; ///< in the order of the plan: columns, then walls
    std::vector<Uplift> uplift;
    std::uint32_t self_weight_case = none; ///< index into the plan's cases
    std::vector<Problem> problems;         ///< of framing, sharing, loads and path together
    bool complete = false;                 ///< false: errors stopped it, only `problems` counts
};

struct TakedownOptions {
    std::optional<Share> share; ///< overrides the plan's setting
    unsigned threads = 1;       ///< for levels side by side; the result is the same with any number
    Limits limits;
};

/// Carries all loads of a plan down to the foundations.
///
/// The plan must be free of errors (read_plan or check_plan). Framing, sharing and loads are all gone through
/// for their problems; with errors among them nothing is passed down.
///
/// Laws (tests/laws/takedown_test.cpp): balance (force and moment, level and building), order, motion.
[[nodiscard]] RUNNEL_EXPORT Takedown take_down(Plan plan, const TakedownOptions& options = {});

/// Law checker: recomputes every balance from loads and foundations alone. Empty: all close.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_balance(const Takedown& takedown);

RUNNEL_NAMESPACE_END
