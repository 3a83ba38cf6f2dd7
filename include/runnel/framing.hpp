#pragma once

#include <runnel/export.hpp>
#include <runnel/grouped.hpp>
#include <runnel/plan.hpp>

#include <cstdint>
#include <span>
#include <string>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

inline constexpr std::uint32_t none = 0xffffffff;

enum class CarrierKind : std::uint8_t { member, column, wall };

/// Whatever takes load. A member is counted within its level, columns and walls within the plan.
struct Carrier {
    CarrierKind kind = CarrierKind::member;
    std::uint32_t index = none;

    friend bool operator==(const Carrier&, const Carrier&) = default;
};

/// A bearing of a member: where it rests on a carrier.
struct Bearing {
    double station = 0;    ///< on the member that rests, m from its `from` end
    double on_station = 0; ///< on the carrier, where that is a member or a wall
    Point at;              ///< on the axis of the member that rests
    Point on_at;           ///< on the carrier: within `snap` of `at`
    Carrier on;
    bool fixed = false; ///< built in: turns are held
};

/// A member made ready: snapped, with its bearings found. Generated joists are members like any other.
struct FramedMember {
    std::string id; ///< unique in its level: "G1", "J.3", "J.3.1"
    Role role = Role::beam;
    bool carries_deck = true;
    bool from_field = false;      ///< then `origin` is that of its joist field, else of the member
    Point from, to;               ///< snapped
    double length = 0;            ///< m
    std::uint32_t section = none; ///< index into Plan::sections
    std::vector<double> hinges;   ///< stations, rising; those that `cut` asks for included
    Origin origin;
};

struct FramedDeck {
    std::string id;
    Ring outline;               ///< counter-clockwise, snapped, noded by the ends of members that meet it
    std::vector<Ring> openings; ///< clockwise, snapped
    SpanKind span = SpanKind::one_way;
    Share share = Share::half; ///< what counts on one-way decks
    CornerAngles corner_angles = CornerAngles::equal;
    double direction = 0;  ///< degrees
    double own_weight = 0; ///< kN/m2: `q` and build together
    Origin origin;
};

/// A column or wall whose foot stands on something at this level. A wall may stand on several things, by
/// stretches.
struct Foot {
    Carrier upper; ///< column or wall
    Carrier lower; ///< member of this level, column or wall
    double upper_from = 0,
           upper_to = 0; ///< stretch of the wall that stands there (stations); 0, 0 for a column
    double lower_from = 0, lower_to = 0; ///< stations on the lower carrier that match; equal for a column
    Point at;                            ///< of the column, or of the wall's stretch at `upper_from`
    Point on_at;                         ///< on the lower carrier
    Point to, on_to;                     ///< the same at `upper_to`, walls only
};

/// One floor made ready for sharing: `like` and joist fields expanded, points snapped, bearings found.
struct FramedLevel {
    std::string id;
    double elevation = 0;
    std::uint32_t plan_level = none;

    std::vector<FramedMember>
        members; ///< in the order of the plan: own list first (a `like` level's first), then fields
    Grouped<Bearing> bearings; ///< by member, by rising station
    std::vector<FramedDeck> decks;

    /// Loads after `like`: copies, in order; `point_loads[i]` in messages and sources counts in these lists.
    std::vector<AreaLoad> area_loads;
    std::vector<LineLoad> line_loads;
    std::vector<PointLoad> point_loads;

    std::vector<std::uint32_t>
        columns; ///< plan indices of the columns that are a bearing at this level, rising
    std::vector<std::uint32_t> walls; ///< the same of walls
    std::vector<Foot> feet;           ///< columns and walls above that stand on this level's carriers

    /// The order of the load path: groups of members (one member; later a frame), each group after all groups
    /// that bear on it. Group g holds members order[g].
    Grouped<std::uint32_t> order;
};

/// The plan made ready. Refers to nothing of the plan but indices; the plan must be kept beside it.
struct Framing {
    std::vector<FramedLevel> levels;        ///< as in the plan
    std::vector<std::uint32_t> top_down;    ///< level indices by falling elevation
    std::vector<std::uint32_t> column_base; ///< by column: level index of its foot, or `none` for the ground
    std::vector<std::uint32_t> column_top;  ///< by column: level index
    std::vector<std::uint32_t> wall_base;
    std::vector<std::uint32_t> wall_top;
    double largest_coordinate = 0; ///< of the plan, m: what rounding noise is measured by
    std::vector<Problem> problems;
};

/// Makes a plan ready: expands, snaps, finds who bears on whom, and the order of the load path.
///
/// The plan must be free of errors (check_plan). All problems are found in one pass; with errors among them
/// the framing may be shown but not used. Laws (tests/laws/framing_test.cpp):
///   (1) order     the result does not depend on the order in which members are listed, but for numbering
///   (2) motion    turning or moving the plan turns or moves the result, ids and stations unchanged
///   (3) path      every bearing's carrier comes later in the order than the member that rests on it
///   (4) snap      no point moves by more than `snap`
/// Cost: O((n + k) log n) for n members and k bearings.
[[nodiscard]] RUNNEL_EXPORT Framing frame_plan(const Plan& plan, const Limits& limits = {});

RUNNEL_NAMESPACE_END
