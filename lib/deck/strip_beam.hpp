#pragma once

#include <runnel/export.hpp>

#include <cstddef>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A back span shorter than this part of what hangs on it holds nothing up, and a span of a continuous strip
/// that is shorter than this part of the one beside it clamps more than it carries.
inline constexpr double least_span_ratio = 1.0 / 20;

/// A strip as a beam of constant stiffness on carriers that do not give way, with overhangs: the
/// three-moment equation (Clapeyron 1857). On two carriers that is the lever, on one all goes to it.
///
/// Places are `along` in m, loads in kN or kN/m, downward; what a carrier takes is positive where it pushes
/// up. Laws (tests/laws/strips_test.cpp):
///   (1) force   what the carriers take adds up to the load
///   (2) moment  and has its moment about any point
///   (3) beam    it is what an independent solution of the beam gives
/// Reuse one object: it keeps its memory. Cost: O(n) for n carriers, and O(log n) a load.
class StripBeam {
public:
    /// Takes new carriers, rising, and forgets the loads.
    void set(std::span<const double> at);
    void unload();

    void add_point(double at, double load);
    /// A load that is linear between two places, `to` not before `from`.
    void add_line(double from, double to, double w_from, double w_to);

    /// What each carrier takes of the loads added.
    void reactions(std::span<double> taken);

private:
    [[nodiscard]] std::size_t stretch_of(double at) const;
    void add_in(std::size_t stretch, double at, double load);

    std::vector<double> at_;
    std::vector<double> span_;   ///< span i: from carrier i to carrier i + 1
    std::vector<double> passed_; ///< by carrier: Thomas's elimination, the part of the next moment
    std::vector<double> pivot_;
    std::vector<double> simple_;              ///< by carrier: as if each span were a simple beam
    std::vector<double> term_;                ///< by carrier: right side of its three-moment equation
    std::vector<double> moment_;              ///< by carrier: sagging positive
    double low_moment_ = 0, high_moment_ = 0; ///< at the outer carriers, from overhangs
    bool collapsed_ = false;                  ///< carriers on one spot: the tip of a wedge of deck
};

RUNNEL_NAMESPACE_END
