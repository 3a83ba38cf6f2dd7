#include "plan/items.hpp"
#include "plan/plan_receiver.hpp"
#include "plan/words.hpp"

#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::string_view version_of_plans = "plan/1";

template <class Item>
const std::string& name_of_item(const Item& item) {
    if constexpr (requires { item.case_id; }) {
        return item.case_id;
    } else {
        return item.id;
    }
}

} // namespace

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
