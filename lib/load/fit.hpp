#pragma once

#include <array>
#include <functional>
#include <runnel/export.hpp>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A cubic on from..to of a parameter: c[0] + c[1] y + c[2] y^2 + c[3] y^3 with y = (x - from) / (to - from).
struct CubicPiece {
    double from = 0, to = 0;
    std::array<double, 4> c{};
};

/// Replaces a smooth function on 0..1 by cubics that keep its integral and first moment (the projection on
/// Legendre polynomials keeps them all up to the third), halving where a cubic is off by more than 1e-9 of
/// the largest value, up to 64 pieces.
[[nodiscard]] std::vector<CubicPiece> fit_cubics(const std::function<double(double)>& f);

RUNNEL_NAMESPACE_END
