#pragma once

#include "deck/acting.hpp"
#include "deck/level_zones.hpp"
#include "geometry/box_tree.hpp"
#include "geometry/convex.hpp"
#include "geometry/strip_piece.hpp"

#include <runnel/deck.hpp>

#include <cstdint>
#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

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
    /// `acting`: the level's area loads that may act on this deck, rising; `zones`: the level's. `axes`:
    /// those in which most pieces will be asked for, since zones need no turning there.
    DeckPressure(const Plan& plan, const FramedLevel& level, std::uint32_t deck,
                 std::span<const std::uint32_t> acting, LevelZones& zones, const StripAxes& axes,
                 double noise);

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

    void add_zones(const Plan& plan, const FramedLevel& level, const Box& reach,
                   std::span<const std::uint32_t> acting, LevelZones& zones);
    [[nodiscard]] Surroundings zones_near(const StripPiece& area, const StripAxes& axes) const;
    void add_zones_over(const StripPiece& area, const StripAxes& axes, const Halving& halving,
                        std::vector<Piece>& pieces) const;

    StripAxes home_;
    double noise_ = 0;
    std::vector<Uniform> uniform_;
    std::vector<Zone> zones_;               ///< in the plan's order
    std::vector<std::uint32_t> everywhere_; ///< zones with load
    std::vector<Convex> outlines_; ///< convex pieces of the zones near the deck, in home_, by rising zone
    std::vector<std::uint32_t> zone_of_;
    BoxFinder finder_; ///< of outlines_
};

RUNNEL_NAMESPACE_END
