#include "problems/bad_plans.hpp"

namespace bad_plans {

std::string_view valid_plan() {
    return R"({
  "runnel": "plan/1",
  "title": "Kiln house",
  "units": {"length": "m", "force": "kN"},
  "settings": {"snap": 0.005},
  "cases": [
    {"id": "dead", "kind": "dead"},
    {"id": "live", "kind": "live"}
  ],
  "sections": [
    {"id": "g1", "E": "210 GPa", "I": "16270 cm4", "A": "76.8 cm2", "self_weight": "0.59 kN/m"}
  ],
  "builds": [
    {"id": "floor", "layers": [{"name": "screed", "thickness": 0.06, "density": 22}, {"name": "tiles", "q": 0.3}]}
  ],
  "grid": [
    {"id": "A", "from": [0, -1], "to": [0, 7]}
  ],
  "columns": [
    {"id": "C1", "at": [0, 0], "top": "roof", "section": "g1"},
    {"id": "C2", "at": [9, 0], "base": "ground", "top": "roof"}
  ],
  "walls": [
    {"id": "W1", "from": [0, 6], "to": [9, 6], "top": "roof", "self_weight": 4.5}
  ],
  "levels": [
    {
      "id": "drying",
      "elevation": 3.6,
      "members": [
        {"id": "G1", "role": "girder", "from": [0, 0], "to": [9, 0], "section": "g1"},
        {"id": "B1", "role": "beam", "from": [4, 0], "to": [4, 6], "bears_on": ["G1", "W1"], "hinges": [1]}
      ],
      "joist_fields": [
        {"id": "J", "outline": [[0, 0], [9, 0], [9, 6], [0, 6.0]], "direction": 90, "spacing": 0.6}
      ],
      "decks": [
        {"id": "D1", "outline": [[0, 0], [9, 0], [9, 6], [0, 6]], "openings": [[[3, 2], [5, 2], [5, 4], [3, 4]]],
         "span": "one-way", "direction": 0, "build": "floor"}
      ],
      "area_loads": [
        {"case": "dead", "q": 1.1},
        {"case": "live", "q": 2.5, "outline": [[0, 0], [4, 0], [4, 6], [0, 6]], "decks": ["D1"]}
      ],
      "line_loads": [
        {"case": "dead", "w": 2.9, "from": [0, 5], "to": [9, 5]}
      ],
      "point_loads": [
        {"case": "live", "p": 6, "at": [4.5, 1], "on": "J.3"}
      ]
    },
    {
      "id": "roof",
      "elevation": 7.2,
      "like": "drying"
    }
  ]
}
)";
}

Changed changed(const Row& row) {
    const std::string_view plan = valid_plan();
    const std::size_t at = plan.find(row.where);
    std::string text(plan.substr(0, at));
    text += row.becomes;
    text += plan.substr(at + row.where.size());

    const std::size_t mark = text.find("!!");
    Changed result;
    result.line = 1;
    std::size_t line_start = 0;
    for (std::size_t i = 0; i < mark && i < text.size(); ++i) {
        if (text[i] == '\n') {
            ++result.line;
            line_start = i + 1;
        }
    }
    result.column = static_cast<std::uint32_t>(mark - line_start + 1);
    if (mark != std::string::npos) {
        text.erase(mark, 2);
    }
    result.text = std::move(text);
    return result;
}

} // namespace bad_plans
