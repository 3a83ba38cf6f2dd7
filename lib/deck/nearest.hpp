#pragma once

#include "deck/convex_bay.hpp"
#include "deck/gathered_area.hpp"
#include "deck/one_way.hpp"
#include "geometry/faces.hpp"
#include "geometry/grid_noding.hpp"
#include "geometry/ring_area.hpp"
#include "geometry/segment_voronoi.hpp"

#include <runnel/deck.hpp>

#include <span>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Shares one two-way deck or deck on columns: appends its axes, cells, transfers and problems to `sharing`.
/// `near`: members and walls whose boxes meet the deck's, rising by number.
void share_nearest(const Plan& plan, const Framing& framing, std::uint32_t level, std::uint32_t deck,
                   std::span<const LineCarrier> near, LostLoads& lost, Sharing& sharing);

/// What a deck's points are shared among. Local coordinates: the deck's first corner is the origin, so that
/// a plan far out loses nothing.
struct NearestCarriers {
    Point origin;                            ///< of the local coordinates, in the plan
    std::vector<LineCarrier> carriers;       ///< as in the plan
    std::vector<AxisLine> lines;             ///< by carrier, cut to what can matter; stations on the carrier
    std::vector<Point> points;               ///< columns
    std::vector<std::uint32_t> point_number; ///< of the columns in Sharing
};

/// What a split may leave open of a deck's area, relative, before it is tried on another grid: a tenth of
/// what the law of cover allows (check_cover).
inline constexpr double closed_within = 1e-10;

/// Shares a part of deck `deck`, given as a copy of it with the part's outline and openings, of `area` m2,
/// by the nearest of `carriers`: all of them count, whether or not they touch the part. What goes there
/// straight across an opening or past the deck's edge is added to `way_leaves`, to be told once a deck.
void share_part_nearest(const Plan& plan, const Framing& framing, std::uint32_t deck, const FramedDeck& part,
                        double area, std::span<const LineCarrier> carriers, GatheredArea& way_leaves,
                        Sharing& sharing);

/// Outline and openings as seen from the deck's first corner.
[[nodiscard]] std::vector<Ring> local_rings(const FramedDeck& deck);

/// The members and walls of `near` that share more than a point with the closed deck, whose local rings
/// bound `area`.
[[nodiscard]] std::vector<LineCarrier>
carriers_in_touch(const FramedDeck& deck, std::span<const LineCarrier> near, double snap, RingArea& area);

/// Cells of one deck before they join the level's.
struct NearestCells {
    std::vector<StripAxes> axes;
    std::vector<Cell> cells;         ///< their `axes` count in the list above
    std::vector<Transfer> transfers; ///< one a cell
    GatheredArea way_leaves;
    bool sound = true; ///< false: rounding to the grid upset what lies beside what

    [[nodiscard]] double area() const;
};

/// Which sides of noded lines are dealt with face by face.
struct ConvexFaces {
    std::vector<std::uint32_t> faces; ///< indices into Faces::half_edges
    std::vector<bool> is_done;        ///< by half-edge
};

/// The faces that are convex bays, with lines all round and nothing in them: what is nearest there is found
/// from the bay's own edges.
[[nodiscard]] ConvexFaces convex_faces(const NearestCarriers& carriers, const NodedLines& noded,
                                       const Faces& faces, double noise);

/// How a deck is split by the nearest carrier.
struct NearestSplit {
    std::uint32_t deck = none;
    double whole = 0; ///< area of the deck, m2
    double snap = 0, noise = 0;
    bool by_faces = true;      ///< convex bays directly
    std::vector<Point> points; ///< columns, then those that only close the diagram
};

/// Cells of the nearest carriers, clipped by the deck: convex bays directly, the rest from a Voronoi diagram
/// on the grid, as the pieces between each site and its arcs.
[[nodiscard]] NearestCells nearest_cells(const NearestCarriers& carriers, const Grid& grid,
                                         const NearestSplit& split, RingArea& area);

/// The cells of a convex deck without openings whose every edge lies on one carrier and which no other
/// reaches into, directly by the bisectors of its edges. False: it is no such deck.
[[nodiscard]] bool share_convex_bay(const FramedDeck& deck, std::uint32_t index,
                                    std::span<const LineCarrier> near, Tolerance tolerance,
                                    NearestCells& cells);

/// A deck, or a part of one, that has no carrier.
struct UnsupportedPart {
    std::uint32_t level = 0, deck = 0;
    const FramedDeck& outline; ///< the framed deck itself, or a copy with the part's outline and openings
    double area = 0;           ///< m2
};

/// Problems of a split by the nearest carrier.
void report_no_carrier(const Plan& plan, const Framing& framing, const UnsupportedPart& part, LostLoads& lost,
                       Sharing& sharing);
/// Carriers that run along the deck's edge, or columns that stand by it, a little farther off than `snap`:
/// they carry nothing of it, which the drawing hides. `carriers`: those that carry it.
void report_near_misses(const Plan& plan, const FramedLevel& level, std::uint32_t deck,
                        std::span<const LineCarrier> near, const NearestCarriers& carriers, RingArea& area,
                        Sharing& sharing);
void report_way_leaves(const Plan& plan, const FramedLevel& level, std::uint32_t deck,
                       const GatheredArea& doubtful, Sharing& sharing);
void report_idle_members(const FramedLevel& level, std::uint32_t deck, std::span<const std::uint32_t> members,
                         Sharing& sharing);

RUNNEL_NAMESPACE_END
