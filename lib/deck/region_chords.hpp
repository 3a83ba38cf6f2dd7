#pragma once

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Borders of cells as lines of chords, in strip axes. Chords stay within `chord_error` of a parabola and
/// keep the area beside it. The cells on its two sides, which stand in the same axes but may end at other
/// levels, get the same points up to rounding.
class BorderChords {
public:
    /// `cells`: those of one deck.
    BorderChords(const Sharing& sharing, std::span<const std::uint32_t> cells, double noise,
                 double chord_error);

    /// Appends the points of one of a cell's borders, upward, both ends included.
    void append(const Cell& cell, const Border& border, std::vector<Point>& points) const;

private:
    /// The end of a parabola.
    struct End {
        std::uint32_t axes = 0;
        Point at;
    };
    static bool before(const End& l, const End& r);
    [[nodiscard]] bool is_straight(const Border& border) const;
    [[nodiscard]] bool lies_on(const Cell& cell, const Border& border, Point p) const;
    [[nodiscard]] std::vector<double> levels_on(const Cell& cell, const Border& border) const;
    void append_stretch(double from, double to, const Border& border, std::vector<Point>& points) const;

    double noise_;
    double chord_error_;
    std::vector<End> ends_; ///< sorted
};

RUNNEL_NAMESPACE_END
