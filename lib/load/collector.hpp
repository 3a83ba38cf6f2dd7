#pragma once

#include "geometry/basic.hpp"

#include <runnel/load.hpp>

#include <cstddef>
#include <cstdint>
#include <span>
#include <tuple>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Force, first moments about the plan's origin and sum of magnitudes, gathered without losing digits.
class ForceGatherer {
public:
    void add(double force, Point moment, double magnitude) {
        force_.add(force);
        x_.add(moment.x);
        y_.add(moment.y);
        magnitude_.add(magnitude);
    }
    [[nodiscard]] ForceSum sum() const {
        return {force_.value(), {x_.value(), y_.value()}, magnitude_.value()};
    }
    [[nodiscard]] bool any() const { return magnitude_.value() != 0; }

private:
    Sum force_, x_, y_, magnitude_;
};

/// Where all loads of a level on its carriers come together, with the account of what each deck put on and
/// shared.
class Collector {
public:
    Collector(const Plan& plan, const FramedLevel& level, const Sharing& sharing, double noise);

    /// `deck`: the deck whose account it goes to, or `none`.
    /// `error`, kN/m: what a line is off by at most where it stands for a curve that is none of degree four.
    void put_line(std::uint32_t carrier, std::uint32_t deck, const CarrierLine& line, double error = 0);
    void put_point(std::uint32_t carrier, std::uint32_t deck, const CarrierPoint& point);
    void applied(std::uint32_t deck, std::uint32_t load_case, double force, Point moment, double magnitude);
    /// Load of a deck that goes to its carrier without the moment of its way there, kNm.
    void note_moved(std::uint32_t deck, std::uint32_t load_case, double moment);

    /// Joins the pieces of each carrier, case and source; sorts; hands everything over.
    [[nodiscard]] LevelLoads finish();

    [[nodiscard]] Point at(std::uint32_t carrier, double station) const;
    [[nodiscard]] double noise() const { return noise_; }
    std::vector<Problem> problems;

private:
    struct Axis {
        Point from;
        Point direction;
    };
    [[nodiscard]] std::size_t row(std::uint32_t deck, std::uint32_t load_case) const {
        return (deck == none ? decks_ : deck) * cases_ + load_case;
    }

    /// What a line of a carrier, case and source is off by over a stretch of it.
    struct CurveError {
        std::uint32_t carrier = 0;
        std::uint32_t load_case = 0;
        Source source;
        double from = 0, to = 0; ///< stations
        double error = 0;

        [[nodiscard]] auto key() const {
            return std::tuple(carrier, load_case, static_cast<int>(source.kind), source.index);
        }
    };
    /// The largest sum, by carrier, case and source, of what is off at one station.
    [[nodiscard]] static double largest_curve_error(std::vector<CurveError>& errors);

    double noise_;
    std::size_t decks_;
    std::size_t cases_;
    std::vector<Axis> axes_; ///< by carrier
    std::vector<std::pair<std::uint32_t, CarrierLine>> lines_;
    std::vector<std::pair<std::uint32_t, CarrierPoint>> points_;
    std::vector<CurveError> curve_errors_;
    std::vector<ForceGatherer> applied_;
    std::vector<ForceGatherer> shared_;
    std::vector<double> moved_;
};

/// Integral of |w| over a piece; exact for pieces that are linear or do not change sign.
[[nodiscard]] double magnitude_of(const LinePiece& piece);

RUNNEL_NAMESPACE_END
