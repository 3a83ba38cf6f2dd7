#pragma once

#include "plan/object_reader.hpp"

#include <runnel/plan.hpp>

#include <cstdint>

RUNNEL_NAMESPACE_BEGIN

/// Readers of the objects in a plan's lists. Each asks for every key that the format has, so that what is
/// left is unknown.
[[nodiscard]] LoadCase read_case(ObjectReader& object);
[[nodiscard]] Section read_section(ObjectReader& object);
[[nodiscard]] Build read_build(ObjectReader& object);
[[nodiscard]] GridLine read_grid_line(ObjectReader& object);
[[nodiscard]] Column read_column(ObjectReader& object);
[[nodiscard]] Wall read_wall(ObjectReader& object);
[[nodiscard]] Member read_member(ObjectReader& object);
[[nodiscard]] JoistField read_joist_field(ObjectReader& object);
[[nodiscard]] Deck read_deck(ObjectReader& object);
[[nodiscard]] AreaLoad read_area_load(ObjectReader& object);
[[nodiscard]] LineLoad read_line_load(ObjectReader& object);
[[nodiscard]] PointLoad read_point_load(ObjectReader& object);

/// Readers of single values of the plan.
[[nodiscard]] std::optional<Units> read_units(const JsonValue& value);
[[nodiscard]] Settings read_settings(const JsonValue& value, std::vector<std::string>& defaults_used);

/// What the format has but no engine computes yet: its shape is checked, and it is refused where it asks for
/// anything.
void refuse_frame(ObjectReader& object);
void refuse_combination(ObjectReader& object);
void refuse_reductions(const JsonValue& value);
void refuse_moving_point(const JsonValue& value);
void refuse_limit(const JsonValue& value);
void refuse_bearing_offset(const JsonValue& value);
/// A note, once for each key: kept, but nothing reads it yet.
void note_without_effect(const std::optional<JsonValue>& value);

RUNNEL_NAMESPACE_END
