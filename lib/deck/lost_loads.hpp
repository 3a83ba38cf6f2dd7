#pragma once

#include "deck/level_zones.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <optional>
#include <span>
#include <string>

RUNNEL_NAMESPACE_BEGIN

/// What would be lost of the loads on parts of decks that nothing carries, as text. What acts on which deck
/// is found out once a level, when first asked for: most levels have no such part.
class LostLoads {
public:
    LostLoads(const Plan& plan, const Framing& framing, std::uint32_t level)
        : plan_(plan), framing_(framing), level_(level) {}

    /// By case, as in "dead 3 kN, live 44 kN"; "no load" where nothing acts. `parts`: of the deck, in `axes`.
    [[nodiscard]] std::string text(std::uint32_t deck, const StripAxes& axes,
                                   std::span<const StripPiece> parts);

private:
    const Plan& plan_;
    const Framing& framing_;
    std::uint32_t level_;
    std::optional<Grouped<std::uint32_t>> acting_;
    std::optional<LevelZones> zones_;
};

RUNNEL_NAMESPACE_END
