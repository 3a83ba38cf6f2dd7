#pragma once

#include <runnel/export.hpp>
#include <runnel/framing.hpp>
#include <runnel/geometry.hpp>
#include <runnel/grouped.hpp>

#include <array>
#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Where the load of a cell goes: square to the carrier's line, or all of it to one point.
struct Transfer {
    std::uint32_t carrier = none; ///< as numbered in Sharing
    double station_from = 0;      ///< on the carrier, at the cell's `from`
    double station_to = 0;        ///< at its `to`; equal to station_from where the load goes to one point
    double weight = 1;            ///< part of the load; the weights of a cell's transfers add up to one
};

/// A piece of deck that is tributary to one carrier, between two levels of `across` and two borders. (What
/// the drawing is off by, a sliver no higher than `snap`, may be tributary to several in equal parts.)
///
/// Under `half`, on two-way decks and on decks on columns this is also how loads go. Under `lever` and
/// `continuous` the cells are those of the halves, for regions and areas, and loads follow the strips below.
struct Cell {
    std::uint32_t deck = none;
    std::uint32_t axes = 0; ///< index into Sharing::axes
    double from = 0;        ///< across
    double to = 0;
    Border low;
    Border high;
    bool overhang = false;
    enum class CarrierSide : std::uint8_t { neither, low, high };
    CarrierSide carrier_side =
        CarrierSide::neither; ///< which border lies on the carrier of its first transfer
};

/// A stretch of strips of a one-way deck between two neighbouring carriers, or from the deck's edge to the
/// first. Under `half`, line and point loads that stand on a deck are shared by it.
struct Bay {
    std::uint32_t deck = none;
    std::uint32_t axes = 0;
    double from = 0, to = 0;          ///< across
    Border low, high;                 ///< along: the two carriers, or a carrier and an edge
    std::uint32_t low_carrier = none; ///< `none`: an edge
    std::uint32_t high_carrier = none;
    double low_station_from = 0, low_station_to = 0; ///< stations on low_carrier at `from` and `to`
    double high_station_from = 0, high_station_to = 0;
};

/// A carrier under strips: where it lies, and the stations at the strips' two levels.
struct StripCarrier {
    std::uint32_t carrier = none; ///< as numbered in Sharing
    Border along;                 ///< straight
    double station_from = 0, station_to = 0;
};

/// Strips of a one-way deck, between two levels of `across`, that carry as one beam under `lever` or
/// `continuous`. Its carriers, rising along the strips, stand in Sharing::strip_carriers.
///
/// Lever: two carriers a, b; a load at u goes to b by the part (u - a) / (b - a) and to a by the rest,
/// between them and beyond. Continuous: two carriers or more; each takes what a beam of constant stiffness on
/// all of them brings it. Decks under `continuous` have strips under lever where a span dies out in a wedge:
/// there the beam ends on either side of that span. The strips' own load is what lies between `low` and
/// `high`: these need not be carriers.
struct Strip {
    std::uint32_t deck = none;
    std::uint32_t axes = 0;
    double from = 0, to = 0; ///< across
    Border low, high;        ///< along, straight: the deck's part that they carry
    Share share = Share::lever;
};

/// The region of a deck whose load goes to one carrier, for drawing and for its area. The rings lie with the
/// region on their left: outer ones counter-clockwise, holes clockwise.
struct Region {
    std::uint32_t deck = none;
    std::uint32_t carrier = none;
    double area = 0; ///< m2
    Point centroid;
    std::vector<Ring> rings;
};

/// How a level's decks are split among its carriers. Carriers are numbered through: members of the level
/// first, then all walls of the plan, then all columns of the plan.
struct Sharing {
    std::uint32_t members = 0; ///< counts
    std::uint32_t walls = 0;
    std::uint32_t columns = 0;
    std::vector<StripAxes> axes;
    std::vector<Cell> cells;
    Grouped<Transfer> transfers;          ///< by cell
    std::vector<Bay> bays;                ///< of one-way decks
    std::vector<Strip> strips;            ///< of one-way decks under lever and continuous
    Grouped<StripCarrier> strip_carriers; ///< by strip
    std::vector<double> deck_area;        ///< by deck: outline less openings, m2
    std::vector<Problem> problems;

    [[nodiscard]] std::uint32_t carrier_count() const noexcept { return members + walls + columns; }
    [[nodiscard]] std::uint32_t number_of(Carrier carrier) const noexcept {
        switch (carrier.kind) {
        case CarrierKind::member:
            return carrier.index;
        case CarrierKind::wall:
            return members + carrier.index;
        case CarrierKind::column:
            return members + walls + carrier.index;
        }
        return none;
    }
    [[nodiscard]] Carrier carrier(std::uint32_t number) const noexcept {
        if (number < members) {
            return {CarrierKind::member, number};
        }
        if (number < members + walls) {
            return {CarrierKind::wall, number - members};
        }
        return {CarrierKind::column, number - members - walls};
    }
};

/// Splits all decks of a level among the carriers that their rules name: one-way decks among the carriers
/// that cross their strips, two-way decks by the nearest carrying line, decks on columns by the nearest
/// column or wall.
///
/// Laws (tests/laws/one_way_test.cpp, nearest_test.cpp, strips_test.cpp):
///   (1) cover     cell areas add up to the deck's area less its openings
///   (2) disjoint  no two cells share interior area
///   (3) owner     each point goes to the carrier that the rule names
///   (4) order     the result does not depend on the order of members
///   (5) motion    turning or moving level and carriers together turns or moves the cells
///   (6) statics   at every point the parts that a strip's carriers take add up to one, and keep its place
/// Problems: strip-unsupported, strip-cantilevers, strip-unstable, strip-by-lever, strip-clamped and others
/// with area and place.
/// Cost: O((n + k) log n) for n edges and k crossings.
[[nodiscard]] RUNNEL_EXPORT Sharing share_decks(const Plan& plan, const Framing& framing,
                                                std::uint32_t level);

/// How far the chords that draw a region's parabolas may be off, m, unless asked otherwise.
inline constexpr double region_chord_error = 5e-4;

/// The regions of a sharing, sorted by deck and then carrier. Parabolas are drawn by chords that are nowhere
/// more than `chord_error` (m) off, and keep the area.
[[nodiscard]] RUNNEL_EXPORT std::vector<Region> regions_of(const Sharing& sharing,
                                                           double chord_error = region_chord_error);

/// Area in m2 of the cells by carrier, and the area's line along each carrier: breadth of the region (m2 per
/// m).
struct CarrierAreas {
    std::vector<double> area; ///< by carrier number
    struct Piece {
        double from = 0, to = 0; ///< stations; equal where the area goes to one point
        /// Breadth at x = (station - from) / (to - from): (1 - x) start + x end - bulge x (1 - x). Where from
        /// == to, `start` is the area itself.
        double start = 0, end = 0, bulge = 0;
    };
    Grouped<Piece> pieces; ///< by carrier
};
[[nodiscard]] RUNNEL_EXPORT CarrierAreas areas_of(const Sharing& sharing);

/// Law checkers: recompute the law from the result alone. Empty: it holds.
/// Cover: the areas of each deck's cells add up to its area within `relative` of it.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_cover(const Framing& framing, std::uint32_t level,
                                                             const Sharing& sharing, double relative = 1e-9);
/// Disjoint: no two cells of a deck share more area than `relative` of it.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem>
check_disjoint(const Framing& framing, std::uint32_t level, const Sharing& sharing, double relative = 1e-9);
/// Owner: at `samples` points a deck, seeded, the cell that holds the point gives it to the carrier that the
/// rule names (brute force from plan and framing), and no other cell holds it.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_owners(const Plan& plan, const Framing& framing,
                                                              std::uint32_t level, const Sharing& sharing,
                                                              std::uint32_t samples, std::uint64_t seed);

RUNNEL_NAMESPACE_END
