#include <runnel/units.hpp>

#include <array>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::array<std::pair<std::string_view, double>, 5> lengths{
    {{"m", 1.0}, {"mm", 0.001}, {"cm", 0.01}, {"ft", 0.3048}, {"in", 0.0254}}};
constexpr double kilonewtons_per_pound = 0.0044482216152605;
constexpr std::array<std::pair<std::string_view, double>, 5> forces{{{"N", 0.001},
                                                                     {"kN", 1.0},
                                                                     {"MN", 1000.0},
                                                                     {"lbf", kilonewtons_per_pound},
                                                                     {"kip", kilonewtons_per_pound * 1000}}};

double power(double base, int exponent) {
    double result = 1;
    for (int i = 0; i < (exponent < 0 ? -exponent : exponent); ++i) {
        result *= base;
    }
    return exponent < 0 ? 1 / result : result;
}

template <class Unit, std::size_t n>
std::optional<Unit> find(const std::array<std::pair<std::string_view, double>, n>& table,
                         std::string_view name) {
    for (std::size_t i = 0; i < n; ++i) {
        if (table[i].first == name) {
            return static_cast<Unit>(i);
        }
    }
    return std::nullopt;
}

} // namespace

std::string_view name_of(LengthUnit unit) noexcept {
    return lengths[static_cast<std::size_t>(unit)].first;
}
std::string_view name_of(ForceUnit unit) noexcept {
    return forces[static_cast<std::size_t>(unit)].first;
}
std::optional<LengthUnit> length_unit(std::string_view name) noexcept {
    return find<LengthUnit>(lengths, name);
}
std::optional<ForceUnit> force_unit(std::string_view name) noexcept {
    return find<ForceUnit>(forces, name);
}

double si_per_unit(Units units, Dimension dimension) noexcept {
    return power(forces[static_cast<std::size_t>(units.force)].second, dimension.force) *
           power(lengths[static_cast<std::size_t>(units.length)].second, dimension.length);
}

std::string unit_text(Units units, Dimension dimension) {
    const std::string force(name_of(units.force));
    const std::string length(name_of(units.length));
    const auto raised = [](const std::string& unit, int exponent) {
        return exponent == 1 ? unit : unit + std::to_string(exponent);
    };
    if (dimension.force == 0) {
        return dimension.length == 0 ? std::string{} : raised(length, dimension.length);
    }
    std::string text = raised(force, dimension.force);
    if (dimension.length > 0) {
        text += ' ' + raised(length, dimension.length);
    } else if (dimension.length < 0) {
        text += '/' + raised(length, -dimension.length);
    }
    return text;
}

RUNNEL_NAMESPACE_END
