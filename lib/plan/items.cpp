#include "plan/items.hpp"

#include "plan/words.hpp"

#include <array>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

template <class Choice, std::size_t n>
using Table = std::array<std::pair<std::string_view, Choice>, n>;

constexpr Table<CaseKind, 8> case_kinds{{{"dead", CaseKind::dead},
                                         {"superimposed_dead", CaseKind::superimposed_dead},
                                         {"live", CaseKind::live},
                                         {"roof_live", CaseKind::roof_live},
                                         {"snow", CaseKind::snow},
                                         {"rain", CaseKind::rain},
                                         {"construction", CaseKind::construction},
                                         {"other", CaseKind::other}}};
constexpr Table<Share, 3> shares{
    {{"half", Share::half}, {"lever", Share::lever}, {"continuous", Share::continuous}}};
constexpr Table<SpanKind, 3> spans{
    {{"one-way", SpanKind::one_way}, {"two-way", SpanKind::two_way}, {"columns", SpanKind::columns}}};
constexpr Table<CornerAngles, 2> corners{
    {{"equal", CornerAngles::equal}, {"by_fixity", CornerAngles::by_fixity}}};
constexpr Table<Role, 3> roles{{{"joist", Role::joist}, {"beam", Role::beam}, {"girder", Role::girder}}};
constexpr Table<BaseFixity, 2> fixities{{{"pinned", BaseFixity::pinned}, {"fixed", BaseFixity::fixed}}};

/// asce7, then en1991.
constexpr Table<std::string_view, 11> categories{{{"assembly", "assembly"},
                                                  {"passenger_garage", "passenger_garage"},
                                                  {"other", "other"},
                                                  {"A", "A"},
                                                  {"B", "B"},
                                                  {"C", "C"},
                                                  {"D", "D"},
                                                  {"E", "E"},
                                                  {"F", "F"},
                                                  {"G", "G"},
                                                  {"H", "H"}}};

template <class Choice, std::size_t n>
Choices<Choice> choices(const Table<Choice, n>& table) {
    return table;
}

} // namespace

LoadCase read_case(ObjectReader& object) {
    LoadCase load_case;
    load_case.id = object.id();
    load_case.kind = object.choice("kind", choices(case_kinds)).value_or(CaseKind::other);
    const bool usual = load_case.kind == CaseKind::live;
    const auto reducible = object.value("reducible");
    const auto pattern = object.value("pattern");
    const auto category = object.value("category");
    const auto one_of = object.value("one_of");
    load_case.reducible = reducible ? boolean_from(*reducible, usual) : usual;
    load_case.pattern = pattern ? boolean_from(*pattern, usual) : usual;
    if (category) {
        load_case.category = choice_from(*category, choices(categories)).value_or(std::string_view{});
    }
    load_case.one_of = one_of ? text_from(*one_of, "a text") : std::string{};
    for (const auto& value : {reducible, pattern, category, one_of}) {
        note_without_effect(value);
    }
    return load_case;
}

Section read_section(ObjectReader& object) {
    Section section;
    section.id = object.id();
    section.E = object.quantity("E", dimension::stress);
    section.I = object.quantity("I", dimension::second_moment);
    section.A = object.quantity("A", dimension::area);
    section.depth = object.quantity("depth", dimension::length);
    section.self_weight = object.quantity("self_weight", dimension::line_load);
    section.density = object.quantity("density", dimension::density);
    return section;
}

Build read_build(ObjectReader& object) {
    Build build;
    build.id = object.id();
    if (const auto layers = object.value("layers", Need::required)) {
        layers->each("a list of layers", [&](const JsonValue& element) {
            if (element.kind() != JsonKind::object) {
                element.wrong_type("a list of layers, each an object");
                return;
            }
            ObjectReader reader(element, "layer");
            BuildLayer layer;
            layer.name = reader.text("name");
            layer.thickness = reader.quantity("thickness", dimension::length);
            layer.density = reader.quantity("density", dimension::density);
            layer.q = reader.quantity("q", dimension::area_load);
            reader.finish();
            build.layers.push_back(std::move(layer));
        });
    }
    return build;
}

GridLine read_grid_line(ObjectReader& object) {
    GridLine line;
    line.id = object.id();
    line.from = object.point("from");
    line.to = object.point("to");
    return line;
}

Column read_column(ObjectReader& object) {
    Column column;
    column.id = object.id();
    column.at = object.point("at");
    if (const auto base = object.value("base")) {
        column.base = text_from(*base, "a level's id or `ground`");
    }
    column.top = object.text("top", Need::required);
    column.section = object.text("section");
    column.E = object.quantity("E", dimension::stress);
    column.I = object.quantity("I", dimension::second_moment);
    column.A = object.quantity("A", dimension::area);
    column.self_weight = object.quantity("self_weight", dimension::line_load);
    if (const auto fixity = object.value("base_fixity")) {
        column.base_fixity = choice_from(*fixity, choices(fixities));
        note_without_effect(fixity);
    }
    if (const auto offset = object.value("bearing_offset")) {
        refuse_bearing_offset(*offset);
    }
    return column;
}

Wall read_wall(ObjectReader& object) {
    Wall wall;
    wall.id = object.id();
    wall.from = object.point("from");
    wall.to = object.point("to");
    if (const auto base = object.value("base")) {
        wall.base = text_from(*base, "a level's id or `ground`");
    }
    wall.top = object.text("top", Need::required);
    wall.self_weight = object.quantity("self_weight", dimension::area_load);
    return wall;
}

Member read_member(ObjectReader& object) {
    Member member;
    member.id = object.id();
    member.role = object.choice("role", choices(roles), Need::required).value_or(Role::beam);
    member.from = object.point("from");
    member.to = object.point("to");
    member.section = object.text("section");
    member.bears_on = object.texts("bears_on");
    member.carries_deck = object.boolean("carries_deck", true);
    member.cut = object.boolean("cut", false);
    if (const auto hinges = object.value("hinges")) {
        hinges->each("a list of stations", [&](const JsonValue& hinge) {
            member.hinges.push_back(quantity_from(hinge, dimension::length));
        });
    }
    if (const auto ends = object.value("fixed_ends")) {
        constexpr std::string_view wanted = "a list of `from`, `to` or both";
        ends->each(wanted, [&](const JsonValue& end) {
            if (end.kind() == JsonKind::text && end.text() == "from") {
                member.fixed_from = true;
            } else if (end.kind() == JsonKind::text && end.text() == "to") {
                member.fixed_to = true;
            } else if (end.kind() == JsonKind::text) {
                end.report(ProblemCode::unknown_choice,
                           end.name() + " cannot be `" + shown(end.text()) + "`; it takes from or to.");
            } else {
                end.wrong_type(wanted);
            }
        });
    }
    if (const auto limit = object.value("limit")) {
        refuse_limit(*limit);
    }
    if (const auto offset = object.value("bearing_offset")) {
        refuse_bearing_offset(*offset);
    }
    return member;
}

JoistField read_joist_field(ObjectReader& object) {
    JoistField field;
    field.id = object.id();
    field.outline = object.ring("outline", Need::required);
    field.direction = object.angle("direction", Need::required).value_or(unread::number);
    field.spacing = object.required_quantity("spacing", dimension::length);
    field.offset = object.quantity("offset", dimension::length).value_or(0);
    field.cut = object.boolean("cut", false);
    field.edges = object.boolean("edges", true);
    field.section = object.text("section");
    return field;
}

namespace {

std::vector<Ring> rings_from(const JsonValue& value) {
    std::vector<Ring> rings;
    value.each("a list of rings", [&](const JsonValue& ring) { rings.push_back(ring_from(ring)); });
    return rings;
}

} // namespace

Deck read_deck(ObjectReader& object) {
    Deck deck;
    deck.id = object.id();
    deck.outline = object.ring("outline", Need::required);
    if (const auto openings = object.value("openings")) {
        deck.openings = rings_from(*openings);
    }
    const auto span_word = object.value("span");
    const std::optional<SpanKind> span =
        span_word ? choice_from(*span_word, choices(spans)) : std::optional(SpanKind::one_way);
    deck.span = span.value_or(SpanKind::one_way);
    deck.direction = object.angle("direction");
    if (!span && !deck.direction) {
        deck.direction = unread::number; // whether it needs one cannot be told
    }
    deck.share = object.choice("share", choices(shares));
    deck.q = object.quantity("q", dimension::area_load);
    deck.build = object.text("build");
    deck.corner_angles = object.choice("corner_angles", choices(corners)).value_or(CornerAngles::equal);
    return deck;
}

namespace {

std::optional<PlaneOfLoad> read_plane(const JsonValue& value) {
    ObjectReader reader(value, "plane of load");
    PlaneOfLoad plane{};
    std::size_t points = 0;
    std::size_t values = 0;
    const auto at = reader.value("at", Need::required);
    if (at) {
        at->each("a list of 3 points", [&](const JsonValue& point) {
            const Point read = point_from(point);
            if (points < plane.at.size()) {
                plane.at[points] = read;
            }
            ++points;
        });
    }
    const auto given = reader.value("values", Need::required);
    if (given) {
        given->each("a list of 3 values", [&](const JsonValue& q) {
            const double read = quantity_from(q, dimension::area_load);
            if (values < plane.values.size()) {
                plane.values[values] = read;
            }
            ++values;
        });
    }
    reader.finish();
    const auto three = [](const std::optional<JsonValue>& list, std::size_t count) {
        if (list && list->kind() == JsonKind::array && count != 3) {
            list->report(ProblemCode::wrong_type,
                         list->name() + " takes 3 elements, not " + std::to_string(count) + '.');
        }
        return count == 3;
    };
    const bool points_whole = three(at, points);
    const bool values_whole = three(given, values);
    return points_whole && values_whole ? std::optional(plane) : std::nullopt;
}

} // namespace

AreaLoad read_area_load(ObjectReader& object) {
    AreaLoad load;
    load.case_id = object.text("case", Need::required);
    load.q = unread::number;
    if (const auto q = object.value("q", Need::required)) {
        if (q->kind() == JsonKind::object) {
            load.plane = read_plane(*q);
        } else {
            load.q = quantity_from(*q, dimension::area_load);
        }
    }
    const auto outline = object.value("outline");
    if (outline) {
        load.outline = ring_from(*outline);
    }
    if (const auto openings = object.value("openings")) {
        load.openings = rings_from(*openings);
        if (!outline) {
            openings->report(
                ProblemCode::conflicting_keys,
                openings->name() + " needs an `outline`, in which it leaves holes.",
                "Give the outline, or leave `openings` out: an opening of a deck carries no load "
                "anyway.");
            load.openings.clear();
        }
    }
    load.decks = object.texts("decks");
    load.replaces = object.boolean("replaces", false);
    const auto allowance = object.value("allowance");
    if (allowance) {
        load.allowance = text_from(*allowance, "a text");
    }
    note_without_effect(allowance);
    return load;
}

LineLoad read_line_load(ObjectReader& object) {
    LineLoad load;
    load.case_id = object.text("case", Need::required);
    const auto w = object.value("w");
    const auto w_from = object.value("w_from");
    const auto w_to = object.value("w_to");
    const auto read = [](const std::optional<JsonValue>& value) {
        return value ? quantity_from(*value, dimension::line_load) : unread::number;
    };
    load.w_from = read(w ? w : w_from);
    load.w_to = w ? load.w_from : read(w_to);
    if (w && (w_from || w_to)) {
        (w_from ? w_from : w_to)
            ->report(ProblemCode::conflicting_keys,
                     "`w` of " + object.self().owner() + " excludes `w_from` and `w_to`.",
                     "`w` alone where the load is uniform, else the other two.");
    } else if (!w && w_from.has_value() != w_to.has_value()) {
        (w_from ? w_from : w_to)
            ->report(ProblemCode::conflicting_keys,
                     "`w_from` and `w_to` of " + object.self().owner() + " need each other.",
                     "`w` where the load is uniform.");
    } else if (!w && !w_from) {
        object.self().report(ProblemCode::missing_key, "`w` of " + object.self().owner() + " is missing.",
                             "`w`, or `w_from` and `w_to`.");
    }
    load.from = object.point("from");
    load.to = object.point("to");
    load.on = object.text("on");
    return load;
}

PointLoad read_point_load(ObjectReader& object) {
    PointLoad load;
    load.case_id = object.text("case", Need::required);
    load.p = object.required_quantity("p", dimension::force);
    load.at = object.point("at");
    load.on = object.text("on");
    return load;
}

std::optional<Units> read_units(const JsonValue& value) {
    if (value.kind() != JsonKind::object) {
        value.wrong_type("an object with `length` and `force`");
        return std::nullopt;
    }
    constexpr Table<LengthUnit, 5> lengths{{{"m", LengthUnit::m},
                                            {"mm", LengthUnit::mm},
                                            {"cm", LengthUnit::cm},
                                            {"ft", LengthUnit::ft},
                                            {"in", LengthUnit::in}}};
    constexpr Table<ForceUnit, 5> forces{{{"N", ForceUnit::N},
                                          {"kN", ForceUnit::kN},
                                          {"MN", ForceUnit::MN},
                                          {"lbf", ForceUnit::lbf},
                                          {"kip", ForceUnit::kip}}};
    ObjectReader reader(value, "units");
    const auto length = reader.choice("length", choices(lengths), Need::required);
    const auto force = reader.choice("force", choices(forces), Need::required);
    reader.finish();
    if (!length || !force) {
        return std::nullopt;
    }
    return Units{*length, *force};
}

Settings read_settings(const JsonValue& value, std::vector<std::string>& defaults_used) {
    Settings settings;
    if (value.kind() != JsonKind::object) {
        value.wrong_type("an object");
        return settings;
    }
    ObjectReader reader(value, "settings");
    const auto given = [&](std::string_view key) {
        for (std::size_t i = 0; i < defaults_used.size(); ++i) {
            if (defaults_used[i] == key) {
                defaults_used.erase(defaults_used.begin() + static_cast<std::ptrdiff_t>(i));
                return;
            }
        }
    };
    if (const auto snap = reader.value("snap")) {
        settings.snap = quantity_from(*snap, dimension::length);
        given("snap");
    }
    if (const auto ground = reader.value("ground_elevation")) {
        settings.ground_elevation = quantity_from(*ground, dimension::length);
        given("ground_elevation");
    }
    if (const auto share = reader.choice("share", choices(shares))) {
        settings.share = *share;
        given("share");
    }
    if (const auto load_case = reader.value("self_weight_case")) {
        settings.self_weight_case = text_from(*load_case, "a case's id");
        given("self_weight_case");
    }
    reader.finish();
    return settings;
}

RUNNEL_NAMESPACE_END
