#include "deck/lost_loads.hpp"

#include "deck/pressure.hpp"
#include "geometry/basic.hpp"
#include "plan/problems.hpp"

#include <vector>

RUNNEL_NAMESPACE_BEGIN

std::string LostLoads::text(std::uint32_t deck, const StripAxes& axes, std::span<const StripPiece> parts) {
    const FramedLevel& level = framing_.levels[level_];
    const double noise = noise_of(framing_.largest_coordinate);
    if (!acting_) {
        acting_ = area_loads_by_deck(level, noise);
        zones_.emplace(level, noise);
    }
    const DeckPressure pressure(plan_, level, deck, (*acting_)[deck], *zones_, axes, noise);
    std::vector<double> lost(plan_.cases.size(), 0.0);
    std::vector<DeckPressure::Piece> pieces;
    for (const StripPiece& where : parts) {
        for (const DeckPressure::Uniform& u : pressure.uniform()) {
            lost[u.load_case] += u.q * area_of(where);
        }
        pressure.zones_over(where, axes, pieces);
        for (const DeckPressure::Piece& piece : pieces) {
            lost[piece.load_case] += moments_of(piece.where, piece.intensity).area;
        }
    }
    std::string text;
    for (std::size_t c = 0; c < lost.size(); ++c) {
        if (lost[c] != 0) {
            text += (text.empty() ? "" : ", ") + plan_.cases[c].id + ' ' + force_text(lost[c], plan_.units);
        }
    }
    return text.empty() ? "no load" : text;
}

RUNNEL_NAMESPACE_END
