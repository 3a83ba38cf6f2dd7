#pragma once

#include "deck/strip_beam.hpp"

#include <runnel/deck.hpp>

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A strip with places and stations of its carriers by the level across it.
class StripAtLevels {
public:
    StripAtLevels(const Sharing& sharing, std::uint32_t strip)
        : strip_(sharing.strips[strip]), carriers_(sharing.strip_carriers[strip]) {}

    [[nodiscard]] std::size_t size() const { return carriers_.size(); }
    [[nodiscard]] const Strip& strip() const { return strip_; }
    [[nodiscard]] std::uint32_t carrier(std::size_t i) const { return carriers_[i].carrier; }
    [[nodiscard]] bool alone() const { return carriers_.size() == 1; }
    /// Whether a load's parts vary otherwise than linearly along the strip.
    [[nodiscard]] bool bends() const { return carriers_.size() > 2; }

    /// Levels beside the strip (a load drawn a little off it) count as its nearest.
    [[nodiscard]] double along(std::size_t i, double level) const {
        return carriers_[i].along.at(fraction(level));
    }
    [[nodiscard]] double station(std::size_t i, double level) const {
        const double x = fraction(level);
        return (1 - x) * carriers_[i].station_from + x * carriers_[i].station_to;
    }
    /// How many carriers lie at or below a place.
    [[nodiscard]] std::size_t carriers_below(double along, double level) const;

private:
    [[nodiscard]] double fraction(double level) const {
        return level <= strip_.from ? 0
               : level >= strip_.to ? 1
                                    : (level - strip_.from) / (strip_.to - strip_.from);
    }

    const Strip& strip_;
    std::span<const StripCarrier> carriers_;
};

/// The carriers of a strip that a load reaches: `first` up to, not including, `last`.
struct CarrierWindow {
    std::size_t first = 0, last = 0;

    [[nodiscard]] std::size_t size() const { return last - first; }
};

/// The carriers that take a part worth counting of loads between two places of a level. From span to span
/// what a load bends dies down, to 0.268 of it where spans are equal; where a carrier takes no more than
/// 1e-13 of the load, those beyond are left out. The carriers that stay are a beam of their own, so that
/// force and moment are kept.
[[nodiscard]] CarrierWindow window_around(const StripAtLevels& strip, double from, double to, double level);

/// Sets a beam on the window's carriers at a level.
void set_beam(StripBeam& beam, const StripAtLevels& strip, const CarrierWindow& window, double level,
              std::vector<double>& places);

RUNNEL_NAMESPACE_END
