#pragma once

#include <runnel/deck.hpp>
#include <runnel/export.hpp>
#include <runnel/framing.hpp>
#include <runnel/grouped.hpp>
#include <runnel/line_piece.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

enum class SourceKind : std::uint8_t { deck, own_weight, line_load, point_load, member, column, wall };

/// Where a load on a carrier comes from: a deck of the level, the carrier's own weight, line_loads[i] or
/// point_loads[i] of the level, or a member of the level, a column or a wall that rests on it.
struct Source {
    SourceKind kind = SourceKind::deck;
    std::uint32_t index = none;

    friend bool operator==(const Source&, const Source&) = default;
};

/// A line load on a carrier, of one case and one source.
struct CarrierLine {
    std::uint32_t load_case = 0; ///< index into Plan::cases
    Source source;
    LinePiece piece;
};

/// A point load on a carrier, of one case and one source.
struct CarrierPoint {
    std::uint32_t load_case = 0;
    Source source;
    double station = 0; ///< on a column: 0
    double p = 0;       ///< kN
};

/// Force and first moments about the plan's origin, [sum of P x, sum of P y]; `magnitude` is the sum of |P|.
struct ForceSum {
    double force = 0;     ///< kN
    Point moment;         ///< kNm
    double magnitude = 0; ///< kN
};

/// What area loads and own weight put on a deck and what it gave to its carriers, by case.
struct DeckBalance {
    std::uint32_t deck = none; ///< `none`: line and point loads and the members' own weight
    std::uint32_t load_case = 0;
    ForceSum applied; ///< from zones and decks, without looking at carriers
    ForceSum shared;  ///< from the loads on carriers
    /// Under lever and continuous: a bound, kNm, of what the drawing's being off by no more than `snap` moved
    /// (slivers whose load goes to a point, lone strips as narrow as that, carriers beside the deck's edge).
    /// 0 where all is by statics.
    double moved = 0;
};

/// All loads of a level on its carriers before anything is passed on. Carriers are numbered as in Sharing.
struct LevelLoads {
    Grouped<CarrierLine>
        lines; ///< by carrier; sorted by case, source, station; no two of a case and source overlap
    Grouped<CarrierPoint> points; ///< by carrier
    std::vector<DeckBalance> balance;
    /// Where a line stands for a curve that no polynomial of degree four is (strips on skew carriers), it
    /// keeps force and first moment and is off by no more than this, kN/m: the largest sum, by carrier, case
    /// and source, of the bounds of all curves that add up at one station, what joining such lines changes
    /// included. 0: all exact, but for what the rounding of coordinates moves.
    double curve_error = 0;
    std::vector<Problem> problems;
};

/// Turns a level's area, line and point loads and own weights into line and point loads on its carriers.
///
/// Own weight of members counts here (case: the plan's self-weight case); that of columns and walls does not.
/// Laws (tests/laws/pressure_test.cpp, strips_test.cpp):
///   (1) force     by deck and case, what the carriers get is what was put on
///   (2) exact     a uniform load on a straight-edged region is linear along its carrier, a plane of pressure
///                 between parabolas a quartic (tests/laws/pressure_test.cpp)
///   (3) adding    loads of several area loads add up; `replaces` never counts twice
///   (4) motion    turning or moving the level changes no load
/// Problems: load-off-decks, zone-off-decks, pressure-below-zero, load-off-its-carrier,
/// load-beyond-its-carrier.
[[nodiscard]] RUNNEL_EXPORT LevelLoads load_carriers(const Plan& plan, const Framing& framing,
                                                     std::uint32_t level, const Sharing& sharing);

/// Law checkers: recomputed from the loads on carriers. Empty: the law holds.
/// Force: by deck and case, what carriers get is what was put on, within `relative` of the sum of |P|.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_force(const Plan& plan, const Framing& framing,
                                                             std::uint32_t level, const Sharing& sharing,
                                                             const LevelLoads& loads, double relative = 1e-9);
/// Moment: the same for first moments, within `relative` of the sum of |P| times the deck's size, on one-way
/// decks under `lever` and `continuous`. The other rules shift loads to carriers by their nature.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_moment(const Plan& plan, const Framing& framing,
                                                              std::uint32_t level, const Sharing& sharing,
                                                              const LevelLoads& loads,
                                                              double relative = 1e-9);

RUNNEL_NAMESPACE_END
