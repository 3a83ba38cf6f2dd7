#pragma once

#include <runnel/export.hpp>

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

enum class LengthUnit : std::uint8_t { m, mm, cm, ft, in };
enum class ForceUnit : std::uint8_t { N, kN, MN, lbf, kip };

/// The two units of a document; those of loads, moments and stiffnesses follow from both.
/// Exact by definition: 1 ft = 0.3048 m, 1 in = 0.0254 m, 1 lbf = 4.4482216152605 N (international foot of
/// 1959; pound 0.45359237 kg times standard gravity 9.80665 m/s2), 1 kip = 1000 lbf.
struct Units {
    LengthUnit length = LengthUnit::m;
    ForceUnit force = ForceUnit::kN;

    friend bool operator==(const Units&, const Units&) = default;
};

/// A dimension as powers of force and length: an area load is force^1 length^-2. Angles are {0, 0}.
struct Dimension {
    std::int8_t force = 0;
    std::int8_t length = 0;

    friend bool operator==(const Dimension&, const Dimension&) = default;
};

namespace dimension {
inline constexpr Dimension none{0, 0}, length{0, 1}, area{0, 2}, second_moment{0, 4}, force{1, 0},
    line_load{1, -1}, area_load{1, -2}, density{1, -3}, stress{1, -2}, moment{1, 1};
}

[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(LengthUnit unit) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(ForceUnit unit) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::optional<LengthUnit> length_unit(std::string_view name) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::optional<ForceUnit> force_unit(std::string_view name) noexcept;

/// How many SI units (m, kN) one unit of `dimension` is in `units`: multiply to come in, divide to go out.
[[nodiscard]] RUNNEL_EXPORT double si_per_unit(Units units, Dimension dimension) noexcept;

/// The unit's text for people, e.g. "kN/m2", "kip/ft", "kN m".
[[nodiscard]] RUNNEL_EXPORT std::string unit_text(Units units, Dimension dimension);

RUNNEL_NAMESPACE_END
