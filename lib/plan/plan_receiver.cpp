#include "plan/plan_receiver.hpp"

#include "plan/items.hpp"
#include "plan/words.hpp"

#include <algorithm>
#include <array>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::string_view version_of_plans = "plan/1";

struct KeyRow {
    std::string_view name;
    PlanKey key;
    bool is_list;
};

constexpr std::array plan_rows{KeyRow{"runnel", PlanKey::runnel, false},
                               KeyRow{"title", PlanKey::title, false},
                               KeyRow{"units", PlanKey::units, false},
                               KeyRow{"settings", PlanKey::settings, false},
                               KeyRow{"cases", PlanKey::cases, true},
                               KeyRow{"sections", PlanKey::sections, true},
                               KeyRow{"builds", PlanKey::builds, true},
                               KeyRow{"grid", PlanKey::grid, true},
                               KeyRow{"columns", PlanKey::columns, true},
                               KeyRow{"walls", PlanKey::walls, true},
                               KeyRow{"levels", PlanKey::levels, true},
                               KeyRow{"frames", PlanKey::frames, true},
                               KeyRow{"combinations", PlanKey::combinations, true},
                               KeyRow{"reductions", PlanKey::reductions, false}};
constexpr std::array level_rows{KeyRow{"id", PlanKey::id, false},
                                KeyRow{"elevation", PlanKey::elevation, false},
                                KeyRow{"like", PlanKey::like, false},
                                KeyRow{"moving_point", PlanKey::moving_point, false},
                                KeyRow{"members", PlanKey::members, true},
                                KeyRow{"joist_fields", PlanKey::joist_fields, true},
                                KeyRow{"decks", PlanKey::decks, true},
                                KeyRow{"area_loads", PlanKey::area_loads, true},
                                KeyRow{"line_loads", PlanKey::line_loads, true},
                                KeyRow{"point_loads", PlanKey::point_loads, true}};

constexpr std::uint32_t bit(PlanKey key) {
    return std::uint32_t{1} << static_cast<std::uint32_t>(key);
}

template <std::size_t n>
const KeyRow* row_named(const std::array<KeyRow, n>& rows, std::string_view name) {
    const auto it =
        std::find_if(rows.begin(), rows.end(), [&](const KeyRow& row) { return row.name == name; });
    return it == rows.end() ? nullptr : &*it;
}

template <std::size_t n>
std::array<std::string_view, n> names_of(const std::array<KeyRow, n>& rows) {
    std::array<std::string_view, n> names;
    std::transform(rows.begin(), rows.end(), names.begin(), [](const KeyRow& row) { return row.name; });
    return names;
}

std::string_view name_of_key(PlanKey key) {
    for (const KeyRow& row : plan_rows) {
        if (row.key == key) {
            return row.name;
        }
    }
    for (const KeyRow& row : level_rows) {
        if (row.key == key) {
            return row.name;
        }
    }
    return {};
}

bool is_list(PlanKey key) {
    const auto is = [&](const KeyRow& row) { return row.key == key && row.is_list; };
    return std::any_of(plan_rows.begin(), plan_rows.end(), is) ||
           std::any_of(level_rows.begin(), level_rows.end(), is);
}

/// What one element of a list is called.
std::string_view noun_of(PlanKey list) {
    switch (list) {
    case PlanKey::cases:
        return "case";
    case PlanKey::sections:
        return "section";
    case PlanKey::builds:
        return "build";
    case PlanKey::grid:
        return "grid line";
    case PlanKey::columns:
        return "column";
    case PlanKey::walls:
        return "wall";
    case PlanKey::levels:
        return "level";
    case PlanKey::frames:
        return "frame";
    case PlanKey::combinations:
        return "combination";
    case PlanKey::members:
        return "member";
    case PlanKey::joist_fields:
        return "joist field";
    case PlanKey::decks:
        return "deck";
    case PlanKey::area_loads:
        return "area load";
    case PlanKey::line_loads:
        return "line load";
    case PlanKey::point_loads:
        return "point load";
    default:
        return "plan";
    }
}

template <class Item>
const std::string& name_of_item(const Item& item) {
    if constexpr (requires { item.case_id; }) {
        return item.case_id;
    } else {
        return item.id;
    }
}

/// Looks ahead for the plan's units where quantities come before them.
class UnitsFinder final : public JsonReceiver {
public:
    explicit UnitsFinder(ReadingContext& quiet) : quiet_(quiet) {}

    bool scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) override {
        if (capturing_) {
            tree_.scalar(kind, number, text, at);
        }
        return go_on();
    }
    bool key(std::string_view name, std::uint32_t at) override {
        if (capturing_) {
            tree_.key(name, at);
        } else {
            capturing_ = depth_ == 1 && name == "units";
        }
        return true;
    }
    bool open(JsonKind kind, std::uint32_t at) override {
        ++depth_;
        if (capturing_) {
            tree_.open(kind, at);
        }
        return true;
    }
    bool close() override {
        --depth_;
        if (capturing_) {
            tree_.close();
        }
        return go_on();
    }

    std::optional<Units> found;

private:
    bool go_on() {
        if (!capturing_ || !tree_.whole()) {
            return true;
        }
        found =
            read_units(JsonValue{&quiet_, &tree_, 0, Place::of_key(nullptr, "units"), "plan", {}, nullptr});
        return false;
    }

    ReadingContext& quiet_;
    JsonTree tree_;
    std::size_t depth_ = 0;
    bool capturing_ = false;
};

} // namespace

ElementCount count_elements(std::string_view text, std::size_t at) {
    std::size_t depth = 0;
    std::size_t commas = 0;
    bool empty = true;
    for (std::size_t i = at; i < text.size(); ++i) {
        switch (text[i]) {
        case '"':
            empty = false;
            for (++i; i < text.size() && text[i] != '"'; ++i) {
                i += text[i] == '\\' ? 1 : 0;
            }
            break;
        case '[':
        case '{':
            empty = empty && depth == 0;
            ++depth;
            break;
        case ']':
        case '}':
            if (--depth == 0) {
                return {empty ? 0 : commas + 1, i + 1 - at};
            }
            break;
        case ',':
            commas += depth == 1 ? 1 : 0;
            break;
        default:
            empty = empty && static_cast<unsigned char>(text[i]) <= ' ';
            break;
        }
    }
    return {commas, text.size() - at};
}

PlanReceiver::PlanReceiver(ReadingContext& context, Plan& plan) : context_(context), plan_(plan) {
    plan_.defaults_used = {"snap", "ground_elevation", "share", "self_weight_case"};
}

void PlanReceiver::report_here(ProblemCode code, std::uint32_t at, std::string pointer, std::string message,
                               std::string hint) {
    Problem problem;
    problem.code = code;
    problem.severity = kind_of(code).severity;
    problem.message = std::move(message);
    problem.hint = std::move(hint);
    problem.pointer = std::move(pointer);
    if (in_level_ && !level_.id.empty() && level_.id != unread::id) {
        problem.ids.push_back(level_.id);
    }
    context_.log.add_at(at, std::move(problem));
}

std::string PlanReceiver::owner_here() const {
    if (!in_level_) {
        return "the plan";
    }
    return level_.id.empty() || level_.id == unread::id ? level_place_.element()
                                                        : "level " + shown(level_.id);
}

std::string_view PlanReceiver::noun_here() const {
    return in_level_ ? "level" : "plan";
}

bool PlanReceiver::scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) {
    if (skipping_) {
        skipping_ = skip_depth_ > 0;
        return true;
    }
    if (!capturing_ && !begin_value(kind, at)) {
        skipping_ = false;
        return true;
    }
    tree_.scalar(kind, number, text, at);
    if (tree_.whole()) {
        capture_done();
    }
    return !is_other_document_;
}

bool PlanReceiver::key(std::string_view name, std::uint32_t at) {
    if (skipping_) {
        return true;
    }
    if (capturing_) {
        tree_.key(name, at);
        return true;
    }
    const KeyRow* row = in_level_ ? row_named(level_rows, name) : row_named(plan_rows, name);
    const std::string where = owner_here();
    if (row == nullptr) {
        const auto plan_names = names_of(plan_rows);
        const auto level_names = names_of(level_rows);
        const std::span<const std::string_view> known =
            in_level_ ? std::span<const std::string_view>(level_names) : plan_names;
        report_here(ProblemCode::unknown_key, at, Place::of_key(place_here(), name).pointer(),
                    "A key `" + shown(name) + "` is unknown in " + where + '.',
                    hint_for(name, known, "Known are "));
        skipping_ = true;
        return true;
    }
    Keys& seen = in_level_ ? level_keys_ : plan_keys_;
    if ((seen & bit(row->key)) != 0) {
        report_here(ProblemCode::duplicate_key, at, Place::of_key(place_here(), name).pointer(),
                    '`' + std::string(name) + "` stands twice in " + where + "; the first counts.",
                    row->is_list ? "Put both lists into one." : "Leave one of them out.");
        skipping_ = true;
        return true;
    }
    seen |= bit(row->key);
    key_ = row->key;
    return true;
}

/// Decides what is done with a value that begins: true if it is to be captured.
bool PlanReceiver::begin_value(JsonKind kind, std::uint32_t at) {
    const bool is_object = kind == JsonKind::object;
    if (!in_plan_) {
        plan_at_ = at;
        if (is_object) {
            in_plan_ = true;
            return false;
        }
    } else if (in_list_) {
        if (!may_keep_item(at)) {
            skipping_ = true;
            return false;
        }
    } else if (in_levels_ && !in_level_) {
        level_place_ = Place::of_index(&levels_place_, level_count_++);
        if (level_count_ > context_.limits.levels) {
            if (level_count_ == context_.limits.levels + 1) {
                report_here(ProblemCode::too_much, at, level_place_.pointer(),
                            "The plan has more than " + std::to_string(context_.limits.levels) +
                                " levels, the limit; the rest is not read.");
            }
            doubts_.levels = true;
            skipping_ = true;
            return false;
        }
        if (is_object) {
            begin_level(at);
            return false;
        }
    } else if (kind == JsonKind::array && is_list(key_)) {
        enter_list(at);
        return false;
    }
    capturing_ = true;
    tree_.clear();
    return true;
}

bool PlanReceiver::open(JsonKind kind, std::uint32_t at) {
    if (skipping_) {
        ++skip_depth_;
        return true;
    }
    if (!capturing_ && !begin_value(kind, at)) {
        skip_depth_ = skipping_ ? 1 : 0;
        return true;
    }
    tree_.open(kind, at);
    return true;
}

bool PlanReceiver::close() {
    if (skipping_) {
        skipping_ = --skip_depth_ > 0;
    } else if (capturing_) {
        tree_.close();
        if (tree_.whole()) {
            capture_done();
        }
    } else if (in_list_) {
        in_list_ = false;
    } else if (in_level_) {
        end_level();
    } else if (in_levels_) {
        in_levels_ = false;
    }
    return !is_other_document_;
}

/// Reserves exactly, by looking ahead, so that no list is ever moved or kept larger than it is.
void PlanReceiver::enter_list(std::uint32_t at) {
    if (key_ == PlanKey::levels) {
        in_levels_ = true;
        return;
    }
    in_list_ = true;
    item_count_ = 0;
    list_count_ = 0;
    list_place_ = Place::of_key(place_here(), name_of_key(key_));
    // The shortest object that is kept, {"case":"d","q":1}, has 18 bytes: a list of less is not given room
    // for.
    constexpr std::size_t least_bytes = 18;
    const ElementCount list = count_elements(context_.text, at);
    const std::size_t count =
        std::min({list.elements, list.bytes / least_bytes + 1, context_.limits.members});
    switch (key_) {
    case PlanKey::columns:
        return plan_.columns.reserve(count);
    case PlanKey::walls:
        return plan_.walls.reserve(count);
    case PlanKey::members:
        return level_.members.reserve(count);
    case PlanKey::decks:
        return level_.decks.reserve(count);
    case PlanKey::area_loads:
        level_.own_area_loads = true;
        return level_.area_loads.reserve(count);
    case PlanKey::line_loads:
        level_.own_line_loads = true;
        return level_.line_loads.reserve(count);
    case PlanKey::point_loads:
        level_.own_point_loads = true;
        return level_.point_loads.reserve(count);
    case PlanKey::frames:
    case PlanKey::combinations:
        if (list.elements > 0) {
            report_here(ProblemCode::not_supported_yet, at, list_place_.pointer(),
                        key_ == PlanKey::frames
                            ? "`frames` of the plan: frames cannot be computed yet."
                            : "`combinations` of the plan cannot be computed yet; results "
                              "are characteristic, by case.",
                        "Leave the key out until then.");
        }
        return;
    default:
        return;
    }
}

bool PlanReceiver::may_keep_item(std::uint32_t at) {
    // Of members all levels count together, of other things each list.
    const std::size_t count = key_ == PlanKey::members ? ++member_count_ : ++list_count_;
    if (count == context_.limits.members + 1) {
        report_here(ProblemCode::too_much, at, Place::of_index(&list_place_, item_count_).pointer(),
                    "More than " + std::to_string(context_.limits.members) + ' ' +
                        std::string(noun_of(key_)) +
                        "s are listed, and that is the limit; the rest is not read.");
        doubt(key_);
    }
    return count <= context_.limits.members;
}

void PlanReceiver::begin_level(std::uint32_t at) {
    in_level_ = true;
    level_keys_ = 0;
    level_at_ = at;
    level_ = Level{};
    level_.id = unread::id;
    level_.elevation = unread::number;
    const LineCounter::Place place = context_.lines.place_of(at);
    level_.origin = {place.line, place.column, Origin::nowhere, level_count_ - 1};
}

void PlanReceiver::end_level() {
    for (const PlanKey key : {PlanKey::id, PlanKey::elevation}) {
        if ((level_keys_ & bit(key)) == 0) {
            report_here(ProblemCode::missing_key, level_at_, level_place_.pointer(),
                        '`' + std::string(name_of_key(key)) + "` of " + owner_here() + " is missing.");
        }
    }
    in_level_ = false;
    plan_.levels.push_back(std::move(level_));
    level_ = Level{};
}

void PlanReceiver::finish() {
    if (!in_plan_) {
        return;
    }
    for (const PlanKey key : {PlanKey::runnel, PlanKey::units, PlanKey::cases, PlanKey::levels}) {
        if ((plan_keys_ & bit(key)) == 0) {
            report_here(ProblemCode::missing_key, plan_at_, {},
                        '`' + std::string(name_of_key(key)) + "` of the plan is missing.",
                        key == PlanKey::runnel  ? "\"runnel\": \"plan/1\""
                        : key == PlanKey::units ? "\"units\": {\"length\": \"m\", \"force\": \"kN\"}"
                                                : "");
        }
    }
    doubts_.cases = doubts_.cases || (plan_keys_ & bit(PlanKey::cases)) == 0;
    doubts_.references = std::move(context_.references);
}

void PlanReceiver::know_units() {
    if (units_known_) {
        return;
    }
    units_known_ = true;
    Limits limits = context_.limits;
    limits.problems = 0;
    ReadingContext quiet(context_.text, limits);
    UnitsFinder finder(quiet);
    (void)walk_json(context_.text, context_.limits.nesting, finder);
    plan_.units = finder.found.value_or(Units{});
    context_.scales = UnitScales(plan_.units);
}

void PlanReceiver::doubt(PlanKey list) {
    switch (list) {
    case PlanKey::cases:
        doubts_.cases = doubts_.case_kinds = true;
        return;
    case PlanKey::sections:
        doubts_.sections = true;
        return;
    case PlanKey::builds:
        doubts_.builds = true;
        return;
    case PlanKey::levels:
        doubts_.levels = true;
        return;
    case PlanKey::columns:
    case PlanKey::walls:
        doubts_.supports = true;
        return;
    default:
        return;
    }
}

void PlanReceiver::capture_done() {
    capturing_ = false;
    if (!in_plan_) {
        const JsonValue value{&context_, &tree_, 0, Place{}, "plan", {}, nullptr};
        Problem problem;
        problem.code = ProblemCode::wrong_type;
        problem.severity = Severity::error;
        problem.message = "A plan is an object, not " + std::string(words_for(value.kind())) + '.';
        context_.log.add_at(value.at(), std::move(problem));
        return;
    }
    if (key_ != PlanKey::runnel && key_ != PlanKey::title && key_ != PlanKey::units) {
        know_units();
    }
    if (in_list_) {
        const Place place = Place::of_index(&list_place_, item_count_++);
        return read_item(JsonValue{&context_, &tree_, 0, place, noun_of(key_), {}, nullptr});
    }
    if (in_levels_ && !in_level_) {
        const JsonValue value{&context_, &tree_, 0, level_place_, "plan", {}, nullptr};
        doubts_.levels = true;
        return value.report(ProblemCode::wrong_type, "`levels` takes a list of objects, and " +
                                                         value.place.element() + " is " +
                                                         std::string(words_for(value.kind())) + '.');
    }
    const bool known_level = in_level_ && level_.id != unread::id;
    const JsonValue value{&context_,   &tree_,
                          0,           Place::of_key(place_here(), name_of_key(key_)),
                          noun_here(), known_level ? std::string_view(level_.id) : std::string_view{},
                          place_here()};
    if (is_list(key_)) {
        doubt(key_);
        return value.wrong_type("a list");
    }
    in_level_ ? read_level_value(value) : read_plan_value(value);
}

void PlanReceiver::read_version(const JsonValue& value) {
    if (value.kind() != JsonKind::text) {
        return value.wrong_type("the text \"plan/1\"");
    }
    if (value.text() != version_of_plans) {
        value.report(ProblemCode::wrong_version,
                     "`runnel` is \"" + shown(value.text()) + "\", and only \"plan/1\" is read here.",
                     value.text().substr(0, 5) == "frame" ? "A frame by itself is read by `runnel frame`."
                                                          : "");
        is_other_document_ = true; // its keys may mean something else
    }
}

void PlanReceiver::read_plan_value(const JsonValue& value) {
    switch (key_) {
    case PlanKey::runnel:
        return read_version(value);
    case PlanKey::title:
        plan_.title = text_from(value, "a text");
        return;
    case PlanKey::units:
        if (const std::optional<Units> units = read_units(value)) {
            plan_.units = *units;
        }
        context_.scales = UnitScales(plan_.units);
        units_known_ = true;
        return;
    case PlanKey::settings:
        plan_.settings = read_settings(value, plan_.defaults_used);
        return;
    case PlanKey::reductions:
        return refuse_reductions(value);
    default:
        return;
    }
}

void PlanReceiver::read_level_value(const JsonValue& value) {
    switch (key_) {
    case PlanKey::id:
        level_.id = text_from(value, "a text");
        return;
    case PlanKey::elevation:
        level_.elevation = quantity_from(value, dimension::length);
        return;
    case PlanKey::like:
        level_.like = text_from(value, "a level's id");
        return;
    case PlanKey::moving_point:
        return refuse_moving_point(value);
    default:
        return;
    }
}

template <class Item>
void PlanReceiver::keep(std::vector<Item>& list, Item item, const Origin& origin) {
    // What has neither id nor case can be neither cited nor checked; a text full of them is not to fill
    // memory.
    const auto& name = name_of_item(item);
    if (name == unread::id) {
        return doubt(key_);
    }
    item.origin = origin;
    list.push_back(std::move(item));
}

void PlanReceiver::read_item(const JsonValue& value) {
    if (value.kind() != JsonKind::object) {
        doubt(key_);
        return value.report(ProblemCode::wrong_type,
                            '`' + std::string(name_of_key(key_)) + "` takes a list of objects, and " +
                                value.place.element() + " is " + std::string(words_for(value.kind())) + '.');
    }
    ObjectReader object(value, noun_of(key_));
    const Origin origin = object.origin(in_level_ ? level_count_ - 1 : Origin::nowhere, item_count_ - 1);
    in_level_ ? read_level_item(object, origin) : read_plan_item(object, origin);
    object.finish();
}

void PlanReceiver::read_plan_item(ObjectReader& object, const Origin& origin) {
    switch (key_) {
    case PlanKey::cases:
        return keep(plan_.cases, read_case(object), origin);
    case PlanKey::sections:
        return keep(plan_.sections, read_section(object), origin);
    case PlanKey::builds:
        return keep(plan_.builds, read_build(object), origin);
    case PlanKey::grid:
        return keep(plan_.grid, read_grid_line(object), origin);
    case PlanKey::columns:
        return keep(plan_.columns, read_column(object), origin);
    case PlanKey::walls:
        return keep(plan_.walls, read_wall(object), origin);
    case PlanKey::frames:
        return refuse_frame(object);
    case PlanKey::combinations:
        return refuse_combination(object);
    default:
        return;
    }
}

void PlanReceiver::read_level_item(ObjectReader& object, const Origin& origin) {
    switch (key_) {
    case PlanKey::members:
        return keep(level_.members, read_member(object), origin);
    case PlanKey::joist_fields:
        return keep(level_.joist_fields, read_joist_field(object), origin);
    case PlanKey::decks:
        return keep(level_.decks, read_deck(object), origin);
    case PlanKey::area_loads:
        return keep(level_.area_loads, read_area_load(object), origin);
    case PlanKey::line_loads:
        return keep(level_.line_loads, read_line_load(object), origin);
    case PlanKey::point_loads:
        return keep(level_.point_loads, read_point_load(object), origin);
    default:
        return;
    }
}

RUNNEL_NAMESPACE_END
