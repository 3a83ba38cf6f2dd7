#include "deck/deck_area.hpp"

#include "deck/acting.hpp"
#include "deck/pressure.hpp"
#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"

#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {

double length_around(const Ring& ring) {
    double length = 0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        length += distance(ring[i], ring[(i + 1) % ring.size()]);
    }
    return length;
}

AreaMoments from_pieces(const FramedDeck& deck, const StripAxes& axes, double noise) {
    Sum area;
    Sum mx;
    Sum my;
    for (const StripPiece& piece : pieces_of_deck(deck, axes, noise)) {
        const AreaMoments part = moments_of(piece);
        area.add(part.area);
        mx.add(part.moment.x);
        my.add(part.moment.y);
    }
    return {area.value(), {mx.value(), my.value()}};
}

} // namespace

AreaMoments moments_of_deck(const FramedDeck& deck, const StripAxes& axes, double noise) {
    AreaMoments whole = moments_of(to_strip(axes, deck.outline), {0, 0});
    double around = length_around(deck.outline);
    for (const Ring& opening : deck.openings) {
        const AreaMoments hole = moments_of(to_strip(axes, opening), {0, 0}); // clockwise: negative
        whole.area += hole.area;
        whole.moment = whole.moment + hole.moment;
        around += length_around(opening);
    }
    if (deck.openings.empty()) {
        return whole;
    }
    // The rings by themselves are the better judge of what a split covers, where they do not overlap.
    const AreaMoments swept = from_pieces(deck, axes, noise);
    return std::abs(swept.area - whole.area) > noise * around ? swept : whole;
}

double area_of_deck(const FramedDeck& deck, double noise) {
    StripAxes axes;
    axes.origin = deck.outline.front();
    return moments_of_deck(deck, axes, noise).area;
}

RUNNEL_NAMESPACE_END
