#include "problems/bad_plans.hpp"

#include <array>

namespace bad_plans {

namespace {
using enum runnel::ProblemCode;
constexpr Schema rejects = Schema::rejects;
constexpr Schema accepts = Schema::accepts;

constexpr std::array on_references{
    Row{"an id of nothing", R"("id": "A")", R"("id": !!"")", bad_id, "/grid/0/id", rejects},
    Row{"an id with a slash", R"("id": "A")", R"("id": !!"A/B")", bad_id, "/grid/0/id", rejects},
    Row{"an id with a control character", R"("id": "A")", R"("id": !!"A\u0007")", bad_id, "/grid/0/id",
        rejects},
    Row{"an id that is a control character", R"("id": "A")", R"("id": !!"\u0001")", bad_id, "/grid/0/id",
        rejects},
    Row{"two cases of one id", R"("kind": "live"})", R"("kind": "live"}, {"id": !!"dead"})", duplicate_id,
        "/cases/2/id", accepts},
    Row{"two members of one id on a level", R"("hinges": [1]})",
        R"("hinges": [1]}, {"id": !!"G1", "role": "beam", "from": [2, 0], "to": [2, 6]})", duplicate_id,
        "/levels/0/members/2/id", accepts},
    Row{"two columns of one id", R"("id": "C2")", R"("id": !!"C1")", duplicate_id, "/columns/1/id", accepts},
    Row{"a wall with the id of a column",
        R"("id": "W1", "from": [0, 6], "to": [9, 6], "top": "roof", "self_weight": 4.5})",
        R"("id": "W1", "from": [0, 6], "to": [9, 6], "top": "roof"}, {"id": !!"C1", "from": [0, 8], "to": [9, 8], "top": "roof"})",
        duplicate_id, "/walls/1/id", accepts},
    Row{"a member with the id of a column that bears it", R"("id": "B1")", R"("id": !!"C2")", duplicate_id,
        "/levels/0/members/1/id", accepts},
    Row{"two levels of one id", R"("like": "drying"
    })",
        R"("like": "drying"
    }, {"id": !!"drying", "elevation": 10})",
        duplicate_id, "/levels/2/id", accepts},
    Row{"a level called ground", R"("like": "drying"
    })",
        R"("like": "drying"
    }, {"id": !!"ground", "elevation": 10})",
        duplicate_id, "/levels/2/id", rejects},
    Row{"a load of no case", R"("case": "dead", "q": 1.1)", R"("case": !!"deed", "q": 1.1)", unknown_id,
        "/levels/0/area_loads/0/case", accepts},
    Row{"a member of no section", R"("to": [9, 0], "section": "g1")", R"("to": [9, 0], "section": !!"g2")",
        unknown_id, "/levels/0/members/0/section", accepts},
    Row{"a column of no section", R"("top": "roof", "section": "g1")", R"("top": "roof", "section": !!"g2")",
        unknown_id, "/columns/0/section", accepts},
    Row{"a deck of no build", R"("build": "floor")", R"("build": !!"roofing")", unknown_id,
        "/levels/0/decks/0/build", accepts},
    Row{"a column up to no level", R"("base": "ground", "top": "roof")",
        R"("base": "ground", "top": !!"attic")", unknown_id, "/columns/1/top", accepts},
    Row{"a column up to the ground", R"("base": "ground", "top": "roof")",
        R"("base": "ground", "top": !!"ground")", unknown_id, "/columns/1/top", accepts},
    Row{"a column from no level", R"("base": "ground")", R"("base": !!"cellar")", unknown_id,
        "/columns/1/base", accepts},
    Row{"a load on no deck", R"("decks": ["D1"])", R"("decks": ["D1", !!"D2"])", unknown_id,
        "/levels/0/area_loads/1/decks/1", accepts},
    Row{"a load on no member", R"("on": "J.3")", R"("on": !!"J3")", unknown_id, "/levels/0/point_loads/0/on",
        accepts},
    Row{"a load on a joist that the field has not", R"("on": "J.3")", R"("on": !!"J.99")", unknown_id,
        "/levels/0/point_loads/0/on", accepts},
    Row{"a load on a member of another level", R"("on": "J.3")", R"("on": !!"roof/G1")", unknown_id,
        "/levels/0/point_loads/0/on", accepts},
    Row{"a load on a column", R"("on": "J.3")", R"("on": !!"C1")", unknown_id, "/levels/0/point_loads/0/on",
        accepts},
    Row{"a member that bears on nothing that is", R"(["G1", "W1"])", R"([!!"G2", "W1"])", unknown_id,
        "/levels/0/members/1/bears_on/0", accepts},
    Row{"own weight to no case", R"("snap": 0.005)", R"("self_weight_case": !!"own")", unknown_id,
        "/settings/self_weight_case", accepts},
    Row{"a level like no other", R"("like": "drying")", R"("like": !!"curing")", unknown_id, "/levels/1/like",
        accepts},
    Row{"a member that bears on itself", R"(["G1", "W1"])", R"(["G1", !!"B1"])", load_path_loop,
        "/levels/0/members/1/bears_on/1", accepts},
    Row{"a level like itself", R"("like": "drying")", R"("like": !!"roof")", like_loop, "/levels/1/like",
        accepts},
    Row{"levels like each other", R"("elevation": 3.6,)", R"("elevation": 3.6, "like": !!"roof",)", like_loop,
        "/levels/0/like", accepts},
    Row{"two levels at one elevation", R"("elevation": 7.2)", R"("elevation": !!3.6)", elevation_taken,
        "/levels/1/elevation", accepts},
    Row{"two levels a millimetre apart", R"("elevation": 7.2)", R"("elevation": !!3.601)", elevation_taken,
        "/levels/1/elevation", accepts},
    Row{"a column upside down", R"({"id": "C2", "at": [9, 0], "base": "ground", "top": "roof"})",
        R"(!!{"id": "C2", "at": [9, 0], "base": "roof", "top": "drying"})", base_not_below_top, "/columns/1",
        accepts},
    Row{"a column of no height", R"({"id": "C2", "at": [9, 0], "base": "ground", "top": "roof"})",
        R"(!!{"id": "C2", "at": [9, 0], "base": "roof", "top": "roof"})", base_not_below_top, "/columns/1",
        accepts},
    Row{"own weight without a dead case", R"("cases": [
    {"id": "dead", "kind": "dead"},)",
        R"("cases": !![
    {"id": "dead", "kind": "other"},)",
        no_dead_case, "/cases", accepts},
};

constexpr std::array on_geometry{
    Row{"a member of no length", R"({"id": "G1", "role": "girder", "from": [0, 0], "to": [9, 0])",
        R"(!!{"id": "G1", "role": "girder", "from": [9, 0], "to": [9, 0])", zero_length,
        "/levels/0/members/0", accepts},
    Row{"a wall shorter than snap", R"({"id": "W1", "from": [0, 6], "to": [9, 6])",
        R"(!!{"id": "W1", "from": [0, 6], "to": [0.004, 6])", zero_length, "/walls/0", accepts},
    Row{"a line load of no length", R"({"case": "dead", "w": 2.9, "from": [0, 5], "to": [9, 5]})",
        R"(!!{"case": "dead", "w": 2.9, "from": [0, 5], "to": [0, 5]})", zero_length,
        "/levels/0/line_loads/0", accepts},
    Row{"a grid line of no length", R"({"id": "A", "from": [0, -1], "to": [0, 7]})",
        R"(!!{"id": "A", "from": [0, 7], "to": [0, 7]})", zero_length, "/grid/0", accepts},
    Row{"a ring of two points", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])",
        R"("outline": !![[0, 0], [4, 0]])", ring_too_small, "/levels/0/area_loads/1/outline", rejects},
    Row{"a ring of no points", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])", R"("outline": !![])",
        ring_too_small, "/levels/0/area_loads/1/outline", rejects},
    Row{"a ring of points that are one", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])",
        R"("outline": !![[0, 0], [0, 0.001], [4, 0]])", ring_too_small, "/levels/0/area_loads/1/outline",
        accepts},
    Row{"a ring of no area", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])",
        R"("outline": !![[0, 0], [4, 0], [2, 0]])", ring_too_small, "/levels/0/area_loads/1/outline",
        accepts},
    Row{"a bow tie", R"("outline": [[0, 0], [9, 0], [9, 6], [0, 6.0]])",
        R"("outline": !![[0, 0], [9, 6], [9, 0], [0, 6.0]])", ring_crosses_itself,
        "/levels/0/joist_fields/0/outline", accepts},
    Row{"a ring that touches itself at a corner", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])",
        R"("outline": !![[0, 0], [4, 0], [4, 6], [2, 0], [0, 6]])", ring_crosses_itself,
        "/levels/0/area_loads/1/outline", accepts},
    Row{"a ring with a spike", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])",
        R"("outline": !![[0, 0], [4, 0], [4, 6], [4, 8], [4, 6], [0, 6]])", ring_crosses_itself,
        "/levels/0/area_loads/1/outline", accepts},
    Row{"a slot narrower than snap", R"("outline": [[0, 0], [4, 0], [4, 6], [0, 6]])",
        R"("outline": !![[0, 0], [2, 0], [2, 3], [2.004, 3], [2.004, 0.0], [4, 0], [4, 6], [0, 6]])",
        ring_crosses_itself, "/levels/0/area_loads/1/outline", accepts},
    Row{"an opening that crosses itself", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"(!![[3, 2], [5, 4], [5, 2], [3, 4]])", ring_crosses_itself, "/levels/0/decks/0/openings/0",
        accepts},
    Row{"an opening beside its deck", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"(!![[13, 2], [15, 2], [15, 4], [13, 4]])", opening_outside_deck, "/levels/0/decks/0/openings/0",
        accepts},
    Row{"an opening over the deck's edge", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"(!![[3, 2], [5, 2], [5, 6.01], [3, 6.01]])", opening_outside_deck, "/levels/0/decks/0/openings/0",
        accepts},
    Row{"an opening larger than its deck", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"(!![[-1, -1], [10, -1], [10, 7], [-1, 7]])", opening_outside_deck, "/levels/0/decks/0/openings/0",
        accepts},
    Row{"two openings that overlap", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"([[3, 2], [5, 2], [5, 4], [3, 4]], !![[4, 3], [6, 3], [6, 5], [4, 5]])", openings_overlap,
        "/levels/0/decks/0/openings/1", accepts},
    Row{"one opening twice", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"([[3, 2], [5, 2], [5, 4], [3, 4]], !![[3, 4], [3, 2], [5, 2], [5, 4]])", openings_overlap,
        "/levels/0/decks/0/openings/1", accepts},
    Row{"an opening inside another", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"([[3, 2], [5, 2], [5, 4], [3, 4]], !![[3.5, 2.5], [4.5, 2.5], [4.5, 3.5], [3.5, 3.5]])",
        openings_overlap, "/levels/0/decks/0/openings/1", accepts},
    Row{"two openings that cross like a plus", R"([[3, 2], [5, 2], [5, 4], [3, 4]])",
        R"([[1, 2], [7, 2], [7, 3], [1, 3]], !![[3, 1], [4, 1], [4, 5], [3, 5]])", openings_overlap,
        "/levels/0/decks/0/openings/1", accepts},
};
} // namespace

std::span<const Row> rows_on_references() {
    return on_references;
}
std::span<const Row> rows_on_geometry() {
    return on_geometry;
}

} // namespace bad_plans
