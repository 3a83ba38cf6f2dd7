#pragma once

#include "support/random_support.hpp"

#include <runnel/plan.hpp>

namespace support {

/// How a drawn building is placed: turned, moved, its lists reversed.
struct Placing {
    double degrees = 0;
    runnel::Point shift;
    bool reversed = false;
};

/// A fictitious framed building of one to four storeys with everything the takedown knows: bays of joist
/// fields or single joists between girders and beams, overhangs, continuous and hinged members, walls,
/// columns that stand on girders, openings, zones, line and point loads. The same seed gives the same
/// building, however it is placed.
[[nodiscard]] runnel::Plan random_building(std::uint64_t seed, const Placing& placing = {});

/// Calls f with every point of columns, members and decks, to change it.
template <class F>
void for_each_point(runnel::Plan& plan, F f) {
    for (runnel::Column& column : plan.columns) {
        f(column.at);
    }
    for (runnel::Level& level : plan.levels) {
        for (runnel::Member& member : level.members) {
            f(member.from);
            f(member.to);
        }
        for (runnel::Deck& deck : level.decks) {
            for (runnel::Point& p : deck.outline) {
                f(p);
            }
            for (runnel::Ring& opening : deck.openings) {
                for (runnel::Point& p : opening) {
                    f(p);
                }
            }
        }
    }
}

/// Gives the decks of a building rules of every kind (two-way, on columns, lever, continuous, corner angles),
/// drawn by lot for each deck by its id, and pressures that vary over planes. What lever and continuous
/// cannot hold by statics is left as it was. `placing` is the building's.
void mix_rules(runnel::Plan& plan, std::uint64_t seed, const Placing& placing = {});

/// Does to a plan what a tired hand does: drops, doubles, moves or turns something.
void spoil(runnel::Plan& plan, Random& random);

} // namespace support
