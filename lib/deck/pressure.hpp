#pragma once

#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Index of a case by its id; `none` if there is none.
[[nodiscard]] std::uint32_t case_index(const Plan& plan, std::string_view id);
/// The case that own weights go to; `none` if the plan has no dead case.
[[nodiscard]] std::uint32_t own_weight_case(const Plan& plan);

/// The pressure of an area load over the whole plan: `slope` is where it grows and by how much a metre
/// (kN/m3).
struct Plane {
    Point at;     ///< a point of the plan
    double q = 0; ///< kN/m2 there
    Point slope;

    explicit Plane(const AreaLoad& load);
    [[nodiscard]] bool is_uniform() const { return slope.x == 0 && slope.y == 0; }
    [[nodiscard]] bool is_nothing() const { return is_uniform() && q == 0; }
    [[nodiscard]] Intensity in(const StripAxes& axes) const;
};

/// What presses on one deck: its own weight, and area loads cut to convex zones.
///
/// Area loads of a case add up, unless one `replaces`: it stands, where it acts, instead of the earlier area
/// loads of its case. A deck's own weight is never replaced.
/// Laws (tests/laws/pressure_test.cpp): zones over the pieces of a deck add up to what acts on the deck, in
/// whatever axes the pieces are; `replaces` leaves out exactly what it stands on.
class DeckPressure {
public:
    /// `acting`: the level's area loads that may act on this deck, rising. `axes`: those in which most pieces
    /// will be asked for, since zones need no turning there.
    DeckPressure(const Plan& plan, const FramedLevel& level, std::uint32_t deck,
                 std::span<const std::uint32_t> acting, const StripAxes& axes, double noise);

    struct Uniform {
        std::uint32_t load_case = 0;
        double q = 0; ///< kN/m2
    };
    /// What acts alike on every point of the deck, summed by case, own weight included.
    [[nodiscard]] const std::vector<Uniform>& uniform() const { return uniform_; }
    [[nodiscard]] bool has_zones() const { return !zones_.empty(); }

    struct Piece {
        std::uint32_t load_case = 0;
        Intensity intensity; ///< in the axes asked for, as `where`
        StripPiece where;
    };
    /// What acts on `area`, a piece of the deck in `axes`, beside the uniform part. `pieces` is cleared
    /// first.
    void zones_over(const StripPiece& area, const StripAxes& axes, std::vector<Piece>& pieces) const;

private:
    struct Zone {
        std::uint32_t load_case = 0;
        Plane plane;
        bool everywhere = false;
        bool replaces = false;
        std::uint32_t first = 0, last = 0; ///< in outlines_, where not everywhere
    };
    /// A zone near the area asked for: its convex pieces that are near stand from `first` to `last`.
    struct Near {
        std::uint32_t index = none;
        std::size_t first = 0, last = 0; ///< in Surroundings::windows
    };
    struct Surroundings {
        std::vector<Near> zones; ///< in the plan's order
        std::vector<const Convex*> windows;
        std::vector<Convex> turned; ///< windows, where the axes asked for are others than `home_`
    };

    /// How many windows were near before the last halving, and how many halvings on end parted few of them.
    struct Halving {
        std::size_t windows = 0;
        int in_vain = 0;
    };

    void add_zones(const Plan& plan, const FramedLevel& level, std::span<const std::uint32_t> acting);
    [[nodiscard]] Surroundings zones_near(const StripPiece& area, const StripAxes& axes) const;
    void add_zones_over(const StripPiece& area, const StripAxes& axes, const Halving& halving,
                        std::vector<Piece>& pieces) const;

    StripAxes home_;
    double noise_ = 0;
    std::vector<Uniform> uniform_;
    std::vector<Zone> zones_;               ///< in the plan's order
    std::vector<std::uint32_t> everywhere_; ///< zones with load
    std::vector<Convex> outlines_;          ///< convex pieces of the zones, in home_, by rising zone
    std::vector<std::uint32_t> zone_of_;
    BoxFinder finder_; ///< of outlines_
};

/// The area loads that may act on each deck, rising, by their `decks` lists and their outlines' boxes.
[[nodiscard]] Grouped<std::uint32_t> area_loads_by_deck(const FramedLevel& level, double noise);

/// Those of the loads acting on a deck that lie on it by more than rounding: a zone that is drawn along its
/// edge, on the outside, does not act. `pieces`: the deck's area in `axes`.
[[nodiscard]] std::vector<std::uint32_t> really_acting(const FramedLevel& level,
                                                       std::span<const std::uint32_t> acting,
                                                       const std::vector<StripPiece>& pieces,
                                                       const StripAxes& axes, double noise);

/// The area loads with outlines that reach over each deck, whether they are meant for it or not.
[[nodiscard]] Grouped<std::uint32_t> outlines_over_decks(const FramedLevel& level, double noise);

/// The ring itself where it is convex (turned counter-clockwise), else its convex pieces.
[[nodiscard]] std::vector<Convex> convex_zone(Ring ring, double noise);

/// The area of a deck, less its openings, in pieces in the given axes.
[[nodiscard]] std::vector<StripPiece> pieces_of_deck(const FramedDeck& deck, const StripAxes& axes,
                                                     double noise);

/// A ring seen in strip axes.
[[nodiscard]] Ring to_strip(const StripAxes& axes, const Ring& ring);

RUNNEL_NAMESPACE_END
