#include "path/influence_pieces.hpp"

#include <utility>

RUNNEL_NAMESPACE_BEGIN

double FloorPieces::area_between(std::uint32_t piece, double from, double to) const {
    const bool all = from <= 0 && to >= 1;
    if (all || piece >= shapes.size()) {
        return areas[piece];
    }
    const StripPiece& shape = shapes[piece];
    const double breadth = shape.to - shape.from;
    return area_of({shape.from + from * breadth, shape.from + to * breadth, stretch_of(shape.low, from, to),
                    stretch_of(shape.high, from, to)});
}

FloorPieces floor_pieces(const Sharing& sharing) {
    FloorPieces pieces;
    std::vector<std::pair<std::uint32_t, Beside>> beside;
    pieces.shapes.reserve(sharing.bays.size());
    pieces.areas.reserve(sharing.bays.size());
    beside.reserve(2 * sharing.bays.size());
    for (const Bay& bay : sharing.bays) {
        const auto piece = static_cast<std::uint32_t>(pieces.shapes.size());
        pieces.shapes.push_back({bay.from, bay.to, bay.low, bay.high});
        pieces.areas.push_back(area_of(pieces.shapes.back()));
        if (bay.low_carrier != none) {
            beside.push_back({bay.low_carrier, {piece, bay.low_station_from, bay.low_station_to, false}});
        }
        if (bay.high_carrier != none) {
            beside.push_back({bay.high_carrier, {piece, bay.high_station_from, bay.high_station_to, false}});
        }
    }
    pieces.beside = Grouped<Beside>::from_pairs(sharing.carrier_count(), std::move(beside));
    return pieces;
}

RUNNEL_NAMESPACE_END
