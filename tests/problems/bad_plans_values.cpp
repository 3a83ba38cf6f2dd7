#include "problems/bad_plans.hpp"

#include <array>

namespace bad_plans {

namespace {
using enum runnel::ProblemCode;
constexpr Schema rejects = Schema::rejects;
constexpr Schema accepts = Schema::accepts;

constexpr std::array on_values{
    Row{"a title that is a number", R"("title": "Kiln house")", R"("title": !!7)", wrong_type, "/title",
        rejects},
    Row{"an id that is a number", R"("id": "C2")", R"("id": !!2)", wrong_type, "/columns/1/id", rejects},
    Row{"levels that are no list", R"("grid": [
    {"id": "A", "from": [0, -1], "to": [0, 7]}
  ])",
        R"("grid": !!{})", wrong_type, "/grid", rejects},
    Row{"an item that is no object", R"("kind": "live"})", R"("kind": "live"}, !!"snow")", wrong_type,
        "/cases/2", rejects},
    Row{"a point that is a number", R"("at": [4.5, 1])", R"("at": !!4.5)", wrong_type,
        "/levels/0/point_loads/0/at", rejects},
    Row{"a point with three coordinates", R"("at": [4.5, 1])", R"("at": !![4.5, 1, 0])", wrong_type,
        "/levels/0/point_loads/0/at", rejects},
    Row{"a coordinate that is null", R"("at": [4.5, 1])", R"("at": [4.5, !!null])", wrong_type,
        "/levels/0/point_loads/0/at/1", rejects},
    Row{"a truth in quotes", R"("hinges": [1])", R"("cut": !!"true")", wrong_type, "/levels/0/members/1/cut",
        rejects},
    Row{"bears_on that is no list", R"("bears_on": ["G1", "W1"])", R"("bears_on": !!"G1")", wrong_type,
        "/levels/0/members/1/bears_on", rejects},
    Row{"a level that is a text", R"({
      "id": "roof",
      "elevation": 7.2,
      "like": "drying"
    })",
        R"({
      "id": "roof",
      "elevation": 7.2
    }, !!"attic")",
        wrong_type, "/levels/2", rejects},
    Row{"a role that is none", R"("role": "beam")", R"("role": !!"purlin")", unknown_choice,
        "/levels/0/members/1/role", rejects},
    Row{"a kind with a capital", R"("kind": "live")", R"("kind": !!"Live")", unknown_choice, "/cases/1/kind",
        rejects},
    Row{"a way to span with an underscore", R"("span": "one-way")", R"("span": !!"one_way")", unknown_choice,
        "/levels/0/decks/0/span", rejects},
    Row{"corner angles with a hyphen", R"("span": "one-way")",
        R"("span": "two-way", "corner_angles": !!"by-fixity")", unknown_choice,
        "/levels/0/decks/0/corner_angles", rejects},
    Row{"a plane of pressure through two points", R"("q": 1.1)",
        R"("q": {"at": !![[0, 0], [9, 0]], "values": [1, 2, 3]})", wrong_type, "/levels/0/area_loads/0/q/at",
        rejects},
    Row{"a plane of pressure of two values", R"("q": 1.1)",
        R"("q": {"at": [[0, 0], [9, 0], [0, 6]], "values": !![1, 2]})", wrong_type,
        "/levels/0/area_loads/0/q/values", rejects},
    Row{"a plane of pressure without values", R"("q": 1.1)", R"("q": !!{"at": [[0, 0], [9, 0], [0, 6]]})",
        missing_key, "/levels/0/area_loads/0/q", rejects},
    Row{"a plane of pressure with a line load among its values", R"("q": 1.1)",
        R"("q": {"at": [[0, 0], [9, 0], [0, 6]], "values": [1, !!"2 kN/m", 3]})", wrong_dimension,
        "/levels/0/area_loads/0/q/values/1", accepts},
    Row{"a unit of length that is none", R"("length": "m")", R"("length": !!"yd")", unknown_choice,
        "/units/length", rejects},
    Row{"an end that is neither", R"("hinges": [1])", R"("fixed_ends": [!!"left"])", unknown_choice,
        "/levels/0/members/1/fixed_ends/0", rejects},
    Row{"a number in quotes", R"("spacing": 0.6)", R"("spacing": !!"0.6")", bad_quantity,
        "/levels/0/joist_fields/0/spacing", rejects},
    Row{"a unit that is none", R"("spacing": 0.6)", R"("spacing": !!"0.6 metres")", bad_quantity,
        "/levels/0/joist_fields/0/spacing", rejects},
    Row{"a unit of mass", R"("p": 6)", R"("p": !!"600 kg")", bad_quantity, "/levels/0/point_loads/0/p",
        rejects},
    Row{"a quantity of words", R"("q": 1.1)", R"("q": !!"light")", bad_quantity, "/levels/0/area_loads/0/q",
        rejects},
    Row{"a decimal comma", R"("q": 1.1)", R"("q": !!"1,1 kN/m2")", bad_quantity, "/levels/0/area_loads/0/q",
        rejects},
    Row{"a quantity that no double can hold", R"("q": 1.1)", R"("q": !!"1e400 kN/m2")", bad_quantity,
        "/levels/0/area_loads/0/q", accepts},
    Row{"an angle in radians", R"("direction": 90)", R"("direction": !!"1.57 rad")", bad_quantity,
        "/levels/0/joist_fields/0/direction", rejects},
    Row{"a pressure given as a line load", R"("q": 2.5)", R"("q": !!"2.5 kN/m")", wrong_dimension,
        "/levels/0/area_loads/1/q", accepts},
    Row{"a second moment given as an area", R"("I": "16270 cm4")", R"("I": !!"16270 cm2")", wrong_dimension,
        "/sections/0/I", accepts},
    Row{"a length given as a force", R"("snap": 0.005)", R"("snap": !!"5 kN")", wrong_dimension,
        "/settings/snap", accepts},
    Row{"a negative spacing", R"("spacing": 0.6)", R"("spacing": !!-0.6)", out_of_range,
        "/levels/0/joist_fields/0/spacing", rejects},
    Row{"no spacing at all", R"("spacing": 0.6)", R"("spacing": !!0)", out_of_range,
        "/levels/0/joist_fields/0/spacing", rejects},
    Row{"a spacing below snap", R"("spacing": 0.6)", R"("spacing": !!0.004)", out_of_range,
        "/levels/0/joist_fields/0/spacing", accepts},
    Row{"a negative offset of joists", R"("spacing": 0.6)", R"("spacing": 0.6, "offset": !!-0.1)",
        out_of_range, "/levels/0/joist_fields/0/offset", rejects},
    Row{"an offset beyond the field", R"("spacing": 0.6)", R"("spacing": 0.6, "offset": !!20)", out_of_range,
        "/levels/0/joist_fields/0/offset", accepts},
    Row{"a snap of nothing", R"("snap": 0.005)", R"("snap": !!0)", out_of_range, "/settings/snap", rejects},
    Row{"a snap of five metres", R"("snap": 0.005)", R"("snap": !!5)", out_of_range, "/settings/snap",
        accepts},
    Row{"a negative modulus", R"("E": "210 GPa")", R"("E": !!-210e6)", out_of_range, "/sections/0/E",
        rejects},
    Row{"a second moment of nothing", R"("I": "16270 cm4")", R"("I": !!"0 cm4")", out_of_range,
        "/sections/0/I", accepts},
    Row{"a negative own weight", R"("self_weight": "0.59 kN/m")", R"("self_weight": !!-0.59)", out_of_range,
        "/sections/0/self_weight", rejects},
    Row{"a wall lighter than air", R"("self_weight": 4.5)", R"("self_weight": !!-4.5)", out_of_range,
        "/walls/0/self_weight", rejects},
    Row{"a layer of negative thickness", R"("thickness": 0.06)", R"("thickness": !!-0.06)", out_of_range,
        "/builds/0/layers/0/thickness", rejects},
    Row{"a hinge beyond the member's end", R"("hinges": [1])", R"("hinges": [1, !!6.1])", out_of_range,
        "/levels/0/members/1/hinges/1", accepts},
    Row{"a hinge before the member's beginning", R"("hinges": [1])", R"("hinges": [!!-1])", out_of_range,
        "/levels/0/members/1/hinges/0", accepts},
    Row{"a load of absurd size", R"("p": 6)", R"("p": !!6e200)", out_of_range, "/levels/0/point_loads/0/p",
        accepts},
    Row{"a building beyond the moon", R"("at": [4.5, 1])", R"("at": !![4.5, 1e12])", out_of_range,
        "/levels/0/point_loads/0/at", accepts},
    Row{"a spacing that makes more joists than the limit", R"("spacing": 0.6)", R"("spacing": !!1e-9)",
        too_much, "/levels/0/joist_fields/0/spacing", accepts},
};

constexpr std::array on_engines_to_come{
    Row{"a frame", R"("grid": [)",
        R"("frames": !![{"id": "F1", "members": ["drying/G1"], "columns": ["C1", "C2"]}], "grid": [)",
        not_supported_yet, "/frames", accepts},
    Row{"a combination", R"("grid": [)",
        R"("combinations": !![{"id": "strength", "factors": {"dead": 1.2, "kind:live": [1.6, 0]}}], "grid": [)",
        not_supported_yet, "/combinations", accepts},
    Row{"a rule of reduction", R"("grid": [)", R"("reductions": {"rule": !!"asce7"}, "grid": [)",
        not_supported_yet, "/reductions/rule", accepts},
    Row{"a moving point load", R"("like": "drying")",
        R"("moving_point": !!{"case": "live", "p": 2.7, "q_case": "live"})", not_supported_yet,
        "/levels/1/moving_point", accepts},
    Row{"an eccentric bearing of a member", R"("hinges": [1])", R"("bearing_offset": !!0.2)",
        not_supported_yet, "/levels/0/members/1/bearing_offset", accepts},
    Row{"an eccentric bearing on a column", R"("base": "ground")", R"("bearing_offset": !!"200 mm")",
        not_supported_yet, "/columns/1/bearing_offset", accepts},
    Row{"a deflection limit", R"("hinges": [1])", R"("limit": !!{"live": "L/360"})", not_supported_yet,
        "/levels/0/members/1/limit", accepts},
};
} // namespace

std::span<const Row> rows_on_values() {
    return on_values;
}
std::span<const Row> rows_on_engines_to_come() {
    return on_engines_to_come;
}

} // namespace bad_plans
