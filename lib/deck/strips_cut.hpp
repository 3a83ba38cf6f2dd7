#pragma once

#include <runnel/export.hpp>

#include <cstddef>
#include <functional>
#include <span>

RUNNEL_NAMESPACE_BEGIN

/// Levels across the strips.
struct Levels {
    double from = 0, to = 0;

    [[nodiscard]] bool any() const { return to > from; }
};

/// Narrows levels to where a quantity that is linear in between, and has these values at both ends of
/// `whole`, is not negative.
void keep_where_positive(const Levels& whole, double start, double end, Levels& kept);

/// A bay of a chain, as long along the strips as told at the chain's two levels.
struct ChainBay {
    bool span = false; ///< from carrier to carrier; else an overhang
    double start = 0, end = 0;
    double growth = 0;  ///< of the length, by metre across the strips
    double breadth = 0; ///< of the whole bay across the strips
};

/// The bays `first` up to, not including, `last` of a chain, that act as one beam between two levels.
struct ChainPart {
    std::size_t first = 0, last = 0;
    Levels at;
    bool dying = false; ///< a span that dies out, with the overhangs it holds: shared by lever

    [[nodiscard]] bool same_bays(const ChainPart& other) const {
        return first == other.first && last == other.last && dying == other.dying;
    }
};

/// Cuts a chain of bays into what acts as one beam, and calls `use` for each such part.
///
/// A span shorter than `least_span_ratio` of the one beside it clamps that one, and what its two carriers
/// take grows as one over its length. Where it is as wide all along (carriers parallel within `snap` over
/// the span beside it) that is a number, and the chain runs on. Where it dies out, in a wedge, there is no
/// bounded answer: the chain ends, hinged, at both its carriers, and it is a part of its own. An overhang
/// longer than its back span by more than that ratio is cut off. Cost: O(n + c (n + log c)) for n bays and c
/// levels at which something is cut.
void for_parts(std::span<const ChainBay> bays, const Levels& at, double snap, double noise,
               const std::function<void(const ChainPart&)>& use);

RUNNEL_NAMESPACE_END
