#pragma once

#include <runnel/export.hpp>

#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// The library's version, e.g. "1.0.0".
[[nodiscard]] RUNNEL_EXPORT std::string_view version() noexcept;

RUNNEL_NAMESPACE_END
