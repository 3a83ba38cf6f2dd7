#include "load/fit.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t most_points = 16;
constexpr double wanted = 1e-9; // of the largest ordinate: the bound that the methods page states
constexpr std::size_t most_pieces = 64;

/// On -1..1.
struct GaussRule {
    std::vector<double> node;
    std::vector<double> weight;
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

/// Nodes by Newton's iteration from Chebyshev's estimate; mirrored, so that symmetry is exact.
GaussRule make_rule(std::size_t points) {
    GaussRule rule;
    rule.node.resize(points);
    rule.weight.resize(points);
    const auto n = static_cast<double>(points);
    const auto slope_at = [&](double x) {
        return n * (x * legendre(points, x) - legendre(points - 1, x)) / (x * x - 1);
    };
    for (std::size_t i = 0; i < (points + 1) / 2; ++i) {
        double x = std::cos(std::numbers::pi * (static_cast<double>(i) + 0.75) / (n + 0.5));
        constexpr int enough = 8;
        for (int step = 0; step < enough; ++step) {
            x -= legendre(points, x) / slope_at(x);
        }
        x = 2 * i + 1 == points ? 0 : x;
        const double slope = slope_at(x);
        rule.node[i] = -x;
        rule.node[points - 1 - i] = x;
        rule.weight[i] = rule.weight[points - 1 - i] = 2 / ((1 - x * x) * slope * slope);
    }
    return rule;
}

const GaussRule& rule_of(std::size_t points) {
    static const std::array<GaussRule, 6> small = [] {
        std::array<GaussRule, 6> rules;
        for (std::size_t n = 1; n < rules.size(); ++n) {
            rules[n] = make_rule(n);
        }
        return rules;
    }();
    static const GaussRule large = make_rule(most_points);
    return points < small.size() ? small[points] : large;
}

/// From Legendre coefficients in z = 2 y - 1 to powers of y (the shifted Legendre polynomials).
Quartic to_powers(const Quartic& a) {
    constexpr std::array<Quartic, 5> shifted{
        {{1, 0, 0, 0, 0}, {-1, 2, 0, 0, 0}, {1, -6, 6, 0, 0}, {-1, 12, -30, 20, 0}, {1, -20, 90, -140, 70}}};
    Quartic c{};
    for (std::size_t k = 0; k < a.size(); ++k) {
        for (std::size_t i = 0; i < c.size(); ++i) {
            c[i] += a[k] * shifted[k][i];
        }
    }
    return c;
}

double value_of(const Quartic& c, double y) {
    return c[0] + y * (c[1] + y * (c[2] + y * (c[3] + y * c[4])));
}

/// A piece with what it is off by at most, at Chebyshev's points.
struct Tried {
    QuarticFit::Piece piece;
    double error = 0;
};

class Fitter {
public:
    Fitter(std::size_t count, const Functions& f) : f_(f), values_(count) {}

    /// Projection on the Legendre polynomials up to a degree.
    QuarticFit::Piece project(double from, double to, std::size_t points, std::size_t degree) {
        QuarticFit::Piece piece{from, to, std::vector<Quartic>(values_.size())};
        const GaussRule& rule = rule_of(points);
        for (std::size_t i = 0; i < rule.node.size(); ++i) {
            f_(from + (to - from) * (1 + rule.node[i]) / 2, values_);
            for (std::size_t k = 0; k <= degree; ++k) {
                const double factor =
                    (2 * static_cast<double>(k) + 1) / 2 * rule.weight[i] * legendre(k, rule.node[i]);
                for (std::size_t n = 0; n < values_.size(); ++n) {
                    piece.c[n][k] += factor * values_[n];
                }
            }
        }
        return piece;
    }

    Tried fit(double from, double to) {
        Tried tried{project(from, to, most_points, 4), 0};
        for (Quartic& c : tried.piece.c) {
            c = to_powers(c);
        }
        constexpr int samples = 9;
        for (int i = 0; i < samples; ++i) {
            const double y = (1 - std::cos(std::numbers::pi * i / (samples - 1))) / 2;
            f_(from + (to - from) * y, values_);
            for (std::size_t n = 0; n < values_.size(); ++n) {
                tried.error = std::max(tried.error, std::abs(values_[n] - value_of(tried.piece.c[n], y)));
            }
        }
        return tried;
    }

    double largest() {
        double largest = 0;
        constexpr int samples = 33;
        for (int i = 0; i < samples; ++i) {
            f_(static_cast<double>(i) / (samples - 1), values_);
            for (const double value : values_) {
                largest = std::max(largest, std::abs(value));
            }
        }
        return largest;
    }

private:
    const Functions& f_;
    std::vector<double> values_;
};

} // namespace

QuarticFit fit_quartics(std::size_t count, const Functions& f) {
    Fitter fitter(count, f);
    const double bound = wanted * fitter.largest();
    const auto better = [](const Tried& l, const Tried& r) { return l.error < r.error; };
    std::vector<Tried> tried; // a heap, the worst on top
    tried.push_back(fitter.fit(0, 1));
    while (tried.front().error > bound && tried.size() < most_pieces) {
        std::pop_heap(tried.begin(), tried.end(), better);
        const double from = tried.back().piece.from;
        const double to = tried.back().piece.to;
        tried.pop_back();
        const double middle = (from + to) / 2;
        tried.push_back(fitter.fit(from, middle));
        std::push_heap(tried.begin(), tried.end(), better);
        tried.push_back(fitter.fit(middle, to));
        std::push_heap(tried.begin(), tried.end(), better);
    }
    QuarticFit result;
    result.error = tried.front().error;
    std::sort(tried.begin(), tried.end(),
              [](const Tried& l, const Tried& r) { return l.piece.from < r.piece.from; });
    for (Tried& one : tried) {
        result.pieces.push_back(std::move(one.piece));
    }
    return result;
}

QuarticFit exact_quartics(std::size_t count, std::size_t degree, const Functions& f) {
    QuarticFit result;
    result.pieces.push_back(Fitter(count, f).project(0, 1, degree + 1, degree));
    constexpr double rounding = 32 * std::numeric_limits<double>::epsilon();
    for (Quartic& c : result.pieces.back().c) {
        double largest = 0;
        for (const double a : c) {
            largest = std::max(largest, std::abs(a));
        }
        for (double& a : c) {
            a = std::abs(a) <= rounding * largest ? 0 : a;
        }
        c = to_powers(c);
    }
    return result;
}

LinePiece line_between(double at_from, double at_to, Quartic c) {
    if (at_to < at_from) {
        // y = 1 - z: a Taylor shift to 1, then the odd powers change sign.
        for (std::size_t i = 0; i + 1 < c.size(); ++i) {
            for (std::size_t k = c.size() - 1; k-- > i;) {
                c[k] += c[k + 1];
            }
        }
        c[1] = -c[1];
        c[3] = -c[3];
        std::swap(at_from, at_to);
    }
    LinePiece piece;
    piece.from = at_from;
    piece.to = at_to;
    const double length = at_to - at_from;
    double scale = 1;
    for (std::size_t k = 0; k < c.size(); ++k) {
        piece.c[k] = c[k] * scale;
        scale /= length;
    }
    return piece;
}

void for_gauss_points(std::size_t points, const std::function<void(double, double)>& use) {
    const GaussRule& rule = rule_of(points);
    for (std::size_t i = 0; i < rule.node.size(); ++i) {
        use((1 + rule.node[i]) / 2, rule.weight[i] / 2);
    }
}

RUNNEL_NAMESPACE_END
