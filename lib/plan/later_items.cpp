#include "plan/items.hpp"

#include "plan/words.hpp"

#include <algorithm>
#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t most_words = 6;

/// A word among a few; only its shape is looked at here.
void expect_choice(ObjectReader& object, std::string_view key,
                   std::initializer_list<std::string_view> words) {
    const auto value = object.value(key);
    if (value && (value->kind() != JsonKind::text ||
                  std::find(words.begin(), words.end(), value->text()) == words.end())) {
        std::array<std::string_view, most_words> known;
        std::copy(words.begin(), words.end(), known.begin());
        refuse_choice(*value, std::span(known.data(), words.size()));
    }
}

/// An object whose keys the document chooses: case ids, categories.
template <class Take>
void each_entry(const JsonValue& value, std::string_view wanted, Take take) {
    if (value.kind() != JsonKind::object) {
        value.wrong_type(wanted);
        return;
    }
    std::vector<std::string_view> seen;
    const JsonTree& tree = *value.tree;
    for (std::uint32_t i = value.node + 1; i < tree.node(value.node).next; i = tree.node(i + 1).next) {
        const Place place = Place::of_key(&value.place, tree.text(i));
        take(JsonValue{value.context, &tree, i + 1, place, value.noun, value.owner_id, value.owner_place});
        seen.push_back(tree.text(i));
    }
    std::sort(seen.begin(), seen.end());
    for (std::uint32_t i = value.node + 1; i < tree.node(value.node).next; i = tree.node(i + 1).next) {
        const auto [first, last] = std::equal_range(seen.begin(), seen.end(), tree.text(i));
        if (last - first > 1) {
            const JsonValue here{value.context,
                                 &tree,
                                 i,
                                 Place::of_key(&value.place, tree.text(i)),
                                 value.noun,
                                 value.owner_id,
                                 value.owner_place};
            here.report(ProblemCode::duplicate_key,
                        '`' + shown(tree.text(i)) + "` stands more than once in " + value.name() + '.');
        }
    }
}

void expect_numbers(ObjectReader& object, std::string_view key) {
    if (const auto list = object.value(key)) {
        list->each("a list of numbers", [](const JsonValue& number) { (void)plain_number_from(number); });
    }
}

} // namespace

void note_without_effect(const std::optional<JsonValue>& value) {
    if (!value || (value->kind() == JsonKind::boolean && value->number() == 0)) {
        return;
    }
    const std::string_view key = value->place.key;
    constexpr std::array<std::string_view, 6> keys{"reducible", "pattern",     "category",
                                                   "one_of",    "base_fixity", "allowance"};
    const auto* const known = std::find(keys.begin(), keys.end(), key);
    if (known != keys.end() && value->context->note_once(*known)) {
        value->report(ProblemCode::not_supported_yet,
                      value->name() + " is kept, but has no effect on the characteristic takedown yet.", {},
                      Severity::note);
    }
}

namespace {

void cite(const JsonValue& value, LaterReference::To to, std::string_view id) {
    value.context->references.push_back(
        {to, std::string(id), value.place.pointer(), value.at(), value.owner()});
}

void cite_all(ObjectReader& object, std::string_view key, LaterReference::To to, Need need) {
    if (const auto list = object.value(key, need)) {
        list->each("a list of ids", [&](const JsonValue& element) {
            if (element.kind() == JsonKind::text) {
                cite(element, to, element.text());
            } else {
                element.wrong_type("a list of ids");
            }
        });
    }
}

} // namespace

void refuse_frame(ObjectReader& object) {
    (void)object.id();
    cite_all(object, "members", LaterReference::To::member, Need::required);
    cite_all(object, "columns", LaterReference::To::column, Need::optional);
    expect_choice(object, "axial", {"rigid", "elastic"});
    expect_choice(object, "far_ends", {"fixed", "pinned"});
    expect_choice(object, "sway", {"held", "free"});
    expect_choice(object, "column_base", {"fixed", "pinned"});
}

void refuse_combination(ObjectReader& object) {
    const auto preset = object.value("preset");
    const auto factors = object.value("factors");
    const auto id = object.value("id", preset ? Need::optional : Need::required);
    if (id) {
        (void)text_from(*id, "a text");
    }
    if (preset) {
        constexpr std::array<std::string_view, most_words> presets{"asce7-16-strength", "asce7-16-allowable",
                                                                   "asce7-22-strength", "asce7-22-allowable",
                                                                   "en1990-6.10",       "en1990-6.10ab"};
        if (preset->kind() != JsonKind::text ||
            std::find(presets.begin(), presets.end(), preset->text()) == presets.end()) {
            refuse_choice(*preset, presets);
        }
    }
    if (preset && factors) {
        factors->report(ProblemCode::conflicting_keys, "`preset` excludes `factors`.");
    } else if (!preset && !factors) {
        object.self().report(ProblemCode::missing_key,
                             "`factors` of " + object.self().owner() + " is missing.",
                             "`factors`, or a `preset`.");
    }
    if (factors) {
        each_entry(*factors, "an object of factors by case", [](const JsonValue& factor) {
            constexpr std::string_view by_kind = "kind:";
            if (factor.place.key.substr(0, by_kind.size()) != by_kind) {
                cite(factor, LaterReference::To::load_case, factor.place.key);
            }
            if (factor.kind() != JsonKind::array) {
                (void)plain_number_from(factor);
                return;
            }
            std::size_t count = 0;
            factor.each("a number", [&](const JsonValue& number) {
                (void)plain_number_from(number);
                ++count;
            });
            if (count != 2) {
                factor.report(ProblemCode::wrong_type,
                              factor.name() + " takes a number or [unfavourable, favourable], not " +
                                  std::to_string(count) + " numbers.");
            }
        });
    }
    expect_choice(object, "use", {"service"});
}

void refuse_reductions(const JsonValue& value) {
    if (value.kind() != JsonKind::object) {
        value.wrong_type("an object with a `rule`");
        return;
    }
    ObjectReader reader(value, "reductions");
    const auto rule = reader.value("rule");
    constexpr std::array<std::string_view, 4> rules{"none", "asce7", "en1991", "table"};
    if (rule) {
        if (rule->kind() != JsonKind::text ||
            std::find(rules.begin(), rules.end(), rule->text()) == rules.end()) {
            refuse_choice(*rule, rules);
        } else if (rule->text() != "none") {
            rule->not_yet("live-load reduction");
        }
    }
    expect_choice(reader, "columns", {"storeys", "area"});
    if (const auto psi = reader.value("psi0")) {
        each_entry(*psi, "an object of values by category",
                   [](const JsonValue& number) { (void)plain_number_from(number); });
    }
    if (const auto areas = reader.value("areas")) {
        areas->each("a list of areas",
                    [](const JsonValue& area) { (void)quantity_from(area, dimension::area); });
    }
    expect_numbers(reader, "floors");
    expect_numbers(reader, "factors");
    reader.finish();
}

void refuse_moving_point(const JsonValue& value) {
    if (value.kind() != JsonKind::object) {
        value.wrong_type("an object");
        return;
    }
    ObjectReader reader(value, "moving point");
    (void)reader.text("case", Need::required);
    (void)reader.required_quantity("p", dimension::force);
    (void)reader.text("q_case");
    reader.finish();
    value.not_yet("a moving point load");
}

void refuse_limit(const JsonValue& value) {
    each_entry(value, "an object of limits by case, as {\"live\": \"L/360\"}", [](const JsonValue& limit) {
        if (limit.kind() != JsonKind::text) {
            limit.wrong_type("a text as \"L/360\"");
            return;
        }
        const std::string_view text = limit.text();
        const bool good = text.size() > 2 && text.substr(0, 2) == "L/" &&
                          text.find_first_not_of("0123456789.", 2) == std::string_view::npos;
        if (!good) {
            limit.report(ProblemCode::bad_quantity,
                         limit.name() + ": \"" + shown(text) + "\" is no part of the span.",
                         "As in \"L/360\".");
        }
    });
    value.not_yet("a deflection limit");
}

void refuse_bearing_offset(const JsonValue& value) {
    (void)quantity_from(value, dimension::length);
    value.not_yet("the moment of a bearing's eccentricity");
}

RUNNEL_NAMESPACE_END
