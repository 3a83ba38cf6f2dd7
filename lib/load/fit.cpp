#include "load/fit.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t order = 16;
constexpr double wanted = 1e-9; // of the largest ordinate: the bound that the methods page states
constexpr std::size_t most_pieces = 64;

struct GaussRule {
    std::array<double, order> node{};
    std::array<double, order> weight{};
};

double legendre(std::size_t n, double x) {
    double before = 1;
    double value = x;
    if (n == 0) {
        return 1;
    }
    for (std::size_t k = 2; k <= n; ++k) {
        const auto kd = static_cast<double>(k);
        const double next = ((2 * kd - 1) * x * value - (kd - 1) * before) / kd;
        before = value;
        value = next;
    }
    return value;
}

/// Nodes by Newton's iteration from Chebyshev's estimate.
GaussRule make_rule() {
    GaussRule rule;
    constexpr double n = static_cast<double>(order);
    for (std::size_t i = 0; i < order; ++i) {
        double x = std::cos(std::numbers::pi * (static_cast<double>(i) + 0.75) / (n + 0.5));
        double slope = 1;
        constexpr int enough = 8;
        for (int step = 0; step < enough; ++step) {
            slope = n * (x * legendre(order, x) - legendre(order - 1, x)) / (x * x - 1);
            x -= legendre(order, x) / slope;
        }
        slope = n * (x * legendre(order, x) - legendre(order - 1, x)) / (x * x - 1);
        rule.node[i] = x;
        rule.weight[i] = 2 / ((1 - x * x) * slope * slope);
    }
    return rule;
}

using Coefficients = std::array<double, 5>;

/// Legendre coefficients of f on from..to, up to the fourth.
Coefficients project(const std::function<double(double)>& f, double from, double to) {
    static const GaussRule rule = make_rule();
    Coefficients a{};
    for (std::size_t i = 0; i < order; ++i) {
        const double value = f(from + (to - from) * (1 + rule.node[i]) / 2);
        for (std::size_t k = 0; k < a.size(); ++k) {
            a[k] += (2 * static_cast<double>(k) + 1) / 2 * rule.weight[i] * value * legendre(k, rule.node[i]);
        }
    }
    return a;
}

double value_of(const Coefficients& a, double z) {
    double value = 0;
    for (std::size_t k = 0; k < a.size(); ++k) {
        value += a[k] * legendre(k, z);
    }
    return value;
}

/// From Legendre coefficients in z = 2 y - 1 to powers of y (the shifted Legendre polynomials).
Coefficients to_powers(const Coefficients& a) {
    constexpr std::array<Coefficients, 5> shifted{
        {{1, 0, 0, 0, 0}, {-1, 2, 0, 0, 0}, {1, -6, 6, 0, 0}, {-1, 12, -30, 20, 0}, {1, -20, 90, -140, 70}}};
    Coefficients c{};
    for (std::size_t k = 0; k < a.size(); ++k) {
        for (std::size_t i = 0; i < c.size(); ++i) {
            c[i] += a[k] * shifted[k][i];
        }
    }
    return c;
}

/// A piece with what it is off by at most, at Chebyshev's points.
struct Tried {
    double from, to;
    Coefficients a;
    double error;
};

Tried try_piece(const std::function<double(double)>& f, double from, double to) {
    Tried tried{from, to, project(f, from, to), 0};
    constexpr int samples = 9;
    for (int i = 0; i < samples; ++i) {
        const double z = -std::cos(std::numbers::pi * i / (samples - 1));
        const double off = std::abs(f(from + (to - from) * (1 + z) / 2) - value_of(tried.a, z));
        tried.error = std::max(tried.error, off);
    }
    return tried;
}

double largest_of(const std::function<double(double)>& f) {
    double largest = 0;
    constexpr int samples = 33;
    for (int i = 0; i < samples; ++i) {
        largest = std::max(largest, std::abs(f(static_cast<double>(i) / (samples - 1))));
    }
    return largest;
}

} // namespace

std::vector<QuarticPiece> fit_quartics(const std::function<double(double)>& f) {
    const double bound = wanted * largest_of(f);
    const auto better = [](const Tried& l, const Tried& r) { return l.error < r.error; };
    std::vector<Tried> pieces{try_piece(f, 0, 1)}; // a heap, the worst on top
    while (pieces.front().error > bound && pieces.size() < most_pieces) {
        std::pop_heap(pieces.begin(), pieces.end(), better);
        const Tried worst = pieces.back();
        pieces.pop_back();
        const double middle = (worst.from + worst.to) / 2;
        for (const auto& [from, to] : {std::pair(worst.from, middle), std::pair(middle, worst.to)}) {
            pieces.push_back(try_piece(f, from, to));
            std::push_heap(pieces.begin(), pieces.end(), better);
        }
    }
    std::sort(pieces.begin(), pieces.end(), [](const Tried& l, const Tried& r) { return l.from < r.from; });
    std::vector<QuarticPiece> fitted;
    fitted.reserve(pieces.size());
    for (const Tried& piece : pieces) {
        fitted.push_back({piece.from, piece.to, to_powers(piece.a)});
    }
    return fitted;
}

RUNNEL_NAMESPACE_END
