#pragma once

#include <runnel/export.hpp>

#include <array>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// Room for the text of any double.
using NumberBuffer = std::array<char, 32>;

/// The decimal text of an SI value in an output unit that is `scale` SI units: value / scale to 15, 16 or 17
/// digits, the fewest that, read and multiplied by the scale as the reader does, give the same value again,
/// so that 14 ft in the plan are 14 ft in the result. Where none of them does, the shortest text that reads
/// back to value / scale. Zero has no sign.
[[nodiscard]] std::string_view number_text(double value, double scale, NumberBuffer& buffer);

RUNNEL_NAMESPACE_END
