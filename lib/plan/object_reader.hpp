#pragma once

#include "plan/json_tree.hpp"
#include "plan/problem_log.hpp"
#include "plan/quantity.hpp"

#include <runnel/plan.hpp>

#include <array>
#include <limits>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Stands for what a document did not give, or gave wrongly and was told so: checks pass over it, so that one
/// fault is reported once.
namespace unread {
inline constexpr double number = std::numeric_limits<double>::quiet_NaN();
inline constexpr std::string_view id = "\x01";
} // namespace unread

/// A step of a JSON pointer, linked to the ones before; becomes text only where a problem needs it.
struct Place {
    const Place* up = nullptr;
    std::string_view key; ///< of an object; else `index` counts
    std::uint32_t index = 0;
    bool is_key = false;

    [[nodiscard]] static Place of_key(const Place* up, std::string_view key) { return {up, key, 0, true}; }
    [[nodiscard]] static Place of_index(const Place* up, std::uint32_t index) {
        return {up, {}, index, false};
    }
    [[nodiscard]] std::string pointer() const;
    [[nodiscard]] std::string_view nearest_key() const;
    /// "area_loads[2]" for an element of a list; empty for others.
    [[nodiscard]] std::string element() const;
};

/// An id that a frame or a combination cites; they are no part of the plan yet, but their references are
/// checked.
struct LaterReference {
    enum class To : std::uint8_t { member, column, load_case };
    To to = To::member;
    std::string id;
    std::string pointer;
    std::uint32_t at = 0;
    std::string owner; ///< "frame F1"
};

/// What the readers of one document share.
struct ReadingContext {
    ReadingContext(std::string_view document, const Limits& document_limits)
        : text(document), limits(document_limits), log(document_limits.problems), lines(document) {}

    std::string_view text;
    Limits limits;
    ProblemLog log;
    UnitScales scales;
    LineCounter lines; ///< of items, in rising order
    std::vector<LaterReference> references;
    std::vector<std::string_view> noted; ///< keys of which a note has been made

    /// True the first time: such notes are made once a key and not once an object.
    bool note_once(std::string_view key);
};

/// A value with its place and what it belongs to, e.g. "member G1".
struct JsonValue {
    ReadingContext* context = nullptr;
    const JsonTree* tree = nullptr;
    std::uint32_t node = 0;
    Place place;
    std::string_view noun;
    std::string_view owner_id;
    const Place* owner_place = nullptr; ///< names an owner without an id

    [[nodiscard]] JsonKind kind() const { return tree->node(node).kind; }
    [[nodiscard]] std::uint32_t at() const { return tree->node(node).at; }
    [[nodiscard]] std::string_view text() const { return tree->text(node); }
    [[nodiscard]] double number() const { return tree->node(node).number; }

    /// "member G1", "area_loads[2]" where it has no id, "the plan".
    [[nodiscard]] std::string owner() const;
    /// "`from` of member G1".
    [[nodiscard]] std::string name() const;
    void report(ProblemCode code, std::string message, std::string hint = {},
                std::optional<Severity> severity = std::nullopt) const;
    void wrong_type(std::string_view wanted, std::string hint = {}) const;
    /// An error at the value: its engine is not built.
    void not_yet(std::string_view what) const;

    /// Calls `take` for each element of a list. False, and a problem, if the value is no list.
    template <class Take>
    bool each(std::string_view wanted, Take take) const {
        if (kind() != JsonKind::array) {
            wrong_type(wanted);
            return false;
        }
        const std::uint32_t end = tree->node(node).next;
        std::uint32_t index = 0;
        for (std::uint32_t i = node + 1; i < end; i = tree->node(i).next) {
            take(JsonValue{context, tree, i, Place::of_index(&place, index++), noun, owner_id, owner_place});
        }
        return true;
    }
};

/// Readers of single values. What cannot be read is reported and comes back as `unread`.
[[nodiscard]] std::string text_from(const JsonValue& value, std::string_view wanted);
[[nodiscard]] double quantity_from(const JsonValue& value, Dimension dimension);
[[nodiscard]] double angle_from(const JsonValue& value);
[[nodiscard]] double plain_number_from(const JsonValue& value);
[[nodiscard]] Point point_from(const JsonValue& value);
[[nodiscard]] Ring ring_from(const JsonValue& value);

[[nodiscard]] bool boolean_from(const JsonValue& value, bool otherwise);

template <class Choice>
using Choices = std::span<const std::pair<std::string_view, Choice>>;

void refuse_choice(const JsonValue& found, std::span<const std::string_view> words);

template <class Choice>
[[nodiscard]] std::optional<Choice> choice_from(const JsonValue& value, Choices<Choice> choices) {
    std::vector<std::string_view> words;
    for (const auto& [word, choice] : choices) {
        if (value.kind() == JsonKind::text && word == value.text()) {
            return choice;
        }
    }
    for (const auto& [word, choice] : choices) {
        words.push_back(word);
    }
    refuse_choice(value, words);
    return std::nullopt;
}

enum class Need : std::uint8_t { optional, required };

/// Reads an object by asking for its keys, each once (keys are counted, so that nothing is looked for when
/// all are found); `finish` reports those that nobody asked for.
class ObjectReader {
public:
    /// `value` must be an object.
    ObjectReader(const JsonValue& value, std::string_view noun);

    [[nodiscard]] Origin origin(std::uint32_t level, std::uint32_t index) const;
    ObjectReader(const ObjectReader&) = delete; // values point back at its place
    ObjectReader& operator=(const ObjectReader&) = delete;

    [[nodiscard]] std::optional<JsonValue> value(std::string_view key, Need need = Need::optional);
    [[nodiscard]] std::string id();
    /// A word or a reference; `unread::id` if it is required and not there, or no text.
    [[nodiscard]] std::string text(std::string_view key, Need need = Need::optional);
    [[nodiscard]] std::vector<std::string> texts(std::string_view key, Need need = Need::optional);
    [[nodiscard]] bool boolean(std::string_view key, bool otherwise);
    [[nodiscard]] std::optional<double> quantity(std::string_view key, Dimension dimension);
    [[nodiscard]] double required_quantity(std::string_view key, Dimension dimension);
    [[nodiscard]] std::optional<double> angle(std::string_view key, Need need = Need::optional);
    [[nodiscard]] Point point(std::string_view key);
    [[nodiscard]] Ring ring(std::string_view key, Need need);

    template <class Choice>
    std::optional<Choice> choice(std::string_view key, Choices<Choice> choices, Need need = Need::optional) {
        const std::optional<JsonValue> found = value(key, need);
        return found ? choice_from(*found, choices) : std::nullopt;
    }

    [[nodiscard]] const JsonValue& self() const { return self_; }
    void finish();

private:
    JsonValue self_;
    std::string_view owner_id_;
    static constexpr std::size_t most_keys = 24; ///< more than any object of a plan has
    std::array<std::string_view, most_keys> asked_;
    std::size_t asked_count_ = 0;
    std::size_t keys_ = 0;  ///< of the object
    std::size_t found_ = 0; ///< of these, asked for
};

RUNNEL_NAMESPACE_END
