#pragma once

#include "report/svg_text.hpp"

#include <runnel/deck.hpp>
#include <runnel/framing.hpp>
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

/// How a deck spans: an arrow along the strips of a one-way deck; two that cross, along and square to its
/// longest edge, for a two-way deck; a cross with a small square at each end for a deck on columns.
struct SpanMark {
    SpanKind span = SpanKind::one_way;
    Point along; ///< on the sheet, of length one
    double half_length = 0;

    /// From the line that the deck's label stands on down to the mark's middle.
    [[nodiscard]] double below() const;
    [[nodiscard]] double half_width() const;
    [[nodiscard]] double half_height() const;
    void draw(SvgText& svg, Point middle) const;
};

/// `side`: the deck's shorter side on the sheet.
[[nodiscard]] SpanMark span_mark(const FramedDeck& deck, double side);

/// The cells that are drawn apart: of two-way decks and decks on columns what goes to the end of a member or
/// wall.
[[nodiscard]] Sharing end_zones_of(const Sharing& sharing, const FramedLevel& level);

RUNNEL_NAMESPACE_END
