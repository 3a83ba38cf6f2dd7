#include "plan/json_events.hpp"

#include <nlohmann/json.hpp>

#include <algorithm>
#include <cstring>
#include <iterator>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::string_view byte_order_mark = "\xef\xbb\xbf";

bool is_space(char c) {
    return c == ' ' || c == '\t' || c == '\n' || c == '\r';
}

bool is_letter(char c) {
    return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
}

/// The parser copies its iterators, so what they have passed is counted outside of them.
struct Cursor {
    const char* at;
    const char* end;
};

class CountingIterator {
public:
    using value_type = char;
    using difference_type = std::ptrdiff_t;
    using pointer = const char*;
    using reference = const char&;
    using iterator_category = std::input_iterator_tag;

    CountingIterator(Cursor* cursor, bool is_end) : cursor_(cursor), is_end_(is_end) {}
    reference operator*() const { return *cursor_->at; }
    CountingIterator& operator++() {
        ++cursor_->at;
        return *this;
    }
    CountingIterator operator++(int) {
        CountingIterator before = *this;
        ++cursor_->at;
        return before;
    }
    bool operator==(const CountingIterator& other) const {
        return is_end_ == other.is_end_ || cursor_->at == cursor_->end;
    }
    bool operator!=(const CountingIterator& other) const { return !(*this == other); }

private:
    Cursor* cursor_;
    bool is_end_;
};

/// Finds the first byte of each token, which the parser does not tell: it is the first one after the token
/// before that is no white space, comma or colon.
class SaxHandler {
public:
    using Json = nlohmann::json;

    SaxHandler(std::string_view text, std::size_t nesting, JsonReceiver& receiver, Cursor& cursor)
        : text_(text), nesting_(nesting), receiver_(receiver), cursor_(cursor) {
        if (text.substr(0, byte_order_mark.size()) == byte_order_mark) {
            passed_ = byte_order_mark.size();
        }
    }

    bool null() { return scalar(JsonKind::null, 0, {}); }
    bool boolean(bool value) { return scalar(JsonKind::boolean, value ? 1 : 0, {}); }
    bool number_integer(Json::number_integer_t value) { return number(static_cast<double>(value)); }
    bool number_unsigned(Json::number_unsigned_t value) { return number(static_cast<double>(value)); }
    bool number_float(double value, const Json::string_t& /*raw*/) { return number(value); }
    bool string(Json::string_t& value) { return scalar(JsonKind::text, 0, value); }
    bool binary(Json::binary_t& /*value*/) { return false; } // JSON text has none

    bool start_object(std::size_t /*size*/) { return open(JsonKind::object); }
    bool start_array(std::size_t /*size*/) { return open(JsonKind::array); }
    bool end_object() { return close(); }
    bool end_array() { return close(); }
    bool key(Json::string_t& name) {
        const std::size_t at = token_start();
        pass_token();
        after_key_ = true;
        after_open_ = false;
        return receiver_.key(name, static_cast<std::uint32_t>(at));
    }

    bool parse_error(std::size_t /*position*/, const std::string& /*token*/,
                     const nlohmann::detail::exception& error);

    JsonEnd end;

private:
    [[nodiscard]] std::size_t token_start() const {
        std::size_t at = passed_;
        while (at < text_.size() && (is_space(text_[at]) || text_[at] == ',' || text_[at] == ':')) {
            ++at;
        }
        return at;
    }
    void pass_token() { passed_ = static_cast<std::size_t>(cursor_.at - text_.data()); }

    bool scalar(JsonKind kind, double value, std::string_view text) {
        const std::size_t at = token_start();
        pass_token();
        after_key_ = after_open_ = false;
        return receiver_.scalar(kind, value, text, static_cast<std::uint32_t>(at));
    }

    /// A number ends at the first byte that cannot belong to it, and the parser has taken that one too,
    /// unless the text ends there.
    bool number(double value) {
        const std::size_t at = token_start();
        pass_token();
        const bool at_end =
            passed_ == text_.size() && std::string_view("0123456789").find(text_.back()) != text_.npos;
        passed_ -= at_end ? 0 : 1;
        after_key_ = after_open_ = false;
        return receiver_.scalar(JsonKind::number, value, {}, static_cast<std::uint32_t>(at));
    }

    bool open(JsonKind kind) {
        const std::size_t at = token_start();
        pass_token();
        after_key_ = false;
        after_open_ = true;
        if (depth_ == nesting_) {
            end = {JsonFault::too_deep, static_cast<std::uint32_t>(at),
                   "Nested deeper than " + std::to_string(nesting_) +
                       " levels, the limit; reading ends here.",
                   "No plan needs more than a dozen."};
            return false;
        }
        ++depth_;
        in_object_.push_back(kind == JsonKind::object);
        return receiver_.open(kind, static_cast<std::uint32_t>(at));
    }
    bool close() {
        pass_token();
        after_open_ = false;
        --depth_;
        in_object_.pop_back();
        return receiver_.close();
    }

    [[nodiscard]] std::size_t fault_start() const;
    [[nodiscard]] std::size_t fault_in_text(std::size_t at) const;
    void describe(std::size_t at);
    [[nodiscard]] std::string_view hint_at(std::size_t at) const;

    std::string_view text_;
    std::size_t nesting_;
    JsonReceiver& receiver_;
    Cursor& cursor_;
    std::size_t passed_ = 0; ///< offset behind the last token
    std::size_t depth_ = 0;
    std::vector<bool> in_object_;
    bool after_key_ = false;
    bool after_open_ = false;
};

/// The first byte that does not belong: behind what may stand between two tokens, or inside a text.
std::size_t SaxHandler::fault_start() const {
    std::size_t at = passed_;
    const auto skip_spaces = [&] {
        while (at < text_.size() && is_space(text_[at])) {
            ++at;
        }
    };
    skip_spaces();
    const bool may_separate = depth_ > 0 && !after_open_;
    if (may_separate && at < text_.size() && text_[at] == (after_key_ ? ':' : ',')) {
        ++at;
        skip_spaces();
    }
    return at < text_.size() && text_[at] == '"' ? fault_in_text(at) : at;
}

/// Where a text that begins at `at` goes wrong; its beginning where it is itself the fault.
std::size_t SaxHandler::fault_in_text(std::size_t at) const {
    const std::size_t read = static_cast<std::size_t>(cursor_.at - text_.data());
    const std::size_t last = read - 1;
    if (last <= at) {
        return read == text_.size() ? read : at;
    }
    if (text_[last] == '"') {
        return at;
    }
    const auto byte = static_cast<unsigned char>(text_[last]);
    const bool refused = byte < 0x20 || byte >= 0x80 || text_[last - 1] == '\\';
    return read == text_.size() && !refused ? read : last;
}

std::string shown(char c) {
    const auto byte = static_cast<unsigned char>(c);
    if (byte >= 0x20 && byte < 0x7f) {
        return std::string("`") + c + '`';
    }
    constexpr std::string_view digits = "0123456789abcdef";
    return std::string("byte 0x") + digits[byte >> 4] + digits[byte & 0xf];
}

void SaxHandler::describe(std::size_t at) {
    if (at < text_.size()) {
        end.message = "The text is not JSON: " + shown(text_[at]) + " cannot stand here; reading ends.";
        end.hint = hint_at(at);
        return;
    }
    end.message = text_.empty() ? "The text is empty." : "The text ends in the middle of a value.";
    if (depth_ > 0) {
        end.hint = std::to_string(depth_) + (depth_ == 1 ? " bracket is" : " brackets are") + " still open.";
    }
}

/// What is likely to have been meant by a byte that cannot stand where it does.
std::string_view SaxHandler::hint_at(std::size_t at) const {
    const std::string_view rest = text_.substr(at);
    const auto begins = [&](std::string_view word) { return rest.substr(0, word.size()) == word; };
    const char c = rest.front();
    std::size_t before = at;
    while (before > 0 && is_space(text_[before - 1])) {
        --before;
    }
    const bool no_separator = before == passed_ && depth_ > 0 && !after_open_;
    if (before > 0 && text_[before - 1] == ',' && (c == ']' || c == '}')) {
        return "Leave out the comma before it.";
    }
    if (c == '\'') {
        return "Texts stand in double quotes.";
    }
    if (c == '/' || c == '#') {
        return "JSON has no comments.";
    }
    if (c == '+' || c == '.') {
        return "A number begins with a digit or a minus sign.";
    }
    if (begins("NaN") || begins("nan") || begins("Inf") || begins("-Inf") || begins("inf")) {
        return "Infinities and not-a-number cannot be written.";
    }
    if (no_separator && after_key_) {
        return "Is a colon missing before it?";
    }
    if (no_separator && (c == '"' || c == '{' || c == '[')) {
        return "Is a comma missing before it?";
    }
    const bool wants_key = depth_ > 0 && in_object_.back() && !after_key_;
    return wants_key && (is_letter(c) || c == '_') ? "Keys stand in double quotes." : "";
}

bool SaxHandler::parse_error(std::size_t /*position*/, const std::string& /*token*/,
                             const nlohmann::detail::exception& error) {
    constexpr int out_of_range_of_double = 406;
    if (error.id == out_of_range_of_double) {
        const std::size_t at = token_start();
        const std::size_t stop = std::min(text_.find_first_not_of("+-.0123456789eE", at), text_.size());
        constexpr std::size_t shown_at_most = 30;
        std::string number(text_.substr(at, std::min(stop - at, shown_at_most)));
        number += stop - at > shown_at_most ? "..." : "";
        end = {JsonFault::number_too_large,
               static_cast<std::uint32_t>(at),
               number + " is larger than any double can hold (about 1.8e308); reading ends here.",
               {}};
        return false;
    }
    const std::size_t at = fault_start();
    end.fault = JsonFault::not_json;
    end.at = static_cast<std::uint32_t>(at);
    describe(at);
    return false;
}

} // namespace

std::string_view words_for(JsonKind kind) noexcept {
    switch (kind) {
    case JsonKind::null:
        return "null";
    case JsonKind::boolean:
        return "true or false";
    case JsonKind::number:
        return "a number";
    case JsonKind::text:
        return "a text";
    case JsonKind::array:
        return "a list";
    case JsonKind::object:
        return "an object";
    case JsonKind::key:
        return "a key";
    }
    return "";
}

JsonEnd walk_json(std::string_view text, std::size_t nesting, JsonReceiver& receiver) {
    Cursor cursor{text.data(), text.data() + text.size()};
    SaxHandler handler(text, nesting, receiver, cursor);
    const bool whole = nlohmann::json::sax_parse(CountingIterator(&cursor, false),
                                                 CountingIterator(&cursor, true), &handler);
    if (!whole && handler.end.fault == JsonFault::none) {
        handler.end.fault = JsonFault::stopped;
    }
    return handler.end;
}

LineCounter::Place LineCounter::place_of(std::size_t offset) {
    offset = std::min(offset, text_.size());
    if (offset < line_start_) {
        line_start_ = looked_at_ = 0;
        line_ = 1;
    }
    while (looked_at_ < offset) {
        const void* found = std::memchr(text_.data() + looked_at_, '\n', offset - looked_at_);
        if (found == nullptr) {
            looked_at_ = offset;
            break;
        }
        line_start_ = looked_at_ =
            static_cast<std::size_t>(static_cast<const char*>(found) - text_.data()) + 1;
        ++line_;
    }
    return {line_, static_cast<std::uint32_t>(offset - line_start_ + 1)};
}

RUNNEL_NAMESPACE_END
