#pragma once

#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Index of a case by its id; `none` if there is none.
[[nodiscard]] std::uint32_t case_index(const Plan& plan, std::string_view id);
/// The case that own weights go to; `none` if the plan has no dead case.
[[nodiscard]] std::uint32_t own_weight_case(const Plan& plan);

/// What presses on one deck, seen in given axes: its own weight, and area loads cut to convex zones.
///
/// Area loads of a case add up, unless one `replaces`: it stands, where it acts, instead of the earlier area
/// loads of its case. A deck's own weight is never replaced.
class DeckPressure {
public:
    /// `acting`: the level's area loads that may act on this deck, rising.
    DeckPressure(const Plan& plan, const FramedLevel& level, std::uint32_t deck,
                 std::span<const std::uint32_t> acting, const StripAxes& axes, double noise);

    struct Uniform {
        std::uint32_t load_case = 0;
        double q = 0; ///< kN/m2
    };
    /// What acts on every point of the deck, summed by case, own weight included.
    [[nodiscard]] const std::vector<Uniform>& uniform() const { return uniform_; }
    [[nodiscard]] bool has_zones() const { return !zones_.empty(); }

    struct Piece {
        std::uint32_t load_case = 0;
        double q = 0;
        Convex where;
    };
    /// What acts on `area` beside the uniform part, cut to convex pieces.
    void zones_over(const Convex& area, std::vector<Piece>& pieces) const;

private:
    struct Zone {
        std::uint32_t load_case = 0;
        double q = 0;
        bool everywhere = false;
        std::vector<Convex> pieces;             ///< where not everywhere
        BoxFinder finder;                       ///< of the pieces
        std::vector<std::uint32_t> replaced_by; ///< later zones of the same case that replace
    };

    void carve_out(const Zone& by, std::vector<Convex>& parts) const;

    double noise_ = 0;
    std::vector<Uniform> uniform_;
    std::vector<Zone> zones_;
};

/// The area loads that may act on each deck, rising, by their `decks` lists and their outlines' boxes.
[[nodiscard]] Grouped<std::uint32_t> area_loads_by_deck(const FramedLevel& level, double noise);

/// The area loads with outlines that reach over each deck, whether they are meant for it or not.
[[nodiscard]] Grouped<std::uint32_t> outlines_over_decks(const FramedLevel& level, double noise);

/// The ring itself where it is convex (turned counter-clockwise), else its convex pieces.
[[nodiscard]] std::vector<Convex> convex_zone(Ring ring, double noise);

/// A ring seen in strip axes.
[[nodiscard]] Ring to_strip(const StripAxes& axes, const Ring& ring);

RUNNEL_NAMESPACE_END
