#include "load/fit.hpp"

#include <algorithm>
#include <array>
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

/// How much a function's value at a Gauss point adds to its Legendre coefficients.
using Projection = std::array<std::array<double, most_points>, most_points>; ///< by point, by degree

Projection projection_of(const GaussRule& rule) {
    Projection projection{};
    for (std::size_t i = 0; i < rule.node.size(); ++i) {
        for (std::size_t k = 0; k < most_points; ++k) {
            projection[i][k] =
                (2 * static_cast<double>(k) + 1) / 2 * rule.weight[i] * legendre(k, rule.node[i]);
        }
    }
    return projection;
}

/// A stretch of the parameter with the quartics of all functions on it.
struct Tried {
    double from = 0, to = 0;
    std::vector<Quartic> c;
    std::vector<double> error; ///< by function
    double worst = 0;
    std::size_t half = 0; ///< the first of its two halves; 0: it was not halved
};

class Fitter {
public:
    Fitter(std::size_t count, const Functions& f) : f_(f), values_(count), coefficients_(count) {}

    /// Only functions that `whole`, which this stretch is half of, did not fit within `bound`.
    Tried fit(double from, double to, const Tried* whole = nullptr, double bound = 0) {
        wanted_.clear();
        for (std::size_t n = 0; n < values_.size(); ++n) {
            if (whole == nullptr || whole->error[n] > bound) {
                wanted_.push_back(n);
            }
        }
        static const Projection projection = projection_of(rule_of(most_points));
        for (auto& a : coefficients_) {
            a.fill(0);
        }
        const GaussRule& rule = rule_of(most_points);
        for (std::size_t i = 0; i < most_points; ++i) {
            f_(from + (to - from) * (1 + rule.node[i]) / 2, values_);
            for (const std::size_t n : wanted_) {
                for (std::size_t k = 0; k < most_points; ++k) {
                    coefficients_[n][k] += projection[i][k] * values_[n];
                }
            }
        }
        Tried tried{from, to, {}, {}, 0, 0};
        tried.c.reserve(values_.size());
        tried.error.reserve(values_.size());
        for (const auto& a : coefficients_) {
            tried.c.push_back(to_powers({a[0], a[1], a[2], a[3], a[4]}));
            tried.error.push_back(left_out(a));
            tried.worst = std::max(tried.worst, tried.error.back());
        }
        return tried;
    }

    double largest() {
        double largest = 0;
        constexpr int samples = 17;
        for (int i = 0; i < samples; ++i) {
            f_(static_cast<double>(i) / (samples - 1), values_);
            for (const double value : values_) {
                largest = std::max(largest, std::abs(value));
            }
        }
        return largest;
    }

private:
    static double left_out(const std::array<double, most_points>& a) {
        constexpr std::size_t last_four = most_points - 4;
        double sum = 0;
        for (std::size_t k = std::tuple_size_v<Quartic>; k < a.size(); ++k) {
            sum += (k < last_four ? 1 : 2) * std::abs(a[k]);
        }
        return sum;
    }

    const Functions& f_;
    std::vector<double> values_;
    std::vector<std::size_t> wanted_;                           ///< functions
    std::vector<std::array<double, most_points>> coefficients_; ///< Legendre's, by function
};

/// The pieces of one function, rising: halves only where it needs them.
void push_pieces(const std::vector<Tried>& tried, std::size_t at, std::size_t function, double bound,
                 std::vector<QuarticFit::Piece>& pieces) {
    const Tried& one = tried[at];
    if (one.half == 0 || one.error[function] <= bound) {
        pieces.push_back({function, one.from, one.to, one.c[function], one.error[function]});
        return;
    }
    push_pieces(tried, one.half, function, bound, pieces);
    push_pieces(tried, one.half + 1, function, bound, pieces);
}

} // namespace

QuarticFit fit_quartics(std::size_t count, const Functions& f) {
    Fitter fitter(count, f);
    const double bound = wanted * fitter.largest();
    std::vector<Tried> tried{fitter.fit(0, 1)};
    std::vector<std::size_t> leaves{0}; // a heap, the worst on top
    const auto better = [&tried](std::size_t l, std::size_t r) { return tried[l].worst < tried[r].worst; };
    while (tried[leaves.front()].worst > bound && leaves.size() < most_pieces) {
        std::pop_heap(leaves.begin(), leaves.end(), better);
        const std::size_t worst = leaves.back();
        leaves.pop_back();
        const double from = tried[worst].from;
        const double to = tried[worst].to;
        const double middle = (from + to) / 2;
        tried[worst].half = tried.size();
        for (const auto& [start, end] : {std::pair(from, middle), std::pair(middle, to)}) {
            leaves.push_back(tried.size());
            tried.push_back(fitter.fit(start, end, &tried[worst], bound));
            std::push_heap(leaves.begin(), leaves.end(), better);
        }
    }
    QuarticFit result;
    for (std::size_t n = 0; n < count; ++n) {
        push_pieces(tried, 0, n, bound, result.pieces);
    }
    return result;
}

QuarticFit exact_quartics(std::size_t count, std::size_t degree, const Functions& f) {
    const GaussRule& rule = rule_of(degree + 1);
    std::vector<double> values(count);
    std::vector<Quartic> legendre_parts(count);
    for (std::size_t i = 0; i < rule.node.size(); ++i) {
        f((1 + rule.node[i]) / 2, values);
        for (std::size_t k = 0; k <= degree; ++k) {
            const double factor =
                (2 * static_cast<double>(k) + 1) / 2 * rule.weight[i] * legendre(k, rule.node[i]);
            for (std::size_t n = 0; n < count; ++n) {
                legendre_parts[n][k] += factor * values[n];
            }
        }
    }
    QuarticFit result;
    result.pieces.reserve(count);
    constexpr double rounding = 32 * std::numeric_limits<double>::epsilon();
    for (std::size_t n = 0; n < count; ++n) {
        Quartic& a = legendre_parts[n];
        double largest = 0;
        for (const double part : a) {
            largest = std::max(largest, std::abs(part));
        }
        for (double& part : a) {
            part = std::abs(part) <= rounding * largest ? 0 : part;
        }
        result.pieces.push_back({n, 0, 1, to_powers(a), 0});
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
