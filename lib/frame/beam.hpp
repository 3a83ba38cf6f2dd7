#pragma once

#include <runnel/line_piece.hpp>

#include <array>
#include <cstddef>
#include <optional>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

struct BeamSupport {
    double station = 0;     ///< m
    bool turn_held = false; ///< built in
};

/// A straight beam on rigid bearings, loaded downward square to its axis.
struct Beam {
    double length = 0;                 ///< m
    std::vector<BeamSupport> supports; ///< by rising station
    std::vector<double> hinges;        ///< stations, rising; at a bearing the beam is parted over it
    /// EI of each stretch between bearings, in any unit, since reactions depend on ratios only; empty:
    /// constant.
    std::vector<double> span_stiffness;
};

/// What each bearing of a beam returns for a unit load at any station, exactly.
///
/// The influence line of a reaction or of a held moment is the shape that the unloaded beam takes when that
/// bearing alone is moved or turned by one (Mueller-Breslau 1886): a cubic between bearings and hinges,
/// straight beyond the last bearing. Each shape is one solution by direct stiffness (BeamSpans). The effect
/// of any load then is the integral of intensity times cubic, worked out exactly.
///
/// Reactions are positive upward. Held moments act on the beam, positive where they hold a cantilever that
/// runs in the direction of rising stations. Laws (tests/laws/beam_test.cpp):
///   (1) balance   reactions add up to the load; reactions and held moments to its first moment
///   (2) reversal  a beam turned end for end has its reactions turned end for end, and held moments of other
///   sign (3) scaling   k times the load gives k times, k times the length the same reactions for point loads
class BeamInfluence {
public:
    /// Nothing where the beam is a mechanism, or has two bearings at one station.
    [[nodiscard]] static std::optional<BeamInfluence> of(const Beam& beam);

    [[nodiscard]] std::size_t supports() const noexcept { return supports_; }

    /// Adds what a point load, kN, gives to `reactions` and `moments`, one value a bearing. `moments` may be
    /// empty where no turn is held.
    void add_point(double station, double p, std::span<double> reactions, std::span<double> moments) const;
    /// The same of a stretch of line load that lies on the beam.
    void add_line(const LinePiece& piece, std::span<double> reactions, std::span<double> moments) const;

private:
    using Cubic = std::array<double, 4>; ///< in (station - start of the element)

    [[nodiscard]] std::size_t element_at(double station) const;
    /// Adds the sum of moments[k] times the k-th Taylor coefficient of each influence line at `station`.
    void add_moments(std::size_t element, double station, const std::array<double, 4>& load_moments,
                     std::span<double> reactions, std::span<double> moments) const;

    std::size_t supports_ = 0;
    std::vector<double> starts_;    ///< of the elements, rising; the first is 0
    std::vector<std::size_t> held_; ///< supports whose turn is held and not freed by a hinge
    std::vector<Cubic> shapes_;     ///< (supports, then held) x elements, row-major
};

RUNNEL_NAMESPACE_END
