#include "plan/problems.hpp"

#include <array>
#include <charconv>
#include <cmath>
#include <limits>

RUNNEL_NAMESPACE_BEGIN

std::string pointer_to(const Origin& origin, std::string_view list) {
    std::string text;
    if (origin.level != Origin::nowhere) {
        text += "/levels/" + std::to_string(origin.level);
    }
    if (!list.empty()) {
        text += '/';
        text += list;
        if (origin.index != Origin::nowhere) {
            text += '/' + std::to_string(origin.index);
        }
    }
    return text;
}

Problem problem_at(ProblemCode code, const Origin& origin, std::string_view list, std::string message,
                   std::string hint, std::vector<std::string> ids) {
    Problem problem;
    problem.code = code;
    problem.severity = kind_of(code).severity;
    problem.message = std::move(message);
    problem.hint = std::move(hint);
    problem.pointer = pointer_to(origin, list);
    problem.line = origin.line;
    problem.column = origin.column;
    problem.ids = std::move(ids);
    return problem;
}

Problem problem_inside(ProblemCode code, const Origin& origin, std::string_view list, std::string_view inside,
                       std::string message, std::string hint, std::vector<std::string> ids) {
    Problem problem = problem_at(code, origin, list, std::move(message), std::move(hint), std::move(ids));
    problem.pointer += inside;
    problem.line = 0;
    problem.column = 0;
    return problem;
}

namespace {
std::string shortest(double value) {
    std::array<char, 40> buffer;
    const auto [end, error] = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value);
    return {buffer.data(), end};
}
} // namespace

std::string exact_text(double value) {
    return shortest(value == 0 ? 0.0 : value);
}

std::string text_of(double value) {
    std::array<char, 64> buffer;
    const bool plain = value == 0 || (std::abs(value) >= 1e-4 && std::abs(value) < 1e9);
    const auto [end, error] = plain ? std::to_chars(buffer.data(), buffer.data() + buffer.size(),
                                                    value == 0 ? 0.0 : value, std::chars_format::general, 6)
                                    : std::to_chars(buffer.data(), buffer.data() + buffer.size(), value,
                                                    std::chars_format::general, 3);
    std::string text(buffer.data(), end);
    if (plain && text.find('e') != std::string::npos) {
        const auto [fixed_end, fixed_error] =
            std::to_chars(buffer.data(), buffer.data() + buffer.size(), value, std::chars_format::fixed, 0);
        text.assign(buffer.data(), fixed_end);
    }
    return text;
}

std::string quantity_text(double si_value, Units units, Dimension dimension) {
    const std::string unit = unit_text(units, dimension);
    return text_of(si_value / si_per_unit(units, dimension)) + (unit.empty() ? "" : " ") + unit;
}

std::string length_text(double metres, Units units) {
    return quantity_text(metres, units, dimension::length);
}
std::string area_text(double square_metres, Units units) {
    return quantity_text(square_metres, units, dimension::area);
}
std::string force_text(double kilonewtons, Units units) {
    return quantity_text(kilonewtons, units, dimension::force);
}

namespace {

/// So many decimals that a step of the last one is no more than a millimetre.
int decimals_to_a_millimetre(LengthUnit unit) {
    switch (unit) {
    case LengthUnit::m:
    case LengthUnit::ft:
        return 3;
    case LengthUnit::in:
        return 2;
    case LengthUnit::cm:
        return 1;
    case LengthUnit::mm:
        return 0;
    }
    return 3;
}

/// With no more than that many decimals, and no zeros at the end of them.
std::string fixed_text(double value, int decimals) {
    std::array<char, std::numeric_limits<double>::max_exponent10 + 20> buffer;
    const auto [end, error] = std::to_chars(buffer.data(), buffer.data() + buffer.size(), value,
                                            std::chars_format::fixed, decimals);
    std::string text(buffer.data(), end);
    if (text.find('.') != std::string::npos) {
        text.erase(text.find_last_not_of('0') + 1);
        if (text.back() == '.') {
            text.pop_back();
        }
    }
    return text == "-0" ? "0" : text;
}

} // namespace

std::string point_text(Point point, Units units) {
    const double scale = si_per_unit(units, dimension::length);
    const int decimals = decimals_to_a_millimetre(units.length);
    return '(' + fixed_text(point.x / scale, decimals) + ", " + fixed_text(point.y / scale, decimals) + ')';
}

RUNNEL_NAMESPACE_END
