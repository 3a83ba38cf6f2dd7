#include "plan/quantity.hpp"

#include <doctest/doctest.h>

#include <cmath>
#include <string>

using namespace runnel;

namespace {

double value_of(std::string_view text, Dimension dimension) {
    const QuantityReading reading = read_quantity(text, dimension);
    CHECK_MESSAGE(reading.fault == QuantityFault::none, text);
    return reading.value;
}

QuantityFault fault_of(std::string_view text, Dimension dimension) {
    return read_quantity(text, dimension).fault;
}

} // namespace

TEST_CASE("metric quantities are the double nearest to their decimal text") {
    CHECK(value_of("400 mm", dimension::length) == 0.4);
    CHECK(value_of("16270 cm4", dimension::second_moment) == 16270e-8);
    CHECK(value_of("76.8 cm2", dimension::area) == 76.8e-4);
    CHECK(value_of("210 GPa", dimension::stress) == 210e6);
    CHECK(value_of("2.4 kN/m2", dimension::area_load) == 2.4);
    CHECK(value_of("2400 N/m2", dimension::area_load) == 2.4);
    CHECK(value_of("2400 Pa", dimension::area_load) == 2.4);
    CHECK(value_of("2.4 kPa", dimension::area_load) == 2.4);
    CHECK(value_of("0.59 kN/m", dimension::line_load) == 0.59);
    CHECK(value_of("24 kN/m3", dimension::density) == 24);
    CHECK(value_of("3 kN m", dimension::moment) == 3);
    CHECK(value_of("0.7 MPa", dimension::stress) == 700);
}

TEST_CASE("US quantities follow from the exact foot, inch and pound-force") {
    // 1 lbf = 4.4482216152605 N, 1 ft = 0.3048 m, 1 in = 0.0254 m, by definition.
    const double lbf = 4.4482216152605e-3;
    const auto is = [](double found, double expected) { return std::abs(found / expected - 1) < 4e-16; };
    CHECK(is(value_of("50 psf", dimension::area_load), 50 * lbf / (0.3048 * 0.3048)));
    CHECK(is(value_of("40 plf", dimension::line_load), 40 * lbf / 0.3048));
    CHECK(is(value_of("1.2 klf", dimension::line_load), 1200 * lbf / 0.3048));
    CHECK(is(value_of("1.2 kip/ft", dimension::line_load), 1200 * lbf / 0.3048));
    CHECK(is(value_of("2 ksf", dimension::area_load), 2000 * lbf / (0.3048 * 0.3048)));
    CHECK(is(value_of("3000 psi", dimension::stress), 3000 * lbf / (0.0254 * 0.0254)));
    CHECK(is(value_of("29000 ksi", dimension::stress), 29e6 * lbf / (0.0254 * 0.0254)));
    CHECK(is(value_of("150 pcf", dimension::density), 150 * lbf / (0.3048 * 0.3048 * 0.3048)));
    CHECK(is(value_of("12 ft", dimension::length), 3.6576));
    CHECK(is(value_of("640 in4", dimension::second_moment), 640 * 0.0254 * 0.0254 * 0.0254 * 0.0254));
    // Rounded values that handbooks print: 1 psf = 47.88 Pa, 1 ksi = 6.895 MPa.
    CHECK(value_of("1 psf", dimension::area_load) == doctest::Approx(0.04788).epsilon(1e-4));
    CHECK(value_of("1 ksi", dimension::stress) == doctest::Approx(6895).epsilon(1e-4));
}

TEST_CASE("a product or quotient of units is written in several ways") {
    for (const char* text : {"3.5e3 N/m^2", "3500 N/m2", "3.5kN/m2", "3.5 kN / m2", "3.5 kN/m\u00b2",
                             "3.5 kN m-2", "3.5 kN m^-2", "3.5 kN\u00b7m\u207b\u00b2", "3.5 kN/m/m",
                             "+3.5 kN/m2", "  3.5 kN/m2 ", "0.0035 MN/m2", "3.5 kN m/m3", "3.5E0 kPa"}) {
        CAPTURE(text);
        CHECK(value_of(text, dimension::area_load) == 3.5);
    }
    CHECK(value_of("3 kN*m", dimension::moment) == 3);
    CHECK(value_of("3 kN\u00b7m", dimension::moment) == 3);
    CHECK(value_of("-2 kN", dimension::force) == -2);
    CHECK(value_of("\u22122 kN", dimension::force) == -2);
    CHECK(value_of("1 kN/mm m2/m", dimension::force) == 1000);
}

TEST_CASE("a quantity that cannot be read says why") {
    CHECK(fault_of("", dimension::length) == QuantityFault::no_number);
    CHECK(fault_of("m", dimension::length) == QuantityFault::no_number);
    CHECK(fault_of("- 3 m", dimension::length) == QuantityFault::no_number);
    CHECK(fault_of(". m", dimension::length) == QuantityFault::no_number);
    CHECK(fault_of("3", dimension::length) == QuantityFault::no_unit);
    CHECK(fault_of("3 ", dimension::length) == QuantityFault::no_unit);
    CHECK(fault_of("3 metres", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 M", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 kn", dimension::force) == QuantityFault::unknown_unit);
    CHECK(fault_of("3,5 kN", dimension::force) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 kN/", dimension::force) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 kN//m", dimension::line_load) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 m^", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 m12", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 m9 m9", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 m 4", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("3 kN/m", dimension::area_load) == QuantityFault::other_dimension);
    CHECK(fault_of("3 deg", dimension::length) == QuantityFault::unknown_unit);
    CHECK(fault_of("1e309 m", dimension::length) == QuantityFault::too_large);
    CHECK(fault_of("1e99999999999999999999 m", dimension::length) == QuantityFault::no_number);
    CHECK(read_quantity("3 kN/m", dimension::area_load).detail == "kN/m");
    CHECK(read_quantity("3 kN/yd", dimension::line_load).detail == "yd");
}

TEST_CASE("zero is zero in every unit, however it is written") {
    CHECK(value_of("0 mm", dimension::length) == 0);
    CHECK(value_of("0.000 psf", dimension::area_load) == 0);
    CHECK(value_of("0e99 m", dimension::length) == 0);
}

TEST_CASE("angles are degrees, with or without saying so") {
    CHECK(read_angle("90").value == 90);
    CHECK(read_angle("90 deg").value == 90);
    CHECK(read_angle("-12.5\u00b0").value == -12.5);
    CHECK(read_angle("1.57 rad").fault == QuantityFault::unknown_unit);
    CHECK(read_angle("deg").fault == QuantityFault::no_number);
}

TEST_CASE("numbers in a document's units are scaled without rounding twice where the unit is metric") {
    const UnitScales scales(Units{LengthUnit::mm, ForceUnit::N});
    CHECK(scales.of(dimension::length)(5) == 0.005);
    CHECK(scales.of(dimension::length)(6125) == 6.125);
    CHECK(scales.of(dimension::stress)(210000) == 210e6);
    CHECK(scales.of(dimension::line_load)(2.9) == 2.9);
    CHECK(scales.of(dimension::second_moment)(16270e4) == 16270e-8);
    CHECK(scales.of(dimension::area_load)(0.0025) == 2.5);
}

TEST_CASE("a document's units and the same unit in a text give the same value") {
    for (const LengthUnit length :
         {LengthUnit::m, LengthUnit::mm, LengthUnit::cm, LengthUnit::ft, LengthUnit::in}) {
        for (const ForceUnit force :
             {ForceUnit::N, ForceUnit::kN, ForceUnit::MN, ForceUnit::lbf, ForceUnit::kip}) {
            const Units units{length, force};
            for (const Dimension dimension :
                 {dimension::length, dimension::area, dimension::second_moment, dimension::force,
                  dimension::line_load, dimension::area_load, dimension::density, dimension::moment}) {
                const std::string text = "7.25 " + unit_text(units, dimension);
                CAPTURE(text);
                const double from_text = value_of(text, dimension);
                CHECK(std::abs(scale_to_si(units, dimension)(7.25) / from_text - 1) < 1e-15);
                CHECK(std::abs(7.25 * si_per_unit(units, dimension) / from_text - 1) < 2e-15);
            }
        }
    }
}
