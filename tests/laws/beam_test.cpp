#include "frame/beam.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <optional>
#include <random>
#include <vector>

using namespace runnel;

namespace {

struct PointLoad1 {
    double station = 0, p = 0;
};
struct Loads {
    std::vector<LinePiece> lines;
    std::vector<PointLoad1> points;
};
struct Effects {
    std::vector<double> reactions, moments;
};

// ---------------------------------------------------------------------------------------------------------------
// The oracle: Macaulay's brackets (Clebsch 1862). Unknown are the deflection and turn at the start, all
// reactions, held moments and the kinks at hinges; a dense system in long double with full pivoting. It
// shares nothing with the library: loads enter by Gauss's five-point rule, exact for degree nine.

using Real = long double;

Real real(double value) {
    return static_cast<Real>(value);
}

Real intensity(const LinePiece& piece, Real t) {
    Real w = 0;
    for (std::size_t k = piece.c.size(); k-- > 0;) {
        w = w * (t - real(piece.from)) + real(piece.c[k]);
    }
    return w;
}

/// Integral of w(t) (s - t)^n / n! over the part of the piece before s.
Real piled(const LinePiece& piece, Real s, int n) {
    const Real from = real(piece.from);
    const Real to = std::min(s, real(piece.to));
    if (to <= from) {
        return 0;
    }
    const Real inner = std::sqrt(5 - 2 * std::sqrt(Real{10} / 7)) / 3;
    const Real outer = std::sqrt(5 + 2 * std::sqrt(Real{10} / 7)) / 3;
    const Real heavy = (322 + 13 * std::sqrt(Real{70})) / 900;
    const Real light = (322 - 13 * std::sqrt(Real{70})) / 900;
    const std::array<std::pair<Real, Real>, 5> rule{
        {{0, Real{128} / 225}, {inner, heavy}, {-inner, heavy}, {outer, light}, {-outer, light}}};
    Real sum = 0;
    for (const auto& [x, weight] : rule) {
        const Real t = (from + to) / 2 + x * (to - from) / 2;
        Real term = intensity(piece, t) * weight * (to - from) / 2;
        for (int i = 1; i <= n; ++i) {
            term *= (s - t) / i;
        }
        sum += term;
    }
    return sum;
}

Real bracket(Real x, int n) {
    if (x < 0 || (n > 0 && x == 0)) {
        return 0;
    }
    Real value = 1;
    for (int i = 1; i <= n; ++i) {
        value *= x / i;
    }
    return value;
}

struct Oracle {
    const Beam& beam;
    std::vector<std::size_t> held;

    explicit Oracle(const Beam& of) : beam(of) {
        for (std::size_t i = 0; i < beam.supports.size(); ++i) {
            if (beam.supports[i].turn_held) {
                held.push_back(i);
            }
        }
    }
    [[nodiscard]] std::size_t size() const {
        return 2 + beam.supports.size() + held.size() + beam.hinges.size();
    }
    /// The d-th derivative of the deflection at s by the unknowns; d = 2 is minus the bending moment, 3 minus
    /// the shear (EI = 1). The load's own part is the last entry.
    [[nodiscard]] std::vector<Real> row(Real s, int d, const Loads& loads) const {
        std::vector<Real> r;
        r.push_back(d == 0 ? 1 : 0);
        r.push_back(d == 0 ? s : (d == 1 ? 1 : 0));
        for (const BeamSupport& support : beam.supports) {
            r.push_back(-bracket(s - real(support.station), 3 - d));
        }
        for (const std::size_t i : held) {
            r.push_back(d > 2 ? 0 : bracket(s - real(beam.supports[i].station), 2 - d));
        }
        for (const double hinge : beam.hinges) {
            r.push_back(d > 1 ? 0 : bracket(s - real(hinge), 1 - d));
        }
        Real load = 0;
        for (const LinePiece& piece : loads.lines) {
            load += piled(piece, s, 3 - d);
        }
        for (const PointLoad1& point : loads.points) {
            load += real(point.p) * bracket(s - real(point.station), 3 - d);
        }
        r.push_back(-load);
        return r;
    }
    [[nodiscard]] std::optional<Effects> solve(const Loads& loads) const {
        std::vector<std::vector<Real>> a;
        for (const BeamSupport& support : beam.supports) {
            a.push_back(row(real(support.station), 0, loads));
        }
        for (const std::size_t i : held) {
            a.push_back(row(real(beam.supports[i].station), 1, loads));
        }
        for (const double hinge : beam.hinges) {
            a.push_back(row(real(hinge), 2, loads));
        }
        a.push_back(row(real(beam.length), 2, loads));
        a.push_back(row(real(beam.length), 3, loads));
        const std::size_t n = size();
        std::vector<std::size_t> order(n);
        for (std::size_t j = 0; j < n; ++j) {
            order[j] = j;
        }
        for (std::size_t k = 0; k < n; ++k) {
            std::size_t row_at = k;
            std::size_t column_at = k;
            for (std::size_t i = k; i < n; ++i) {
                for (std::size_t j = k; j < n; ++j) {
                    if (std::abs(a[i][j]) > std::abs(a[row_at][column_at])) {
                        row_at = i;
                        column_at = j;
                    }
                }
            }
            if (std::abs(a[row_at][column_at]) < real(1e-11)) {
                return std::nullopt; // a mechanism
            }
            std::swap(a[k], a[row_at]);
            std::swap(order[k], order[column_at]);
            for (auto& line : a) {
                std::swap(line[k], line[column_at]);
            }
            for (std::size_t i = 0; i < n; ++i) {
                const Real factor = i == k ? 0 : a[i][k] / a[k][k];
                for (std::size_t j = k; j <= n && factor != 0; ++j) {
                    a[i][j] -= factor * a[k][j];
                }
            }
        }
        std::vector<Real> x(n);
        for (std::size_t k = 0; k < n; ++k) {
            x[order[k]] = a[k][n] / a[k][k];
        }
        Effects effects;
        effects.moments.assign(beam.supports.size(), 0);
        for (std::size_t i = 0; i < beam.supports.size(); ++i) {
            effects.reactions.push_back(static_cast<double>(x[2 + i]));
        }
        for (std::size_t i = 0; i < held.size(); ++i) {
            effects.moments[held[i]] = static_cast<double>(x[2 + beam.supports.size() + i]);
        }
        return effects;
    }
};

// ---------------------------------------------------------------------------------------------------------------

class Dice {
public:
    explicit Dice(unsigned seed) : random_(seed) {}
    double between(double a, double b) { return std::uniform_real_distribution<double>(a, b)(random_); }
    int upto(int n) { return std::uniform_int_distribution<int>(0, n)(random_); }
    bool one_in(int n) { return upto(n - 1) == 0; }

private:
    std::mt19937 random_;
};

Beam random_beam(Dice& dice) {
    Beam beam;
    const int bearings = 1 + dice.upto(6);
    double station = dice.one_in(2) ? 0 : dice.between(0.1, 2);
    for (int i = 0; i < bearings; ++i) {
        beam.supports.push_back({station, false});
        station += dice.one_in(6) ? dice.between(0.05, 0.5) : dice.between(1, 8);
    }
    const double last = beam.supports.back().station;
    beam.length = dice.one_in(2) && bearings > 1 ? last : last + dice.between(0.1, 2);
    beam.supports.front().turn_held = bearings == 1 || dice.one_in(4);
    beam.supports.back().turn_held = bearings == 1 || dice.one_in(4);
    for (int i = 0; i + 1 < bearings; ++i) {
        const double from = beam.supports[static_cast<std::size_t>(i)].station;
        const double to = beam.supports[static_cast<std::size_t>(i) + 1].station;
        for (int k = dice.one_in(3) ? 1 + dice.upto(1) : 0; k > 0; --k) {
            beam.hinges.push_back(dice.between(from, to));
        }
        if (dice.one_in(8) && i + 2 < bearings) {
            beam.hinges.push_back(to);
        }
    }
    if (dice.one_in(10) && last < beam.length) {
        beam.hinges.push_back(dice.between(last, beam.length));
    }
    std::sort(beam.hinges.begin(), beam.hinges.end());
    return beam;
}

Loads random_loads(Dice& dice, const Beam& beam) {
    Loads loads;
    for (int i = 1 + dice.upto(3); i > 0; --i) {
        double a = dice.one_in(3) ? 0 : dice.between(0, beam.length);
        double b = dice.one_in(3) ? beam.length : dice.between(0, beam.length);
        if (a > b) {
            std::swap(a, b);
        }
        LinePiece piece{a, b, {}};
        const int degree = dice.upto(4);
        for (int k = 0; k <= degree; ++k) {
            piece.c[static_cast<std::size_t>(k)] =
                dice.between(-2, 10) / std::pow(beam.length, static_cast<double>(k));
        }
        loads.lines.push_back(piece);
    }
    for (int i = dice.upto(3); i > 0; --i) {
        const auto& support =
            beam.supports[static_cast<std::size_t>(dice.upto(static_cast<int>(beam.supports.size()) - 1))];
        loads.points.push_back(
            {dice.one_in(4) ? support.station : dice.between(0, beam.length), dice.between(-5, 20)});
    }
    return loads;
}

Effects effects_of(const BeamInfluence& influence, const Loads& loads) {
    Effects effects;
    effects.reactions.assign(influence.supports(), 0);
    effects.moments.assign(influence.supports(), 0);
    for (const LinePiece& piece : loads.lines) {
        influence.add_line(piece, effects.reactions, effects.moments);
    }
    for (const PointLoad1& point : loads.points) {
        influence.add_point(point.station, point.p, effects.reactions, effects.moments);
    }
    return effects;
}

double largest(const std::vector<double>& values) {
    double size = 0;
    for (const double value : values) {
        size = std::max(size, std::abs(value));
    }
    return size;
}

} // namespace

TEST_CASE("random beams: reactions and held moments are those of an independent dense solution") {
    constexpr unsigned seed = 41;
    INFO("seed ", seed);
    Dice dice(seed);
    int stood = 0;
    int fell = 0;
    double worst = 0;
    for (int round = 0; round < 3000; ++round) {
        const Beam beam = random_beam(dice);
        const Loads loads = random_loads(dice, beam);
        const auto influence = BeamInfluence::of(beam);
        const auto expected = Oracle(beam).solve(loads);
        INFO("round ", round);
        REQUIRE(influence.has_value() == expected.has_value());
        if (!expected) {
            ++fell;
            continue;
        }
        ++stood;
        const Effects found = effects_of(*influence, loads);
        const double size = largest(expected->reactions);
        for (std::size_t i = 0; i < found.reactions.size(); ++i) {
            worst = std::max(worst, std::abs(found.reactions[i] - expected->reactions[i]) / size);
            REQUIRE(std::abs(found.reactions[i] - expected->reactions[i]) <= 1e-10 * size);
            REQUIRE(std::abs(found.moments[i] - expected->moments[i]) <= 1e-10 * size * beam.length);
        }
    }
    MESSAGE("seed ", seed, ": ", stood, " beams stood, ", fell, " are mechanisms; worst reaction off by ",
            worst, " of the largest");
    CHECK(stood >= 500);
    CHECK(fell >= 100);
}

TEST_CASE("random beams: reactions and held moments balance the load as force and as moment") {
    constexpr unsigned seed = 42;
    INFO("seed ", seed);
    Dice dice(seed);
    double worst = 0;
    for (int round = 0; round < 3000; ++round) {
        const Beam beam = random_beam(dice);
        const auto influence = BeamInfluence::of(beam);
        if (!influence) {
            continue;
        }
        const Loads loads = random_loads(dice, beam);
        const Effects found = effects_of(*influence, loads);
        Real force = 0;
        Real moment = 0;
        Real size = 0;
        for (const LinePiece& piece : loads.lines) {
            const Real total = piled(piece, real(beam.length), 0);
            force += total;
            moment += total * real(beam.length) - piled(piece, real(beam.length), 1);
            size += std::abs(total);
        }
        for (const PointLoad1& point : loads.points) {
            force += real(point.p);
            moment += real(point.p) * real(point.station);
            size += std::abs(real(point.p));
        }
        for (std::size_t i = 0; i < found.reactions.size(); ++i) {
            const Real reaction = real(found.reactions[i]);
            force -= reaction;
            moment -= reaction * real(beam.supports[i].station) + real(found.moments[i]);
            size += std::abs(reaction);
        }
        INFO("round ", round);
        worst = std::max(worst, static_cast<double>(std::abs(force) / size));
        REQUIRE(std::abs(force) <= real(1e-12) * size);
        REQUIRE(std::abs(moment) <= real(1e-12) * size * real(beam.length));
    }
    MESSAGE("seed ", seed, ": worst force left over ", worst, " of the sum of |P|");
}

TEST_CASE("random beams turned end for end: reactions turn with them, held moments change sign") {
    constexpr unsigned seed = 43;
    INFO("seed ", seed);
    Dice dice(seed);
    for (int round = 0; round < 1000; ++round) {
        const Beam beam = random_beam(dice);
        const auto influence = BeamInfluence::of(beam);
        Beam turned = beam;
        std::reverse(turned.supports.begin(), turned.supports.end());
        std::reverse(turned.hinges.begin(), turned.hinges.end());
        for (BeamSupport& support : turned.supports) {
            support.station = beam.length - support.station;
        }
        for (double& hinge : turned.hinges) {
            hinge = beam.length - hinge;
        }
        const auto turned_influence = BeamInfluence::of(turned);
        INFO("round ", round);
        REQUIRE(influence.has_value() == turned_influence.has_value());
        if (!influence) {
            continue;
        }
        Loads loads = random_loads(dice, beam);
        const Effects found = effects_of(*influence, loads);
        for (LinePiece& piece : loads.lines) {
            LinePiece mirrored = piece.between(piece.to, piece.to);
            for (std::size_t k = 1; k < mirrored.c.size(); k += 2) {
                mirrored.c[k] = -mirrored.c[k];
            }
            mirrored.from = beam.length - piece.to;
            mirrored.to = beam.length - piece.from;
            piece = mirrored;
        }
        for (PointLoad1& point : loads.points) {
            point.station = beam.length - point.station;
        }
        Effects mirrored = effects_of(*turned_influence, loads);
        std::reverse(mirrored.reactions.begin(), mirrored.reactions.end());
        std::reverse(mirrored.moments.begin(), mirrored.moments.end());
        const double size = largest(found.reactions);
        for (std::size_t i = 0; i < found.reactions.size(); ++i) {
            REQUIRE(std::abs(found.reactions[i] - mirrored.reactions[i]) <= 1e-10 * size);
            REQUIRE(std::abs(found.moments[i] + mirrored.moments[i]) <= 1e-10 * size * beam.length);
        }
    }
}

TEST_CASE("random beams scaled: k times the load gives k, and k times the length leaves reactions of points "
          "alike") {
    constexpr unsigned seed = 44;
    INFO("seed ", seed);
    Dice dice(seed);
    for (int round = 0; round < 1000; ++round) {
        const Beam beam = random_beam(dice);
        const auto influence = BeamInfluence::of(beam);
        if (!influence) {
            continue;
        }
        Loads loads = random_loads(dice, beam);
        loads.lines.clear();
        const Effects found = effects_of(*influence, loads);
        const double k = dice.between(0.001, 1000);
        Beam longer = beam;
        longer.length *= k;
        for (BeamSupport& support : longer.supports) {
            support.station *= k;
        }
        for (double& hinge : longer.hinges) {
            hinge *= k;
        }
        const auto longer_influence = BeamInfluence::of(longer);
        REQUIRE(longer_influence.has_value());
        for (PointLoad1& point : loads.points) {
            point.station *= k;
            point.p *= 3;
        }
        const Effects scaled = effects_of(*longer_influence, loads);
        const double size = largest(found.reactions);
        INFO("round ", round, ", factor ", k);
        for (std::size_t i = 0; i < found.reactions.size(); ++i) {
            REQUIRE(std::abs(3 * found.reactions[i] - scaled.reactions[i]) <= 1e-10 * size);
            REQUIRE(std::abs(3 * k * found.moments[i] - scaled.moments[i]) <= 1e-10 * k * size * beam.length);
        }
    }
}
