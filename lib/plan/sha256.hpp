#pragma once

#include <runnel/export.hpp>

#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// SHA-256 (FIPS 180-4) of bytes, as 64 lower-case hexadecimal digits.
[[nodiscard]] std::string sha256_hex(std::string_view bytes);

RUNNEL_NAMESPACE_END
