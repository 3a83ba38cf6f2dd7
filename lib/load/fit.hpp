#pragma once

#include <array>
#include <functional>
#include <runnel/export.hpp>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A quartic on from..to of a parameter: the sum of c[k] y^k with y = (x - from) / (to - from).
struct QuarticPiece {
    double from = 0, to = 0;
    std::array<double, 5> c{};
};

/// Replaces a smooth function on 0..1 by quartics that keep its integral and first moment (the projection on
/// Legendre polynomials keeps all moments up to the fourth). The worst piece is halved until every piece is
/// within 1e-9 of the largest value, or there are 64.
[[nodiscard]] std::vector<QuarticPiece> fit_quartics(const std::function<double(double)>& f);

RUNNEL_NAMESPACE_END
