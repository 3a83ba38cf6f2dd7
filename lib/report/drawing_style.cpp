#include "report/drawing_marks.hpp"
#include "report/region_tints.hpp"

#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Tint {
    std::string_view paper, line;
    int angle; ///< of the hatching, degrees
};
constexpr std::array<Tint, tint_count> tints{{{"#e9eef2", "#7c93a6", 25},
                                              {"#f4ead9", "#b99a63", 65},
                                              {"#e6efe1", "#86a678", 115},
                                              {"#f2e4e1", "#b98579", 155},
                                              {"#ece6f1", "#9484ab", 5},
                                              {"#e2efee", "#6fa09c", 90},
                                              {"#efefe3", "#a3a16a", 45}}};

} // namespace

void drawing_style(SvgText& svg) {
    svg.add("<defs>\n");
    for (std::size_t t = 0; t < tints.size(); ++t) {
        svg.add("<pattern id=\"tint").count(t).add("\" width=\"7\" height=\"7\" patternUnits=\"");
        svg.add("userSpaceOnUse\" patternTransform=\"rotate(")
            .count(static_cast<std::size_t>(tints[t].angle));
        svg.add(")\"><rect width=\"7\" height=\"7\" fill=\"").add(tints[t].paper);
        svg.add("\"/><line x1=\"0\" y1=\"0\" x2=\"7\" y2=\"0\" stroke=\"").add(tints[t].line);
        svg.add("\" stroke-width=\"0.9\"/></pattern>\n");
    }
    svg.add("</defs>\n<style>\n"
            ".region{stroke:#5d6b75;stroke-width:.6;fill-rule:evenodd}\n"
            ".end-zone{fill:none;stroke:#5d6b75;stroke-width:.9;stroke-dasharray:2 3}\n"
            ".deck{fill:none;stroke:#39434b;stroke-width:1.2;stroke-dasharray:9 4}\n"
            ".opening{fill:#fff;stroke:#39434b;stroke-width:1}\n"
            ".cross{stroke:#39434b;stroke-width:.8}\n"
            ".member{stroke:#12303f;stroke-linecap:butt}\n"
            ".joist{stroke-width:1.1}.beam{stroke-width:2.6}.girder{stroke-width:4.4}\n"
            ".wall{stroke:#4a3b30;stroke-width:9;stroke-opacity:.75}\n"
            ".column{fill:#8c1c13;stroke:#fff;stroke-width:1}\n"
            ".label{fill:#12303f;text-anchor:middle;paint-order:stroke;stroke:#fff;stroke-width:3.2;"
            "stroke-linejoin:round}\n"
            ".grid{stroke:#5b4b9a;stroke-width:.7;stroke-dasharray:14 3 2 3;fill:none}\n"
            ".grid-mark{stroke:#5b4b9a;stroke-width:1;fill:#fff}\n"
            ".span{fill:none;stroke:#39434b;stroke-width:1.3}\n"
            ".of-grid{fill:#5b4b9a}"
            ".of-column{fill:#8c1c13}.of-deck{font-style:italic;fill:#39434b}\n"
            "</style>\n");
}

RUNNEL_NAMESPACE_END
