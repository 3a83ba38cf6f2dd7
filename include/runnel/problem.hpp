#pragma once

#include <runnel/export.hpp>
#include <runnel/geometry.hpp>

#include <cstdint>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

enum class Severity : std::uint8_t { error, warning, note };

/// The one table of problem codes: enumerator, published code, usual severity, what it means.
/// The schemas, the documentation and the tests read it. Codes are never renamed; new ones may be added.
#define RUNNEL_PROBLEM_TABLE(X)                                                                              \
    /* reading */                                                                                            \
    X(not_json, "not-json", error, "The text is not JSON; reading ends there.")                              \
    X(number_too_large, "number-too-large", error, "A number that no double can hold; reading ends there.")  \
    X(too_deep, "too-deep", error, "Nested deeper than any plan needs; reading ends there.")                 \
    X(too_much, "too-much", error, "The plan asks for more of something than the stated limit.")             \
    X(wrong_type, "wrong-type", error, "A value of another JSON type than the key takes.")                   \
    X(wrong_version, "wrong-version", error, "`runnel` names another document or version.")                  \
    X(unknown_key, "unknown-key", error, "A key that this place does not have.")                             \
    X(duplicate_key, "duplicate-key", error, "A key that stands twice in one object.")                       \
    X(missing_key, "missing-key", error, "A required key is not there.")                                     \
    X(conflicting_keys, "conflicting-keys", error, "Keys that exclude each other, or need each other.")      \
    X(unknown_choice, "unknown-choice", error, "A word that is not among those the key takes.")              \
    X(bad_quantity, "bad-quantity", error, "A quantity whose text is not a number and a known unit.")        \
    X(wrong_dimension, "wrong-dimension", error, "A quantity in a unit of another dimension.")               \
    X(out_of_range, "out-of-range", error, "A value outside the range that makes sense for it.")             \
    X(bad_id, "bad-id", error, "An id that is empty or holds a slash or a control character.")               \
    X(duplicate_id, "duplicate-id", error, "An id that is taken already where ids must differ.")             \
    X(unknown_id, "unknown-id", error, "A reference to nothing.")                                            \
    X(ambiguous_id, "ambiguous-id", error, "A bare id that stands on several levels.")                       \
    X(not_supported_yet, "not-supported-yet", error, "A key whose engine is not built yet.")                 \
    /* the plan's geometry by itself */                                                                      \
    X(zero_length, "zero-length", error, "A member, wall or line whose ends are the same point.")            \
    X(ring_too_small, "ring-too-small", error,                                                               \
      "A ring of fewer than three different points, or on average no wider than `snap`.")                    \
    X(ring_crosses_itself, "ring-crosses-itself", error, "A ring that meets itself, within `snap`.")         \
    X(opening_outside_deck, "opening-outside-deck", error, "An opening that reaches outside its deck.")      \
    X(opening_outside_zone, "opening-outside-zone", error,                                                   \
      "An opening that reaches outside the outline of its area load.")                                       \
    X(openings_overlap, "openings-overlap", error, "Two openings of an outline that share area.")            \
    X(decks_overlap, "decks-overlap", error, "Two decks of a level that share area.")                        \
    X(like_loop, "like-loop", error, "Levels that repeat each other in a loop.")                             \
    X(elevation_taken, "elevation-taken", error, "Two levels at the same elevation.")                        \
    X(base_not_below_top, "base-not-below-top", error, "A column or wall whose base is not below its top.")  \
    X(no_dead_case, "no-dead-case", error, "Own weight is given but no case of kind dead takes it.")         \
    X(plane_undefined, "plane-undefined", error, "Three points on one line give no plane.")                  \
    /* framing */                                                                                            \
    X(lies_along, "lies-along", error, "A member that lies along another member or a wall.")                 \
    X(equal_roles_meet, "equal-roles-meet", error, "Ends of equal roles meet and nothing carries them.")     \
    X(equal_roles_cross, "equal-roles-cross", error, "Members of equal roles cross; which bears on which?")  \
    X(higher_on_lower, "higher-on-lower", warning, "A higher role ends on a lower one.")                     \
    X(bears_on_too_far, "bears-on-too-far", error, "`bears_on` names a carrier that is not there.")          \
    X(stands_on_nothing, "stands-on-nothing", error, "A column or a stretch of wall with nothing under it.") \
    X(columns_coincide, "columns-coincide", error, "Two columns at one point between the same levels.")      \
    X(load_path_loop, "load-path-loop", error, "Members that bear on each other in a loop.")                 \
    X(too_few_bearings, "too-few-bearings", error, "A member with too few bearings to stand.")               \
    X(mechanism, "mechanism", error, "A member that its hinges leave free to move.")                         \
    X(near_miss, "near-miss", warning, "An end, column or wall that misses a carrier by little.")            \
    X(carries_nothing, "carries-nothing", warning,                                                           \
      "A column, wall or joist that carries nothing where it could.")                                        \
    X(points_merged, "points-merged", note, "Points within `snap` of each other were taken as one.")         \
    X(joist_left_out, "joist-left-out", note, "A joist of a field that lies along a member or a wall.")      \
    X(continuous_as_drawn, "continuous-as-drawn", note, "Members that run on over bearings.")                \
    X(stiffness_assumed, "stiffness-assumed", note, "A continuous member taken as of constant stiffness.")   \
    /* decks and loads */                                                                                    \
    X(strip_unsupported, "strip-unsupported", error, "Strips of a deck that no carrier crosses.")            \
    X(strip_cantilevers, "strip-cantilevers", warning, "Strips on one carrier, or with a long overhang.")    \
    X(strip_unstable, "strip-unstable", error, "Strips that no statics holds up.")                           \
    X(strip_by_lever, "strip-by-lever", warning, "Continuous strips cut where a span dies out in a wedge.")  \
    X(strip_clamped, "strip-clamped", warning, "Continuous strips clamped by two carriers close together.")  \
    X(crosses_opening, "crosses-opening", warning, "A member that carries a deck runs across its opening.")  \
    X(fixity_set_aside, "fixity-set-aside", warning,                                                         \
      "Corner angles by fixity do not fit bays, which go to the nearest lines.")                             \
    X(key_has_no_effect, "key-has-no-effect", warning,                                                       \
      "A deck gives a share or a direction that only one-way decks follow.")                                 \
    X(way_leaves_deck, "way-leaves-deck", warning,                                                           \
      "Area whose straight way to its carrier leaves the deck.")                                             \
    X(load_off_decks, "load-off-decks", error, "A line or point load that stands on nothing.")               \
    X(zone_off_decks, "zone-off-decks", note,                                                                \
      "Part of an area load lies off every deck and is not carried.")                                        \
    X(pressure_below_zero, "pressure-below-zero", warning,                                                   \
      "A plane of pressure that falls below zero within its zone.")                                          \
    X(load_off_its_carrier, "load-off-its-carrier", warning, "A load `on` a carrier stands beside it.")      \
    X(load_beyond_its_carrier, "load-beyond-its-carrier", error, "A load `on` a carrier reaches past it.")   \
    /* load path and laws */                                                                                 \
    X(moment_not_carried_down, "moment-not-carried-down", warning, "A fixed end's moment leaves the path.")  \
    X(cover_broken, "cover-broken", error, "Regions do not add up to their deck.")                           \
    X(cells_overlap, "cells-overlap", error, "Two regions of a deck share area.")                            \
    X(owner_broken, "owner-broken", error, "A part of a deck has a carrier that its rule does not give it.") \
    X(force_broken, "force-broken", error, "A deck's carriers get another load than was put on it.")         \
    X(moment_broken, "moment-broken", error, "A deck's load lost its place where its rule keeps it.")        \
    X(balance_open, "balance-open", error, "A balance does not close.")

enum class ProblemCode : std::uint8_t {
#define RUNNEL_PROBLEM_ENUMERATOR(name, code, severity, meaning) name,
    RUNNEL_PROBLEM_TABLE(RUNNEL_PROBLEM_ENUMERATOR)
#undef RUNNEL_PROBLEM_ENUMERATOR
};

/// A row of the table of problem codes.
struct ProblemKind {
    ProblemCode code;
    std::string_view name; ///< the published code, words-with-hyphens
    Severity severity;     ///< the usual one; a problem may be milder where its text says so
    std::string_view meaning;
};

/// All rows, in the table's order.
[[nodiscard]] RUNNEL_EXPORT std::span<const ProblemKind> problem_kinds() noexcept;
[[nodiscard]] RUNNEL_EXPORT const ProblemKind& kind_of(ProblemCode code) noexcept;
[[nodiscard]] RUNNEL_EXPORT std::string_view name_of(Severity severity) noexcept;

/// Something about the input that its author should know.
struct Problem {
    ProblemCode code{};
    Severity severity{};
    std::string message;        ///< a sentence with the value and the limit
    std::string hint;           ///< what would likely mend it; empty if nothing is likely
    std::string pointer;        ///< RFC 6901 pointer into the document; empty if it concerns the whole
    std::uint32_t line = 0;     ///< from 1; 0 where the plan did not come from a text
    std::uint32_t column = 0;   ///< from 1, in bytes of UTF-8
    std::optional<Point> point; ///< on the plan, in m
    std::vector<std::string> ids;
};

[[nodiscard]] RUNNEL_EXPORT bool has_errors(std::span<const Problem> problems) noexcept;

/// Fills in line and column of those problems that have a pointer but no line yet, by one pass over the text
/// that the plan was read from. A pointer to something that is not there gets the place of what encloses it.
RUNNEL_EXPORT void locate_problems(std::string_view text, std::span<Problem> problems);

RUNNEL_NAMESPACE_END
