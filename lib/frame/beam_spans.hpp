#pragma once

#include "frame/beam.hpp"

#include <array>
#include <cstdint>
#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A beam as spans between bearings: the direct-stiffness side of BeamInfluence, used by nothing else.
///
/// Unknown are the turns at the bearings alone. A hinge inside a span is condensed into the span's stiffness:
/// the bending moment of the unloaded span is nothing there, so one force is left, that with which the hinge
/// resists being torn apart. The equations are tridiagonal; they are eliminated from the first bearing to the
/// last by the stiffness that each bearing's turn finds on its left, a sum and quotient of positive numbers.
/// Nothing cancels, so that a hinge close to a bearing costs no digits, and what moves freely has a stiffness
/// of exactly nothing.
class BeamSpans {
public:
    static constexpr std::uint32_t known = 0xffffffff;

    struct SpanBetween {
        double from = 0, length = 0;
        double rigidity = 1;                              ///< EI
        std::vector<double> hinges;                       ///< distances from `from`, strictly inside
        std::uint32_t turn_from = known, turn_to = known; ///< unknowns
        /// Stiffness of the two turns: own, shared, own; and own x own - shared x shared without cancelling.
        double near_from = 0, shared = 0, near_to = 0, determinant = 0;
    };
    /// Deflection (positive down) and turn (positive where deflection grows with the station) of a span's
    /// ends.
    struct Ends {
        double move_from = 0, turn_from = 0, move_to = 0, turn_to = 0;
    };
    /// A stretch of the deflected shape: a cubic in (station - from).
    struct Stretch {
        double from = 0;
        std::array<double, 4> cubic{};
    };

    /// Nothing where a part of the beam can move freely, or bearings are missing or coincide.
    [[nodiscard]] static std::optional<BeamSpans> of(const Beam& beam);

    /// The bearing's turn is held: built in, and not freed by a hinge over it.
    [[nodiscard]] bool held(std::size_t support) const { return held_[support]; }
    /// The shape when this bearing alone moves down by one, from the beam's start to its end.
    [[nodiscard]] std::vector<Stretch> moved(std::size_t support) const { return shape(support, false); }
    /// The same when it turns by one.
    [[nodiscard]] std::vector<Stretch> turned(std::size_t support) const { return shape(support, true); }

private:
    [[nodiscard]] bool place_hinges(const Beam& beam);
    void number_turns();
    [[nodiscard]] bool eliminate();
    [[nodiscard]] std::vector<double> turns_for(const std::vector<Ends>& imposed) const;
    [[nodiscard]] std::vector<Stretch> shape(std::size_t support, bool turned) const;

    std::vector<double> stations_; ///< of the bearings
    std::vector<bool> held_;
    std::vector<bool> parted_; ///< a hinge over the bearing
    std::vector<SpanBetween> spans_;
    std::vector<double> pivots_;
};

RUNNEL_NAMESPACE_END
