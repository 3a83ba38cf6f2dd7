#pragma once

#include "geometry/box_tree.hpp"
#include "load/collector.hpp"

#include <optional>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// Finds the bays under points and lines of the plan.
class BayFinder {
public:
    BayFinder(const FramedLevel& level, const Sharing& sharing);

    /// A stretch of a line from a to b, by fractions of it, that lies over one bay.
    struct Hit {
        double from = 0, to = 0;
        std::uint32_t bay = none;
    };
    /// Where the line runs over bays, within `margin` beside them; by rising `from`, then by bay.
    [[nodiscard]] std::vector<Hit> over(Point a, Point b, double margin);
    /// The first bay that holds the point within `margin`.
    [[nodiscard]] std::uint32_t under(Point p, double margin);

private:
    struct DeckBays {
        std::uint32_t first = 0, last = 0;
        std::optional<BoxTree> tree; ///< of the bays, in strip axes; built when first asked
    };
    DeckBays& bays_of(std::uint32_t deck);

    const Sharing* sharing_;
    std::vector<DeckBays> decks_;
    BoxTree outlines_;
};

/// Shares a stretch of a line load over one bay by statics: in a span to both carriers by the simple-beam
/// rule, on an overhang whole to its carrier. `w_a` and `w_b` are the intensities at the stretch's ends a and
/// b, per length of it.
void share_line(const Sharing& sharing, const Bay& bay, Point a, Point b, double w_a, double w_b, double snap,
                std::uint32_t load_case, Source source, Collector& collector);

void share_point(const Sharing& sharing, const Bay& bay, Point at, double p, std::uint32_t load_case,
                 Source source, Collector& collector);

RUNNEL_NAMESPACE_END
