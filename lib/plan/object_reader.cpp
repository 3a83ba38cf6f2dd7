#include "plan/object_reader.hpp"

#include "plan/problems.hpp"
#include "plan/words.hpp"

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

std::string Place::pointer() const {
    std::string text = up != nullptr ? up->pointer() : std::string{};
    text += '/';
    if (!is_key) {
        return text + std::to_string(index);
    }
    for (const char c : key) { // RFC 6901, 3
        text += c == '~' ? "~0" : c == '/' ? "~1" : std::string(1, c);
    }
    return text;
}

std::string_view Place::nearest_key() const {
    const Place* place = this;
    while (place != nullptr && !place->is_key) {
        place = place->up;
    }
    return place == nullptr ? std::string_view{} : place->key;
}

std::string Place::element() const {
    if (is_key || up == nullptr || !up->is_key) {
        return {};
    }
    return std::string(up->key) + '[' + std::to_string(index) + ']';
}

bool ReadingContext::note_once(std::string_view key) {
    if (std::find(noted.begin(), noted.end(), key) != noted.end()) {
        return false;
    }
    noted.push_back(key);
    return true;
}

std::string JsonValue::owner() const {
    if (owner_id.empty()) {
        const std::string element = owner_place == nullptr ? std::string{} : owner_place->element();
        return element.empty() ? "the " + std::string(noun) : element;
    }
    return std::string(noun) + ' ' + shown(owner_id);
}

std::string JsonValue::name() const {
    return '`' + shown(place.nearest_key()) + "` of " + owner();
}

void JsonValue::report(ProblemCode code, std::string message, std::string hint,
                       std::optional<Severity> severity) const {
    Problem problem;
    problem.code = code;
    problem.severity = severity.value_or(kind_of(code).severity);
    problem.message = std::move(message);
    problem.hint = std::move(hint);
    problem.pointer = place.pointer();
    if (!owner_id.empty()) {
        problem.ids.emplace_back(owner_id);
    }
    context->log.add_at(at(), std::move(problem));
}

void JsonValue::wrong_type(std::string_view wanted, std::string hint) const {
    if (!context->log.wants(ProblemCode::wrong_type)) {
        return;
    }
    report(ProblemCode::wrong_type,
           name() + " takes " + std::string(wanted) + ", not " + std::string(words_for(kind())) + '.',
           std::move(hint));
}

void JsonValue::not_yet(std::string_view what) const {
    report(ProblemCode::not_supported_yet, name() + ": " + std::string(what) + " cannot be computed yet.",
           "Leave the key out until then.");
}

std::string text_from(const JsonValue& value, std::string_view wanted) {
    if (value.kind() == JsonKind::text) {
        if (value.text() == unread::id) { // else the checks would take it for reported
            value.report(ProblemCode::bad_id, value.name() + " holds nothing but a control character.");
        }
        return std::string(value.text());
    }
    value.wrong_type(wanted, value.kind() == JsonKind::number ? "Put it in quotes." : "");
    return std::string(unread::id);
}

bool boolean_from(const JsonValue& value, bool otherwise) {
    if (value.kind() != JsonKind::boolean) {
        value.wrong_type("true or false");
        return otherwise;
    }
    return value.number() != 0;
}

namespace {

constexpr std::string_view known_units = "Units are m, mm, cm, ft, in, N, kN, MN, lbf, kip, Pa, kPa, MPa, "
                                         "GPa, psf, plf, klf, ksf, psi, ksi and pcf, "
                                         "as in \"2.4 kN/m2\".";
constexpr std::array<std::string_view, 22> unit_words{"m",   "mm",  "cm",  "ft",  "in",  "N",   "kN",  "MN",
                                                      "lbf", "kip", "Pa",  "kPa", "MPa", "GPa", "psf", "plf",
                                                      "klf", "ksf", "psi", "ksi", "pcf", "deg"};

std::string hint_for_unit(std::string_view unit) {
    if (unit.substr(0, 1) == ",") {
        return "Decimals stand behind a point.";
    }
    if (unit == "rad") {
        return "Angles are in degrees.";
    }
    if (unit == "kg" || unit == "t" || unit == "lb" || unit == "lbs" || unit == "g") {
        return "Loads are forces: kN, N, lbf, kip.";
    }
    const std::string_view nearest = nearest_word(unit, unit_words);
    return nearest.empty() ? std::string(known_units) : "Did you mean `" + std::string(nearest) + "`?";
}

void refuse_quantity(const JsonValue& value, const QuantityReading& reading, const std::string& wanted) {
    const std::string lead = value.name() + ": \"" + shown(value.text()) + "\" ";
    switch (reading.fault) {
    case QuantityFault::none:
        return;
    case QuantityFault::no_number:
        value.report(ProblemCode::bad_quantity, lead + "does not begin with a number.",
                     "A number, or a number with its unit, as \"2.4 kN/m2\".");
        return;
    case QuantityFault::no_unit:
        value.report(ProblemCode::bad_quantity, lead + "has no unit.",
                     "Without quotes it is a number in the plan's units.");
        return;
    case QuantityFault::unknown_unit:
        value.report(ProblemCode::bad_quantity,
                     lead + "has no unit that is known: `" + shown(reading.detail) + "`.",
                     hint_for_unit(reading.detail));
        return;
    case QuantityFault::too_large:
        value.report(ProblemCode::bad_quantity, lead + "is beyond what a double can hold.");
        return;
    case QuantityFault::other_dimension:
        value.report(ProblemCode::wrong_dimension,
                     lead + "is a quantity in " + (reading.detail.empty() ? "no unit" : reading.detail) +
                         "; this takes one in " + wanted + " or what converts to it.");
        return;
    }
}

} // namespace

double quantity_from(const JsonValue& value, Dimension dimension) {
    if (value.kind() == JsonKind::number) {
        return value.context->scales.of(dimension)(value.number());
    }
    if (value.kind() != JsonKind::text) {
        value.wrong_type("a number, or a text with its unit");
        return unread::number;
    }
    const QuantityReading reading = read_quantity(value.text(), dimension);
    if (reading.fault == QuantityFault::none) {
        return reading.value;
    }
    refuse_quantity(value, reading, unit_text(Units{}, dimension));
    return unread::number;
}

double angle_from(const JsonValue& value) {
    if (value.kind() == JsonKind::number) {
        return value.number();
    }
    if (value.kind() != JsonKind::text) {
        value.wrong_type("an angle in degrees");
        return unread::number;
    }
    QuantityReading reading = read_angle(value.text());
    if (reading.fault == QuantityFault::none) {
        return reading.value;
    }
    refuse_quantity(value, reading, "degrees");
    return unread::number;
}

double plain_number_from(const JsonValue& value) {
    if (value.kind() == JsonKind::number) {
        return value.number();
    }
    value.wrong_type("a number");
    return unread::number;
}

Point point_from(const JsonValue& value) {
    constexpr std::string_view wanted = "a point [x, y]";
    Point point{unread::number, unread::number};
    std::uint32_t count = 0;
    if (value.kind() != JsonKind::array) {
        value.wrong_type(wanted);
        return point;
    }
    value.each(wanted, [&](const JsonValue& coordinate) {
        if (count < 2) {
            (count == 0 ? point.x : point.y) = quantity_from(coordinate, dimension::length);
        }
        ++count;
    });
    if (count != 2) {
        value.report(ProblemCode::wrong_type, value.name() + " takes " + std::string(wanted) +
                                                  ", not a list of " + std::to_string(count) + '.');
        return {unread::number, unread::number};
    }
    return point;
}

Ring ring_from(const JsonValue& value) {
    Ring ring;
    bool whole = value.each("a list of points [[x, y], ...]",
                            [&](const JsonValue& corner) { ring.push_back(point_from(corner)); });
    constexpr std::size_t fewest = 3;
    if (whole && ring.size() < fewest) {
        value.report(ProblemCode::ring_too_small, value.name() + " has " + std::to_string(ring.size()) +
                                                      (ring.size() == 1 ? " point" : " points") +
                                                      "; a ring takes at least 3.");
        whole = false;
    }
    // A ring with a hole in it says nothing: none is kept where a corner could not be read.
    const bool good = std::all_of(ring.begin(), ring.end(), [](Point p) { return p.x == p.x && p.y == p.y; });
    return whole && good ? std::move(ring) : Ring{};
}

ObjectReader::ObjectReader(const JsonValue& value, std::string_view noun) : self_(value) {
    self_.noun = noun;
    self_.owner_id = {};
    const std::uint32_t end = value.tree->node(value.node).next;
    for (std::uint32_t i = value.node + 1; i < end; i = value.tree->node(i + 1).next) {
        ++keys_;
        if (owner_id_.empty() && value.tree->text(i) == "id" &&
            value.tree->node(i + 1).kind == JsonKind::text) {
            owner_id_ = value.tree->text(i + 1);
        }
    }
    self_.owner_id = owner_id_;
    self_.owner_place = &self_.place;
}

Origin ObjectReader::origin(std::uint32_t level, std::uint32_t index) const {
    const LineCounter::Place place = self_.context->lines.place_of(self_.at());
    return {place.line, place.column, level, index};
}

std::optional<JsonValue> ObjectReader::value(std::string_view key, Need need) {
    if (asked_count_ < asked_.size()) {
        asked_[asked_count_++] = key;
    }
    const JsonTree& tree = *self_.tree;
    const std::uint32_t end = tree.node(self_.node).next;
    std::optional<JsonValue> result;
    for (std::uint32_t i = self_.node + 1; found_ < keys_ && i < end; i = tree.node(i + 1).next) {
        if (tree.text(i) != key) {
            continue;
        }
        ++found_;
        if (result && !self_.context->log.wants(ProblemCode::duplicate_key)) {
            continue;
        }
        JsonValue here{self_.context, &tree,     i + 1,       Place::of_key(&self_.place, tree.text(i)),
                       self_.noun,    owner_id_, &self_.place};
        if (!result) {
            result = here;
            continue;
        }
        here.node = i;
        here.report(ProblemCode::duplicate_key,
                    '`' + std::string(key) + "` stands twice in " + here.owner() + "; the first counts.",
                    "Leave one of them out.");
    }
    if (!result && need == Need::required && self_.context->log.wants(ProblemCode::missing_key)) {
        self_.report(ProblemCode::missing_key,
                     '`' + std::string(key) + "` of " + self_.owner() + " is missing.");
    }
    return result;
}

std::string ObjectReader::id() {
    const std::optional<JsonValue> found = value("id", Need::required);
    return found ? text_from(*found, "a text") : std::string(unread::id);
}

std::string ObjectReader::text(std::string_view key, Need need) {
    const std::optional<JsonValue> found = value(key, need);
    if (!found) {
        return need == Need::required ? std::string(unread::id) : std::string{};
    }
    return text_from(*found, "a text");
}

std::vector<std::string> ObjectReader::texts(std::string_view key, Need need) {
    std::vector<std::string> result;
    if (const std::optional<JsonValue> found = value(key, need)) {
        found->each("a list of texts", [&](const JsonValue& element) {
            result.push_back(text_from(element, "a list of texts"));
        });
    }
    return result;
}

bool ObjectReader::boolean(std::string_view key, bool otherwise) {
    const std::optional<JsonValue> found = value(key);
    return found ? boolean_from(*found, otherwise) : otherwise;
}

std::optional<double> ObjectReader::quantity(std::string_view key, Dimension dimension) {
    const std::optional<JsonValue> found = value(key);
    return found ? std::optional(quantity_from(*found, dimension)) : std::nullopt;
}

double ObjectReader::required_quantity(std::string_view key, Dimension dimension) {
    const std::optional<JsonValue> found = value(key, Need::required);
    return found ? quantity_from(*found, dimension) : unread::number;
}

std::optional<double> ObjectReader::angle(std::string_view key, Need need) {
    const std::optional<JsonValue> found = value(key, need);
    return found ? std::optional(angle_from(*found)) : std::nullopt;
}

Point ObjectReader::point(std::string_view key) {
    const std::optional<JsonValue> found = value(key, Need::required);
    return found ? point_from(*found) : Point{unread::number, unread::number};
}

Ring ObjectReader::ring(std::string_view key, Need need) {
    const std::optional<JsonValue> found = value(key, need);
    return found ? ring_from(*found) : Ring{};
}

void refuse_choice(const JsonValue& found, std::span<const std::string_view> words) {
    if (found.kind() != JsonKind::text) {
        found.wrong_type("one of " + listed(words));
        return;
    }
    found.report(ProblemCode::unknown_choice,
                 found.name() + " cannot be `" + shown(found.text()) + "`; it takes " + listed(words) + '.',
                 hint_for(found.text(), words, {}));
}

void ObjectReader::finish() {
    if (found_ == keys_) {
        return;
    }
    const std::span<const std::string_view> known(asked_.data(), asked_count_);
    const JsonTree& tree = *self_.tree;
    const std::uint32_t end = tree.node(self_.node).next;
    for (std::uint32_t i = self_.node + 1; i < end; i = tree.node(i + 1).next) {
        const std::string_view key = tree.text(i);
        if (std::find(known.begin(), known.end(), key) != known.end() ||
            !self_.context->log.wants(ProblemCode::unknown_key)) {
            continue;
        }
        const JsonValue here{self_.context, &tree,     i,           Place::of_key(&self_.place, key),
                             self_.noun,    owner_id_, &self_.place};
        here.report(ProblemCode::unknown_key,
                    "A key `" + shown(key) + "` is unknown in " + here.owner() + '.',
                    hint_for(key, known, "Known are "));
    }
}

RUNNEL_NAMESPACE_END
