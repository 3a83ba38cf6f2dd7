#pragma once

#include <runnel/export.hpp>

#include <span>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// Text from a document made fit for a sentence: control characters shown as `?`, long ones cut short.
[[nodiscard]] std::string shown(std::string_view text);

/// The word nearest to `given` by insertions, deletions, changes and swaps (Damerau 1964, without regard to
/// case), if it is near enough to be what was meant; else empty.
[[nodiscard]] std::string_view nearest_word(std::string_view given, std::span<const std::string_view> words);

/// "a, b or c".
[[nodiscard]] std::string listed(std::span<const std::string_view> words);

/// A hint from both: "Did you mean `b`?", or else the lead and what may stand there; without a lead nothing.
[[nodiscard]] std::string hint_for(std::string_view given, std::span<const std::string_view> words,
                                   std::string_view lead);

RUNNEL_NAMESPACE_END
