#pragma once

#include <runnel/export.hpp>
#include <runnel/line_piece.hpp>

#include <array>
#include <cstddef>
#include <functional>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// c[k] of the sum of c[k] y^k with y = 0..1.
using Quartic = std::array<double, 5>;

/// Several functions of one parameter: values[i] is that of function i. `values` comes as it may.
using Functions = std::function<void(double x, std::span<double> values)>;

/// Quartics of several functions of a parameter, each function on pieces of its own. What holds for the
/// functions at every x (that they add up to a load and keep its place) holds for the integrals and first
/// moments of the quartics.
struct QuarticFit {
    struct Piece {
        std::size_t function = 0;
        double from = 0, to = 0; ///< of the parameter: y = (x - from) / (to - from)
        Quartic c{};
        double error = 0; ///< bound of the difference, in the function's unit
    };
    std::vector<Piece> pieces; ///< by function, then rising
};

/// Replaces smooth functions on 0..1 by quartics that keep integrals and first moments (the projection on
/// Legendre polynomials keeps all moments up to the fourth). The worst piece is halved until every piece is
/// within 1e-9 of the largest value of all functions, or a function has 64.
///
/// The bound of a piece is the sum of the Legendre coefficients that were left out, up to the fifteenth, the
/// last four counted twice for what follows them: no Legendre polynomial passes one.
[[nodiscard]] QuarticFit fit_quartics(std::size_t count, const Functions& f);

/// The same where the functions are polynomials of a degree up to four: one piece, found from degree + 1
/// places, exact but for rounding. What rounding leaves of higher powers is left out.
[[nodiscard]] QuarticFit exact_quartics(std::size_t count, std::size_t degree, const Functions& f);

/// A quartic in y between the stations `at_from` (y = 0) and `at_to`, whichever way they run, as a piece of
/// line load.
[[nodiscard]] LinePiece line_between(double at_from, double at_to, Quartic c);

/// Gauss's rule on 0..1: calls use(x, weight); exact up to the power 2 points - 1. At most 5 points, or 16.
void for_gauss_points(std::size_t points, const std::function<void(double x, double weight)>& use);

RUNNEL_NAMESPACE_END
