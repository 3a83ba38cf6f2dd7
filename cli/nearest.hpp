#pragma once

#include <span>
#include <string>
#include <string_view>

namespace runnel_cli {

/// The word of a list that a mistyped one likely stands for; empty: none is near.
[[nodiscard]] std::string nearest(std::string_view word, std::span<const std::string> words);

} // namespace runnel_cli
