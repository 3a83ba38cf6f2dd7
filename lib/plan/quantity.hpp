#pragma once

#include <runnel/units.hpp>

#include <array>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// A factor between units. Kept as a product and a quotient, so that mm to m divides by 1000 exactly instead
/// of multiplying by a rounded 0.001.
struct UnitScale {
    double times = 1;
    double over = 1;

    [[nodiscard]] double operator()(double value) const noexcept { return value * times / over; }
};

[[nodiscard]] UnitScale scale_to_si(Units units, Dimension dimension) noexcept;

/// Scales of all dimensions that a plan uses, made once per document.
class UnitScales {
public:
    explicit UnitScales(Units units = {});
    [[nodiscard]] const UnitScale& of(Dimension dimension) const noexcept {
        return scales_[static_cast<std::size_t>(dimension.force) * lengths +
                       static_cast<std::size_t>(dimension.length - lowest_length)];
    }

private:
    static constexpr int lowest_length = -3; ///< density
    static constexpr std::size_t lengths = 8;
    std::array<UnitScale, 2 * lengths> scales_;
};

enum class QuantityFault : std::uint8_t {
    none,
    no_number,
    no_unit,
    unknown_unit,
    other_dimension,
    too_large
};

/// What the text of a quantity says: its value in kN and m (an angle: in degrees).
struct QuantityReading {
    double value = 0;
    QuantityFault fault = QuantityFault::none;
    std::string detail; ///< the unit that is not known, or the dimension found
};

/// Reads "2.4 kN/m2", "16270 cm4", "50 psf": a number, optional spaces, a product or quotient of units with
/// integer powers (m2, m^2 or m²; `*`, `·` or a space for a product). `angle` takes degrees instead.
[[nodiscard]] QuantityReading read_quantity(std::string_view text, Dimension dimension);
[[nodiscard]] QuantityReading read_angle(std::string_view text);

RUNNEL_NAMESPACE_END
