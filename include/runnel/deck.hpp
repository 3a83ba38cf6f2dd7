#pragma once

#include <runnel/export.hpp>
#include <runnel/framing.hpp>
#include <runnel/geometry.hpp>
#include <runnel/grouped.hpp>

#include <array>
#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Axes in which a cell is described: `along` the transfer of load, `across` it (a quarter turn
/// counter-clockwise from along). For one-way decks along is the direction of the strips.
struct StripAxes {
    Point origin;      ///< in the plan
    double cosine = 1; ///< of the angle from +x to along
    double sine = 0;

    /// Plan point to (x = along, y = across).
    [[nodiscard]] Point to_strip(Point p) const noexcept {
        const double x = p.x - origin.x;
        const double y = p.y - origin.y;
        return {x * cosine + y * sine, y * cosine - x * sine};
    }
    [[nodiscard]] Point to_plan(Point p) const noexcept {
        return {origin.x + p.x * cosine - p.y * sine, origin.y + p.x * sine + p.y * cosine};
    }
};

/// A border of a cell: its `along` coordinate as a function of x = (across - from) / (to - from), in 0 to 1:
/// (1 - x) start + x end - bulge x (1 - x). Straight where bulge is 0, else a parabola.
struct Border {
    double start = 0;
    double end = 0;
    double bulge = 0;

    [[nodiscard]] double at(double x) const noexcept {
        return (1 - x) * start + x * end - bulge * x * (1 - x);
    }
};

/// What part of the load at a point of a cell goes to one carrier. The weight is a polynomial of degree three
/// at most in (along - low border); the weights of a cell's transfers add up to one.
struct Transfer {
    std::uint32_t carrier = none; ///< as numbered in Sharing
    double station_from = 0;      ///< on the carrier, at the cell's `from`
    double station_to = 0;        ///< at its `to`; equal to station_from where the load goes to one point
    std::array<double, 4> weight{1, 0, 0, 0};
};

/// A piece of deck with one way of transfer, between two levels of `across` and two borders.
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
/// first. Line and point loads that stand on a deck are shared by it.
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
    Grouped<Transfer> transfers; ///< by cell
    std::vector<Bay> bays;
    std::vector<double> deck_area; ///< by deck: outline less openings, m2
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

/// Splits all decks of a level among the carriers that cross their strips.
///
/// Laws (tests/laws/one_way_test.cpp):
///   (1) cover     cell areas add up to the deck's area less its openings
///   (2) disjoint  no two cells share interior area
///   (3) owner     each point goes to the nearest carrier along its strip, a point of an overhang to the
///   first (4) order     the result does not depend on the order of members (5) motion    turning or moving
///   level and carriers together turns or moves the cells
/// Problems: strip-unsupported, strip-cantilevers with area and place.
/// Cost: O((n + k) log n) for n edges and k crossings.
[[nodiscard]] RUNNEL_EXPORT Sharing share_decks(const Plan& plan, const Framing& framing,
                                                std::uint32_t level);

/// The regions of a sharing, sorted by deck and then carrier.
[[nodiscard]] RUNNEL_EXPORT std::vector<Region> regions_of(const Sharing& sharing);

/// Area in m2 of the cells by carrier, and the area's line along each carrier: breadth of the region (m2 per
/// m).
struct CarrierAreas {
    std::vector<double> area; ///< by carrier number
    struct Piece {
        double from = 0, to = 0;   ///< stations; equal where the area goes to one point
        double start = 0, end = 0; ///< breadth, linear between; where from == to, `start` is the area itself
    };
    Grouped<Piece> pieces; ///< by carrier
};
[[nodiscard]] RUNNEL_EXPORT CarrierAreas areas_of(const Sharing& sharing);

/// Law checkers: recompute the law from the result alone. Empty: it holds.
/// Cover: the areas of each deck's cells add up to its area within `relative` of it.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_cover(const Framing& framing, std::uint32_t level,
                                                             const Sharing& sharing, double relative = 1e-9);
/// Owner: at `samples` points a deck, seeded, the cell that holds the point gives it to the carrier that the
/// rule names (brute force along the strip), and no other cell holds it.
[[nodiscard]] RUNNEL_EXPORT std::vector<Problem> check_owners(const Plan& plan, const Framing& framing,
                                                              std::uint32_t level, const Sharing& sharing,
                                                              std::uint32_t samples, std::uint64_t seed);

RUNNEL_NAMESPACE_END
