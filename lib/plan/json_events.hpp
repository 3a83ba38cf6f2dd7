#pragma once

#include <runnel/export.hpp>

#include <cstddef>
#include <cstdint>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

enum class JsonKind : std::uint8_t { null, boolean, number, text, array, object, key };

/// The kind in words: "a number", "an object", ...
[[nodiscard]] std::string_view words_for(JsonKind kind) noexcept;

/// Takes the values of a JSON text in their order; `at` is the offset of a value's first byte. An answer of
/// false ends the walk.
class JsonReceiver {
public:
    virtual ~JsonReceiver() = default;
    /// null, boolean (`number` is 1 or 0), number or text.
    virtual bool scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) = 0;
    virtual bool key(std::string_view name, std::uint32_t at) = 0;
    virtual bool open(JsonKind kind, std::uint32_t at) = 0;
    virtual bool close() = 0;
};

enum class JsonFault : std::uint8_t { none, stopped, not_json, number_too_large, too_deep };

/// How a walk ended, and where if it ended early.
struct JsonEnd {
    JsonFault fault = JsonFault::none;
    std::uint32_t at = 0;
    std::string message;
    std::string hint;
};

/// Walks through a JSON text (RFC 8259; a byte order mark is passed over) without keeping any of it.
/// `nesting` is the largest depth; the text may have up to 4 GiB.
[[nodiscard]] JsonEnd walk_json(std::string_view text, std::size_t nesting, JsonReceiver& receiver);

/// Turns offsets into lines and columns (both from 1, columns in bytes). Offsets are asked in rising order;
/// an earlier one starts over.
class LineCounter {
public:
    struct Place {
        std::uint32_t line = 1;
        std::uint32_t column = 1;
    };

    explicit LineCounter(std::string_view text) : text_(text) {}
    [[nodiscard]] Place place_of(std::size_t offset);

private:
    std::string_view text_;
    std::size_t line_start_ = 0;
    std::size_t looked_at_ = 0; ///< no line break between line_start_ and here
    std::uint32_t line_ = 1;
};

RUNNEL_NAMESPACE_END
