#include "plan/quantity.hpp"

#include <algorithm>
#include <charconv>
#include <cmath>
#include <cstdlib>
#include <optional>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A unit as mantissa x 10^exponent of kN and m. The power of ten is put into the decimal text before it is
/// read, so "400 mm" and 0.4 are the same double.
struct Unit {
    std::string_view name;
    Dimension dimension;
    double mantissa = 1;
    int exponent = 0;
};

constexpr double pound = 44482216152605.0; ///< x 1e-16 kN, exact by definition
constexpr double foot = 3048.0;            ///< x 1e-4 m
constexpr double inch = 254.0;             ///< x 1e-4 m

constexpr std::array units{
    Unit{"m", dimension::length, 1, 0},
    Unit{"mm", dimension::length, 1, -3},
    Unit{"cm", dimension::length, 1, -2},
    Unit{"ft", dimension::length, foot, -4},
    Unit{"in", dimension::length, inch, -4},
    Unit{"N", dimension::force, 1, -3},
    Unit{"kN", dimension::force, 1, 0},
    Unit{"MN", dimension::force, 1, 3},
    Unit{"lbf", dimension::force, pound, -16},
    Unit{"kip", dimension::force, pound, -13},
    Unit{"Pa", dimension::stress, 1, -3},
    Unit{"kPa", dimension::stress, 1, 0},
    Unit{"MPa", dimension::stress, 1, 3},
    Unit{"GPa", dimension::stress, 1, 6},
    Unit{"psf", dimension::stress, pound / (foot * foot), -8},
    Unit{"ksf", dimension::stress, pound / (foot * foot), -5},
    Unit{"psi", dimension::stress, pound / (inch * inch), -8},
    Unit{"ksi", dimension::stress, pound / (inch * inch), -5},
    Unit{"plf", dimension::line_load, pound / foot, -12},
    Unit{"klf", dimension::line_load, pound / foot, -9},
    Unit{"pcf", dimension::density, pound / (foot * foot * foot), -4},
};

const Unit* find_unit(std::string_view name) {
    const auto it = std::find_if(units.begin(), units.end(), [&](const Unit& u) { return u.name == name; });
    return it == units.end() ? nullptr : &*it;
}

bool is_digit(char c) {
    return c >= '0' && c <= '9';
}
bool is_letter(char c) {
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

/// Takes what a quantity's text is made of from its front.
class Scanner {
public:
    explicit Scanner(std::string_view text) : rest_(text) {}

    [[nodiscard]] bool done() const { return rest_.empty(); }
    [[nodiscard]] std::string_view rest() const { return rest_; }

    bool take(std::string_view token) {
        if (rest_.substr(0, token.size()) != token) {
            return false;
        }
        rest_.remove_prefix(token.size());
        return true;
    }

    bool skip_spaces() {
        const std::size_t before = rest_.size();
        while (take(" ") || take("\u00a0")) {
        }
        return rest_.size() != before;
    }

    /// A JSON-like decimal, as text without its exponent, and the exponent.
    bool number(std::string& digits, long& exponent) {
        digits.clear();
        exponent = 0;
        if (!rest_.empty() && rest_.front() == '+') {
            rest_.remove_prefix(1);
        } else if (take("-") || take("\u2212")) {
            digits.push_back('-');
        }
        const std::size_t sign = digits.size();
        take_digits(digits);
        if (!rest_.empty() && rest_.front() == '.') {
            digits += '.';
            rest_.remove_prefix(1);
            take_digits(digits);
        }
        if (digits.size() == sign || digits.find_first_of("0123456789") == std::string::npos) {
            return false;
        }
        return take_exponent(exponent);
    }

    std::string_view word() {
        std::size_t n = 0;
        while (n < rest_.size() && is_letter(rest_[n])) {
            ++n;
        }
        const std::string_view found = rest_.substr(0, n);
        rest_.remove_prefix(n);
        return found;
    }

    /// The power behind a unit: 2, ^2, ^-2, -2, ². One where there is none; nothing if it is malformed.
    std::optional<int> power() {
        constexpr std::array<std::pair<std::string_view, int>, 4> raised{
            {{"\u00b9", 1}, {"\u00b2", 2}, {"\u00b3", 3}, {"\u2074", 4}}};
        const bool raised_minus = take("\u207b");
        for (const auto& [sign, value] : raised) {
            if (take(sign)) {
                return raised_minus ? -value : value;
            }
        }
        const bool caret = take("^");
        const bool minus = rest_.size() > 1 && rest_[0] == '-' && is_digit(rest_[1]) && take("-");
        if (rest_.empty() || !is_digit(rest_.front())) {
            return caret || raised_minus ? std::nullopt : std::optional(1);
        }
        const int value = rest_.front() - '0';
        rest_.remove_prefix(1);
        return !rest_.empty() && is_digit(rest_.front()) ? std::nullopt
                                                         : std::optional(minus ? -value : value);
    }

private:
    void take_digits(std::string& digits) {
        std::size_t n = 0;
        while (n < rest_.size() && is_digit(rest_[n])) {
            ++n;
        }
        digits += rest_.substr(0, n);
        rest_.remove_prefix(n);
    }

    /// An `e` counts as an exponent only with digits behind it.
    bool take_exponent(long& exponent) {
        if (rest_.size() < 2 || (rest_[0] != 'e' && rest_[0] != 'E')) {
            return true;
        }
        const std::size_t skip = rest_[1] == '+' ? 2 : 1;
        const char* const first = rest_.data() + skip;
        const auto [end, error] = std::from_chars(first, rest_.data() + rest_.size(), exponent);
        if (end == first || error == std::errc::invalid_argument) {
            exponent = 0;
            return true;
        }
        rest_.remove_prefix(static_cast<std::size_t>(end - rest_.data()));
        return error == std::errc{};
    }

    std::string_view rest_;
};

/// What a product of units comes to.
struct Product {
    Dimension dimension;
    double mantissa_over = 1; ///< quotient and product apart, each as exact as doubles allow
    double mantissa_times = 1;
    int exponent = 0;
};

constexpr int highest_power = 9; ///< of one unit or dimension; nothing in the trade comes near

bool multiply(Product& product, const Unit& unit, int power) {
    const int force = product.dimension.force + unit.dimension.force * power;
    const int length = product.dimension.length + unit.dimension.length * power;
    if (std::abs(force) > highest_power || std::abs(length) > highest_power) {
        return false;
    }
    product.dimension = {static_cast<std::int8_t>(force), static_cast<std::int8_t>(length)};
    product.exponent += unit.exponent * power;
    for (int i = 0; i < std::abs(power); ++i) {
        (power > 0 ? product.mantissa_times : product.mantissa_over) *= unit.mantissa;
    }
    return true;
}

/// Units after the number. False with a fault set where they are none.
bool read_units(Scanner& scanner, Product& product, QuantityReading& reading) {
    const std::string_view all = scanner.rest();
    bool divide = false;
    for (bool first = true;; first = false) {
        scanner.skip_spaces();
        const std::string_view start = scanner.rest();
        const std::string_view name = scanner.word();
        const Unit* unit = find_unit(name);
        const std::optional<int> power = unit != nullptr ? scanner.power() : std::nullopt;
        if (unit == nullptr || !power || !multiply(product, *unit, divide ? -*power : *power)) {
            reading.fault = first && start.empty() ? QuantityFault::no_unit : QuantityFault::unknown_unit;
            reading.detail = name.empty() ? std::string(all) : std::string(name);
            return false;
        }
        const bool space = scanner.skip_spaces();
        if (scanner.done()) {
            return true;
        }
        divide = scanner.take("/");
        if (!divide && !scanner.take("*") && !scanner.take("\u00b7") && !scanner.take("\u22c5") && !space) {
            reading.fault = QuantityFault::unknown_unit;
            reading.detail = std::string(all);
            return false;
        }
    }
}

/// The decimal digits x 10^exponent, rounded once.
std::optional<double> decimal(std::string digits, long exponent) {
    constexpr long absurd = 100000;
    digits.push_back('e');
    digits += std::to_string(std::clamp(exponent, -absurd, absurd));
    double value = 0;
    const auto [end, error] = std::from_chars(digits.data(), digits.data() + digits.size(), value);
    if (error != std::errc{} || end != digits.data() + digits.size()) {
        return std::nullopt;
    }
    return value;
}

bool is_zero(const std::string& digits) {
    return digits.find_first_of("123456789") == std::string::npos;
}

QuantityReading finish(const std::string& digits, long exponent, const Product& product) {
    QuantityReading reading;
    if (is_zero(digits)) {
        return reading;
    }
    const std::optional<double> value = decimal(digits, exponent + product.exponent);
    reading.value = value.value_or(0) * product.mantissa_times / product.mantissa_over;
    if (!value || !std::isfinite(reading.value)) {
        reading.fault = QuantityFault::too_large;
    }
    return reading;
}

/// A decimal factor of ten in units.cpp's table, and the rest.
struct DocumentUnit {
    double times = 1;
    double over = 1;
};
constexpr double ten_thousand = 1e4;
constexpr std::array<DocumentUnit, 5> document_lengths{
    {{1, 1}, {1, 1000}, {1, 100}, {foot, ten_thousand}, {inch, ten_thousand}}};
constexpr std::array<DocumentUnit, 5> document_forces{
    {{1, 1000}, {1, 1}, {1000, 1}, {pound, 1e16}, {pound, 1e13}}};

} // namespace

UnitScale scale_to_si(Units document, Dimension dimension) noexcept {
    UnitScale scale;
    const auto raise = [&](const DocumentUnit& unit, int power) {
        for (int i = 0; i < std::abs(power); ++i) {
            scale.times *= power > 0 ? unit.times : unit.over;
            scale.over *= power > 0 ? unit.over : unit.times;
        }
    };
    raise(document_forces[static_cast<std::size_t>(document.force)], dimension.force);
    raise(document_lengths[static_cast<std::size_t>(document.length)], dimension.length);
    if (scale.times > 1 &&
        scale.over > 1) { // keep one of the two where it divides: N and mm2 give 1e3, not 1e6/1e3
        const double quotient = scale.times / scale.over;
        const double inverse = scale.over / scale.times;
        if (quotient == std::floor(quotient)) {
            scale = {quotient, 1};
        } else if (inverse == std::floor(inverse)) {
            scale = {1, inverse};
        }
    }
    return scale;
}

UnitScales::UnitScales(Units document) {
    for (int force = 0; force < 2; ++force) {
        for (std::size_t i = 0; i < lengths; ++i) {
            scales_[static_cast<std::size_t>(force) * lengths + i] =
                scale_to_si(document, {static_cast<std::int8_t>(force),
                                       static_cast<std::int8_t>(lowest_length + static_cast<int>(i))});
        }
    }
}

namespace {
bool read_number(Scanner& scanner, std::string& digits, long& exponent, QuantityReading& reading) {
    scanner.skip_spaces();
    const bool there = scanner.number(digits, exponent);
    if (!there) {
        reading.fault = QuantityFault::no_number;
    }
    return there;
}
} // namespace

QuantityReading read_quantity(std::string_view text, Dimension dimension) {
    QuantityReading reading;
    Scanner scanner(text);
    std::string digits;
    long exponent = 0;
    if (!read_number(scanner, digits, exponent, reading)) {
        return reading;
    }
    Product product;
    if (!read_units(scanner, product, reading)) {
        return reading;
    }
    if (product.dimension != dimension) {
        reading.fault = QuantityFault::other_dimension;
        reading.detail = unit_text(Units{}, product.dimension);
        return reading;
    }
    return finish(digits, exponent, product);
}

QuantityReading read_angle(std::string_view text) {
    QuantityReading reading;
    Scanner scanner(text);
    std::string digits;
    long exponent = 0;
    if (!read_number(scanner, digits, exponent, reading)) {
        return reading;
    }
    scanner.skip_spaces();
    if (!scanner.take("deg")) {
        scanner.take("\u00b0");
    }
    scanner.skip_spaces();
    if (!scanner.done()) {
        reading.fault = QuantityFault::unknown_unit;
        reading.detail = std::string(scanner.rest());
        return reading;
    }
    return finish(digits, exponent, Product{});
}

RUNNEL_NAMESPACE_END
