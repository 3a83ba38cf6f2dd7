#pragma once

#include <runnel/report.hpp>
#include <runnel/takedown.hpp>

#include <functional>
#include <string>
#include <string_view>

namespace support {

/// Everything that is written into the sink it is given.
inline std::string written(const std::function<void(const runnel::TextSink&)>& write) {
    std::string text;
    write([&text](std::string_view part) { text += part; });
    return text;
}

/// The takedown of a plan given as text.
inline runnel::Takedown takedown_of(std::string_view plan) {
    return runnel::take_down(runnel::read_plan(plan).plan);
}

/// Two girders on four columns, joists at their ends and middle, a deck, and a point load on one girder.
inline constexpr std::string_view footbridge = R"({
  "runnel": "plan/1", "title": "Footbridge", "units": {"length": "m", "force": "kN"},
  "cases": [{"id": "dead", "kind": "dead"}, {"id": "crowd", "kind": "live"}],
  "columns": [{"id": "P", "at": [0, 0], "top": "walk"}, {"id": "Q", "at": [8, 0], "top": "walk"},
              {"id": "R", "at": [0, 2], "top": "walk"}, {"id": "S", "at": [8, 2], "top": "walk"}],
  "levels": [{"id": "walk", "elevation": 5,
    "members": [{"id": "south", "role": "girder", "from": [0, 0], "to": [8, 0]},
                {"id": "north", "role": "girder", "from": [0, 2], "to": [8, 2]},
                {"id": "a", "role": "joist", "from": [0, 0], "to": [0, 2]},
                {"id": "b", "role": "joist", "from": [4, 0], "to": [4, 2]},
                {"id": "c", "role": "joist", "from": [8, 0], "to": [8, 2]}],
    "decks": [{"id": "boards", "outline": [[0, 0], [8, 0], [8, 2], [0, 2]], "direction": 0, "q": 0.5}],
    "area_loads": [{"case": "crowd", "q": 5}],
    "point_loads": [{"case": "crowd", "p": 3, "at": [2, 0], "on": "south"}]}]})";

} // namespace support
