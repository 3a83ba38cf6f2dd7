#include <runnel/deck.hpp>

#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"

#include <cmath>

RUNNEL_NAMESPACE_BEGIN

CarrierAreas areas_of(const Sharing& sharing) {
    std::vector<Sum> area(sharing.carrier_count());
    std::vector<std::pair<std::uint32_t, CarrierAreas::Piece>> pieces;
    pieces.reserve(sharing.cells.size());
    for (std::size_t c = 0; c < sharing.cells.size(); ++c) {
        if (sharing.transfers[c].empty()) {
            continue;
        }
        // Regions are drawn by halves: a cell counts for its first carrier.
        const Cell& cell = sharing.cells[c];
        const Transfer& transfer = sharing.transfers[c].front();
        const double start = cell.high.start - cell.low.start;
        const double end = cell.high.end - cell.low.end;
        const double bulge = cell.high.bulge - cell.low.bulge;
        const double whole = area_of(StripPiece{cell.from, cell.to, cell.low, cell.high});
        area[transfer.carrier].add(whole);
        const double stretch = std::abs(transfer.station_to - transfer.station_from);
        if (!(stretch > 0)) {
            pieces.push_back(
                {transfer.carrier, {transfer.station_from, transfer.station_from, whole, whole, 0}});
            continue;
        }
        const double scale = (cell.to - cell.from) / stretch;
        if (transfer.station_from < transfer.station_to) {
            pieces.push_back(
                {transfer.carrier,
                 {transfer.station_from, transfer.station_to, start * scale, end * scale, bulge * scale}});
        } else {
            pieces.push_back(
                {transfer.carrier,
                 {transfer.station_to, transfer.station_from, end * scale, start * scale, bulge * scale}});
        }
    }
    CarrierAreas result;
    result.area.reserve(area.size());
    for (const Sum& sum : area) {
        result.area.push_back(sum.value());
    }
    result.pieces = Grouped<CarrierAreas::Piece>::from_pairs(sharing.carrier_count(), std::move(pieces));
    return result;
}

RUNNEL_NAMESPACE_END
