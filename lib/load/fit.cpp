#include "load/fit.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

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

/// Legendre coefficients of f on from..to, up to the third.
std::array<double, 4> project(const std::function<double(double)>& f, double from, double to) {
    static const GaussRule rule = make_rule();
    std::array<double, 4> a{};
    for (std::size_t i = 0; i < order; ++i) {
        const double value = f(from + (to - from) * (1 + rule.node[i]) / 2);
        for (std::size_t k = 0; k < a.size(); ++k) {
            a[k] += (2 * static_cast<double>(k) + 1) / 2 * rule.weight[i] * value * legendre(k, rule.node[i]);
        }
    }
    return a;
}

double value_of(const std::array<double, 4>& a, double z) {
    return a[0] + a[1] * z + a[2] * (3 * z * z - 1) / 2 + a[3] * (5 * z * z * z - 3 * z) / 2;
}

/// From Legendre coefficients in z = 2 y - 1 to powers of y.
CubicPiece to_powers(const std::array<double, 4>& a, double from, double to) {
    return {from,
            to,
            {a[0] - a[1] + a[2] - a[3], 2 * a[1] - 6 * a[2] + 12 * a[3], 6 * a[2] - 30 * a[3], 20 * a[3]}};
}

double error_of(const std::function<double(double)>& f, const std::array<double, 4>& a, double from,
                double to) {
    constexpr int samples = 9;
    double error = 0;
    for (int i = 0; i < samples; ++i) {
        const double z = -std::cos(std::numbers::pi * i / (samples - 1));
        error = std::max(error, std::abs(f(from + (to - from) * (1 + z) / 2) - value_of(a, z)));
    }
    return error;
}

} // namespace

std::vector<CubicPiece> fit_cubics(const std::function<double(double)>& f) {
    double largest = 0;
    constexpr int samples = 33;
    for (int i = 0; i < samples; ++i) {
        largest = std::max(largest, std::abs(f(static_cast<double>(i) / (samples - 1))));
    }
    std::vector<std::pair<double, double>> open{{0, 1}};
    std::vector<CubicPiece> done;
    while (!open.empty()) {
        const auto [from, to] = open.back();
        open.pop_back();
        const std::array<double, 4> a = project(f, from, to);
        const bool full = done.size() + open.size() + 1 >= most_pieces;
        if (full || error_of(f, a, from, to) <= wanted * largest) {
            done.push_back(to_powers(a, from, to));
        } else {
            const double middle = (from + to) / 2;
            open.emplace_back(middle, to);
            open.emplace_back(from, middle);
        }
    }
    return done;
}

RUNNEL_NAMESPACE_END
