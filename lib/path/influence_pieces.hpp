#pragma once

#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// That a piece of floor lies beside a carrier. Where it counts by stretches, its start (0) lies beside
/// `station_from` of the carrier and its end (1) beside `station_to`; either station may be the larger.
struct Beside {
    std::uint32_t piece = none;
    double station_from = 0, station_to = 0;
    bool whole = false; ///< counts whole, however short the stretch
};

/// The floor of a level in pieces, and which of them lie beside each carrier: the one thing that influence
/// areas ask of decks. A load anywhere on a piece is felt by the carriers beside it. Pieces do not overlap,
/// but for some that lie within another one and have more carriers beside them.
///
/// One-way decks: the bays, from carrier to carrier, or from the last carrier to the edge; a deck ends at its
/// outline, also where another goes on. Two-way decks: see influence_panels.hpp; decks on columns: see
/// influence_columns.hpp.
struct FloorPieces {
    std::vector<StripPiece> shapes;    ///< of the first pieces; those after them count whole
    std::vector<double> areas;         ///< by piece, m2
    std::vector<std::uint32_t> within; ///< by piece: that it is part of; none of most
    Grouped<Beside> beside;            ///< by carrier, numbered as in Sharing

    /// Area of a piece between two fractions of it.
    [[nodiscard]] double area_between(std::uint32_t piece, double from, double to) const;
};

[[nodiscard]] FloorPieces floor_pieces(const Plan& plan, const FramedLevel& framed, const Sharing& sharing,
                                       Tolerance tolerance);

RUNNEL_NAMESPACE_END
