#include "report/number_text.hpp"

#include <runnel/units.hpp>

#include <doctest/doctest.h>

#include <charconv>
#include <cmath>
#include <random>
#include <string>

using namespace runnel;

namespace {

std::string text_of(double value, double scale) {
    NumberBuffer buffer;
    return std::string(number_text(value, scale, buffer));
}

double read(const std::string& text) {
    double value = 0;
    std::from_chars(text.data(), text.data() + text.size(), value);
    return value;
}

} // namespace

TEST_CASE("a length in feet comes back as it was given") {
    const double foot = si_per_unit({LengthUnit::ft, ForceUnit::kip}, dimension::length);
    for (int inches = 1; inches < 4000; ++inches) {
        const std::string given = std::to_string(inches / 100) + '.' + std::to_string(1 + inches % 9);
        CHECK(text_of(read(given) * foot, foot) == given);
    }
    CHECK(text_of(14 * foot, foot) == "14");
}

TEST_CASE("what a plan gives to fifteen digits comes back to the bit, all else to rounding") {
    constexpr unsigned seed = 20261201;
    INFO("seed ", seed);
    std::mt19937_64 random(seed);
    std::uniform_real_distribution<double> digits(0.1, 1);
    std::uniform_int_distribution<int> power(-8, 8);
    constexpr int count = 20000;
    for (int i = 0; i < count; ++i) {
        const double value = digits(random) * std::pow(10, power(random));
        const double scale = i % 2 == 0 ? 0.3048 : 0.0044482216152605;
        CHECK(read(text_of(value, scale)) * scale == doctest::Approx(value).epsilon(1e-15));

        NumberBuffer buffer;
        const auto [end, error] = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value,
                                                std::chars_format::general, 15);
        const double given = read(std::string(buffer.data(), end)) * scale;
        CHECK(read(text_of(given, scale)) * scale == given);
        CHECK(text_of(given, scale).size() <= std::string(buffer.data(), end).size());
    }
}

TEST_CASE("in the units of the computation a number is the shortest text that reads back") {
    CHECK(text_of(0.1, 1) == "0.1");
    CHECK(text_of(1.0 / 3, 1) == "0.3333333333333333");
    CHECK(text_of(-0.0, 1) == "0");
    CHECK(text_of(-0.0, 0.3048) == "0");
}
