#pragma once

#include "geometry/basic.hpp"

#include <runnel/deck.hpp>

#include <memory>
#include <span>

RUNNEL_NAMESPACE_BEGIN

/// Brute force from plan and framing alone: who owns a point of a deck by its rule. Shares nothing with the
/// engines that split decks, so that it can judge them.
class OwnerProbe {
public:
    struct Answer {
        bool clear = false; ///< no near tie: every point nearby has the same answer
        bool inside = false;
        std::uint32_t carrier = none; ///< numbered as in Sharing
    };

    OwnerProbe() = default;
    OwnerProbe(const OwnerProbe&) = delete;
    OwnerProbe& operator=(const OwnerProbe&) = delete;
    virtual ~OwnerProbe() = default;

    [[nodiscard]] virtual Answer ask(Point p) const = 0;
    /// Whether a point with this answer may go to that carrier.
    [[nodiscard]] virtual bool accepts(Point /*p*/, const Answer& answer, std::uint32_t owner) const {
        return owner == answer.carrier;
    }
};

/// A member, wall or column that may carry the deck (a column: from == to).
struct ProbedCarrier {
    std::uint32_t number = none; ///< as in Sharing
    Point from, to;
    bool column = false;
};

/// One-way: the nearest carrier along the strip through the point.
[[nodiscard]] std::unique_ptr<OwnerProbe> probe_strips(const FramedDeck& deck, const StripAxes& axes,
                                                       std::span<const ProbedCarrier> carriers,
                                                       Tolerance tolerance);
/// Two-way and columns: the nearest carrier; at a shared end the one at the smallest angle, a column before
/// all.
[[nodiscard]] std::unique_ptr<OwnerProbe>
probe_nearest(const FramedDeck& deck, std::span<const ProbedCarrier> carriers, Tolerance tolerance);
/// Two-way with corners divided by fixity. What this brute force knows of the rule is that no carrier takes a
/// point from more than sqrt(3) times as far as the nearest; the rest is held by tests/laws/fixity_test.cpp.
[[nodiscard]] std::unique_ptr<OwnerProbe>
probe_fixity(const FramedDeck& deck, std::span<const ProbedCarrier> carriers, Tolerance tolerance);

RUNNEL_NAMESPACE_END
