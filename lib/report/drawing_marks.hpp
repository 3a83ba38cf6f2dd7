#pragma once

#include "report/svg_text.hpp"

#include <runnel/geometry.hpp>

#include <optional>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

/// The part of a line that lies within a box (Liang and Barsky); nothing where it misses it.
[[nodiscard]] std::optional<std::pair<Point, Point>> part_within(Point from, Point to, Point low, Point high);

/// Where the middle of a text of that width and height, turned by an angle, comes to lie so that all of it is
/// on a sheet from (0, 0) to `far_corner`.
[[nodiscard]] Point kept_on_sheet(Point middle, double width, double height, double angle, Point far_corner);

/// The tints of regions, as patterns `tint0` and so on, and the looks of all else.
void drawing_style(SvgText& svg);

/// The path of an arrow with a head at either end; `along` is its direction on the sheet, of length one.
void double_arrow(SvgText& svg, Point middle, Point along, double half_length);

RUNNEL_NAMESPACE_END
