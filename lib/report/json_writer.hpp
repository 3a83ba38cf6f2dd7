#pragma once

#include <runnel/report.hpp>

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Writes JSON (RFC 8259, UTF-8) as it goes, without holding the document: text is handed on in large parts.
///
/// Numbers are the shortest text that reads back to the same double (see number_text); text that is not UTF-8
/// gets U+FFFD for each byte that is wrong. Call finish() at the end.
class JsonWriter {
public:
    /// An object or array either stands on one line or has each of its entries on a line of its own.
    enum class Layout : std::uint8_t { line, block };

    explicit JsonWriter(const TextSink& sink);

    JsonWriter& open_object(Layout layout = Layout::line) { return open('{', layout); }
    JsonWriter& close_object() { return close('}'); }
    JsonWriter& open_array(Layout layout = Layout::line) { return open('[', layout); }
    JsonWriter& close_array() { return close(']'); }
    JsonWriter& key(std::string_view name);
    JsonWriter& text(std::string_view value);
    /// An SI value in units of `scale` SI units.
    JsonWriter& number(double value, double scale = 1);
    JsonWriter& count(std::uint64_t value);
    JsonWriter& truth(bool value);
    /// Two numbers in an array.
    JsonWriter& pair(double first, double second, double scale = 1);

    void finish();

private:
    struct Nest {
        Layout layout;
        bool empty;
    };

    JsonWriter& open(char bracket, Layout layout);
    JsonWriter& close(char bracket);
    void before_value();
    void new_line();
    void quoted(std::string_view value);
    void pass_on();

    const TextSink& sink_;
    std::string buffer_;
    std::vector<Nest> nests_;
    bool after_key_ = false;
};

RUNNEL_NAMESPACE_END
