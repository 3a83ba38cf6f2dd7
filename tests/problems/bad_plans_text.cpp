#include "problems/bad_plans.hpp"

#include <array>

namespace bad_plans {

namespace {
using enum runnel::ProblemCode;
constexpr Schema rejects = Schema::rejects;
constexpr Schema accepts = Schema::accepts;
constexpr Schema cannot = Schema::cannot_read;

constexpr std::array on_text{
    Row{"a comma behind the last case", R"("kind": "live"}
  ])",
        R"("kind": "live"},
  !!])",
        not_json, "", cannot},
    Row{"a missing comma between two keys", R"("title": "Kiln house",)", R"("title": "Kiln house")", not_json,
        "", cannot},
    Row{"a missing colon", R"("elevation": 7.2)", R"("elevation" !!7.2)", not_json, "", cannot},
    Row{"texts in single quotes", R"("title": "Kiln house")", R"("title": !!'Kiln house')", not_json, "",
        cannot},
    Row{"a key without quotes", R"("title":)", R"(!!title:)", not_json, "", cannot},
    Row{"a comment", R"("title": "Kiln house",)", R"("title": "Kiln house", !!// fictitious)", not_json, "",
        cannot},
    Row{"a number with a leading plus", R"("spacing": 0.6)", R"("spacing": !!+0.6)", not_json, "", cannot},
    Row{"a number with a leading zero", R"("spacing": 0.6)", R"("spacing": 0!!0.6)", not_json, "", cannot},
    Row{"a number that begins with its point", R"("spacing": 0.6)", R"("spacing": !!.6)", not_json, "",
        cannot},
    Row{"not-a-number", R"("spacing": 0.6)", R"("spacing": !!NaN)", not_json, "", cannot},
    Row{"an infinity", R"("spacing": 0.6)", R"("spacing": !!Infinity)", not_json, "", cannot},
    Row{"a line break inside a text", R"("title": "Kiln house")", "\"title\": \"Kiln!!\nhouse\"", not_json,
        "", cannot},
    Row{"an escape that JSON does not have", R"("title": "Kiln house")", R"("title": "Kiln\!!q house")",
        not_json, "", cannot},
    Row{"a byte that is no UTF-8", R"("title": "Kiln house")", "\"title\": \"Kiln!!\xff house\"", not_json,
        "", cannot},
    Row{"a bracket closed by a brace", R"("hinges": [1]})", R"("hinges": [1!!}})", not_json, "", cannot},
    Row{"text behind the plan", R"("like": "drying"
    }
  ]
})",
        R"("like": "drying"
    }
  ]
} !!{})",
        not_json, "", cannot},
    Row{"a plan that ends too early", R"("like": "drying"
    }
  ]
}
)",
        "\"like\": \"drying\"!!", not_json, "", cannot},
    Row{"a number that no double can hold", R"("spacing": 0.6)", R"("spacing": !!1e999)", number_too_large,
        "", cannot},
    Row{"a very negative number that no double can hold", R"("elevation": 7.2)", R"("elevation": !!-4e308)",
        number_too_large, "", cannot},
    Row{"lists in lists without end", R"("hinges": [1])",
        R"("hinges": [[[[[[[[[[[[[[[[[[[[[[[[[[[!![[[[[1]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]])", too_deep, "",
        cannot},
    Row{"the version of a frame", R"("runnel": "plan/1")", R"("runnel": !!"frame/1")", wrong_version,
        "/runnel", rejects},
    Row{"a version to come", R"("runnel": "plan/1")", R"("runnel": !!"plan/2")", wrong_version, "/runnel",
        rejects},
    Row{"a version that is a number", R"("runnel": "plan/1")", R"("runnel": !!1)", wrong_type, "/runnel",
        rejects},
};

constexpr std::array on_keys{
    Row{"a typo in a key of the plan", R"("title":)", R"(!!"titel":)", unknown_key, "/titel", rejects},
    Row{"a typo in a key of a level", R"("point_loads":)", R"(!!"pointloads":)", unknown_key,
        "/levels/0/pointloads", rejects},
    Row{"a typo in a key of a member", R"("bears_on":)", R"(!!"bear_on":)", unknown_key,
        "/levels/0/members/1/bear_on", rejects},
    Row{"a typo in a key of the settings", R"("snap":)", R"(!!"span":)", unknown_key, "/settings/span",
        rejects},
    Row{"a typo in a key of a layer", R"("name": "tiles")", R"(!!"nme": "tiles")", unknown_key,
        "/builds/0/layers/1/nme", rejects},
    Row{"a key with a slash is escaped in its pointer", R"("hinges":)", R"(!!"a/b~c":)", unknown_key,
        "/levels/0/members/1/a~1b~0c", rejects},
    Row{"a key twice in a member", R"("hinges": [1])", R"("hinges": [1], !!"hinges": [2])", duplicate_key,
        "/levels/0/members/1/hinges", accepts},
    Row{"a key twice in the plan", R"("title": "Kiln house",)",
        R"("title": "Kiln house", !!"title": "Oast",)", duplicate_key, "/title", accepts},
    Row{"a list twice in a level", R"("elevation": 7.2)", R"("elevation": 7.2, "decks": [], !!"decks": [])",
        duplicate_key, "/levels/1/decks", accepts},
    Row{"no version", R"(  "runnel": "plan/1",
)",
        "", missing_key, "", rejects},
    Row{"no units", R"("units": {"length": "m", "force": "kN"},)", "", missing_key, "", rejects},
    Row{"units without force", R"({"length": "m", "force": "kN"})", R"(!!{"length": "m"})", missing_key,
        "/units", rejects},
    Row{"a member without a role", R"({"id": "G1", "role": "girder", )", R"(!!{"id": "G1", )", missing_key,
        "/levels/0/members/0", rejects},
    Row{"a member without an end", R"({"id": "G1", "role": "girder", "from": [0, 0], "to": [9, 0])",
        R"(!!{"id": "G1", "role": "girder", "from": [0, 0])", missing_key, "/levels/0/members/0", rejects},
    Row{"a case without an id", R"("kind": "live"})", R"("kind": "live"}, !!{"kind": "snow"})", missing_key,
        "/cases/2", rejects},
    Row{"a level without an elevation", R"({
      "id": "roof",
      "elevation": 7.2,)",
        R"(!!{
      "id": "roof",)",
        missing_key, "/levels/1", rejects},
    Row{"a column without a top", R"({"id": "C2", "at": [9, 0], "base": "ground", "top": "roof"})",
        R"(!!{"id": "C2", "at": [9, 0]})", missing_key, "/columns/1", rejects},
    Row{"a joist field without a spacing",
        R"({"id": "J", "outline": [[0, 0], [9, 0], [9, 6], [0, 6.0]], "direction": 90, "spacing": 0.6})",
        R"(!!{"id": "J", "outline": [[0, 0], [9, 0], [9, 6], [0, 6.0]], "direction": 90})", missing_key,
        "/levels/0/joist_fields/0", rejects},
    Row{"a deck without an outline",
        R"({"id": "D1", "outline": [[0, 0], [9, 0], [9, 6], [0, 6]], "openings": [[[3, 2], [5, 2], [5, 4], [3, 4]]],)",
        R"(!!{"id": "D1",)", missing_key, "/levels/0/decks/0", rejects},
    Row{"a one-way deck without a direction",
        R"({"id": "D1", "outline": [[0, 0], [9, 0], [9, 6], [0, 6]], "openings": [[[3, 2], [5, 2], [5, 4], [3, 4]]],
         "span": "one-way", "direction": 0,)",
        R"(!!{"id": "D1", "outline": [[0, 0], [9, 0], [9, 6], [0, 6]],)", missing_key, "/levels/0/decks/0",
        rejects},
    Row{"an area load without a case", R"({"case": "dead", "q": 1.1})", R"(!!{"q": 1.1})", missing_key,
        "/levels/0/area_loads/0", rejects},
    Row{"a line load without an intensity", R"({"case": "dead", "w": 2.9,)", R"(!!{"case": "dead",)",
        missing_key, "/levels/0/line_loads/0", rejects},
    Row{"a layer that weighs nothing", R"({"name": "tiles", "q": 0.3})", R"(!!{"name": "tiles"})",
        missing_key, "/builds/0/layers/1", rejects},
    Row{"a line load that is uniform and varies", R"("w": 2.9)", R"("w": 2.9, "w_from": !!1)",
        conflicting_keys, "/levels/0/line_loads/0/w_from", rejects},
    Row{"corner angles of a one-way deck", R"("build": "floor"})",
        R"("build": "floor", "corner_angles": !!"by_fixity"})", conflicting_keys,
        "/levels/0/decks/0/corner_angles", rejects},
    Row{"openings of an area load without an outline", R"({"case": "dead", "q": 1.1})",
        R"({"case": "dead", "q": 1.1, "openings": !![[[1, 1], [2, 1], [2, 2]]]})", conflicting_keys,
        "/levels/0/area_loads/0/openings", rejects},
    Row{"a line load that varies to nothing said", R"("w": 2.9)", R"("w_from": !!1)", conflicting_keys,
        "/levels/0/line_loads/0/w_from", rejects},
    Row{"a layer with its pressure given twice", R"("name": "tiles", "q": 0.3)",
        R"("name": "tiles", "q": !!0.3, "density": 20)", conflicting_keys, "/builds/0/layers/1/q", rejects},
    Row{"a layer with thickness and no density", R"("thickness": 0.06, "density": 22)",
        R"("thickness": !!0.06)", conflicting_keys, "/builds/0/layers/0/thickness", rejects},
};
} // namespace

std::span<const Row> rows_on_text() {
    return on_text;
}
std::span<const Row> rows_on_keys() {
    return on_keys;
}

} // namespace bad_plans
