#pragma once

#include "support/deck_support.hpp"

#include "deck/fixity.hpp"
#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"

#include <cmath>
#include <vector>

namespace support {

/// The framed members as carriers.
inline std::vector<runnel::LineCarrier> carriers_of(const HandFramed& f) {
    std::vector<runnel::LineCarrier> carriers;
    const std::vector<runnel::FramedMember>& members = f.framing.levels[0].members;
    for (std::uint32_t m = 0; m < members.size(); ++m) {
        if (members[m].carries_deck) {
            carriers.push_back({m, members[m].from, members[m].to});
        }
    }
    return carriers;
}

struct FixityShared {
    bool fits = false;
    runnel::Sharing sharing;

    [[nodiscard]] double area(std::uint32_t carrier) const { return runnel::areas_of(sharing).area[carrier]; }
};

/// Shares deck 0 of a level put together by hand by fixity alone.
inline FixityShared share_by_fixity(const HandFramed& f) {
    FixityShared shared;
    shared.sharing.members = static_cast<std::uint32_t>(f.framing.levels[0].members.size());
    const runnel::DecksBeside beside(f.framing.levels[0], f.plan.settings.snap);
    shared.fits = runnel::share_by_fixity(f.plan, f.framing, 0, 0, carriers_of(f), beside, shared.sharing);
    return shared;
}

/// The same level with deck 0 two-way and its corners divided equally, by the whole of the sharing.
inline runnel::Sharing share_equal(HandFramed f) {
    f.level().decks[0].span = runnel::SpanKind::two_way;
    f.level().decks[0].corner_angles = runnel::CornerAngles::equal;
    return f.share();
}

/// The only problem with a code; null: there is none, or there are several.
inline const runnel::Problem* problem_of(const runnel::Sharing& sharing, runnel::ProblemCode code) {
    const runnel::Problem* found = nullptr;
    for (const runnel::Problem& problem : sharing.problems) {
        if (problem.code == code) {
            if (found != nullptr) {
                return nullptr;
            }
            found = &problem;
        }
    }
    return found;
}

/// Beams along all sides of a ring, side by side.
inline void add_beams_around(HandFramed& f, const runnel::Ring& ring) {
    for (std::size_t i = 0; i < ring.size(); ++i) {
        f.add_member(ring[i], ring[(i + 1) % ring.size()]);
    }
}

/// A further deck, 1 m deep, beyond the side from a to b of a deck that lies on its left.
inline void add_deck_beyond(HandFramed& f, runnel::Point a, runnel::Point b) {
    const runnel::Point d = (1 / runnel::distance(a, b)) * (b - a);
    const runnel::Point out{d.y, -d.x};
    f.add_deck({b, a, a + out, b + out}, 0);
}

inline double covered_area(const runnel::Sharing& sharing) {
    runnel::Sum area;
    for (const runnel::Cell& cell : sharing.cells) {
        area.add(runnel::area_of(runnel::StripPiece{cell.from, cell.to, cell.low, cell.high}));
    }
    return area.value();
}

} // namespace support
