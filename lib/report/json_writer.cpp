#include "report/json_writer.hpp"

#include "report/number_text.hpp"
#include "report/utf8.hpp"

#include <cmath>

RUNNEL_NAMESPACE_BEGIN

namespace {
constexpr std::size_t part_size = std::size_t{1} << 16; ///< bytes handed on at a time
} // namespace

JsonWriter::JsonWriter(const TextSink& sink) : sink_(sink) {
    buffer_.reserve(2 * part_size);
}

JsonWriter& JsonWriter::open(char bracket, Layout layout) {
    before_value();
    // What stands inside a line stays on it.
    const bool inside_line = !nests_.empty() && nests_.back().layout == Layout::line;
    nests_.push_back({inside_line ? Layout::line : layout, true});
    buffer_ += bracket;
    return *this;
}

JsonWriter& JsonWriter::close(char bracket) {
    const Nest nest = nests_.back();
    nests_.pop_back();
    if (nest.layout == Layout::block && !nest.empty) {
        new_line();
    }
    buffer_ += bracket;
    if (buffer_.size() >= part_size) {
        pass_on();
    }
    return *this;
}

JsonWriter& JsonWriter::key(std::string_view name) {
    before_value();
    quoted(name);
    buffer_ += nests_.back().layout == Layout::block ? ": " : ":";
    after_key_ = true;
    return *this;
}

JsonWriter& JsonWriter::text(std::string_view value) {
    before_value();
    quoted(value);
    return *this;
}

JsonWriter& JsonWriter::number(double value, double scale) {
    before_value();
    if (!std::isfinite(value)) {
        buffer_ += "null"; // JSON has no word for it; no engine that keeps its laws gives one
        return *this;
    }
    NumberBuffer digits;
    buffer_ += number_text(value, scale, digits);
    return *this;
}

JsonWriter& JsonWriter::count(std::uint64_t value) {
    before_value();
    buffer_ += std::to_string(value);
    return *this;
}

JsonWriter& JsonWriter::truth(bool value) {
    before_value();
    buffer_ += value ? "true" : "false";
    return *this;
}

JsonWriter& JsonWriter::pair(double first, double second, double scale) {
    return open_array().number(first, scale).number(second, scale).close_array();
}

void JsonWriter::finish() {
    buffer_ += '\n';
    pass_on();
}

void JsonWriter::before_value() {
    if (after_key_) {
        after_key_ = false;
        return;
    }
    if (nests_.empty()) {
        return;
    }
    if (!nests_.back().empty) {
        buffer_ += ',';
    }
    nests_.back().empty = false;
    if (nests_.back().layout == Layout::block) {
        new_line();
    }
}

void JsonWriter::new_line() {
    buffer_ += '\n';
    buffer_.append(nests_.size(), ' ');
}

void JsonWriter::quoted(std::string_view value) {
    constexpr std::string_view hex = "0123456789abcdef";
    buffer_ += '"';
    while (!value.empty()) {
        const Character character = first_character(value);
        if (!character.valid) {
            buffer_ += replacement_character;
        } else if (character.code == '"' || character.code == '\\') {
            buffer_ += '\\';
            buffer_ += value[0];
        } else if (character.code < 0x20 || character.code == 0x7F) {
            buffer_ += "\\u00";
            buffer_ += hex[character.code >> 4];
            buffer_ += hex[character.code & 0xF];
        } else {
            buffer_ += value.substr(0, character.bytes);
        }
        value.remove_prefix(character.bytes);
    }
    buffer_ += '"';
}

void JsonWriter::pass_on() {
    sink_(buffer_);
    buffer_.clear();
}

RUNNEL_NAMESPACE_END
