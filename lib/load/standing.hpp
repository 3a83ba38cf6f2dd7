#pragma once

#include "geometry/box_tree.hpp"
#include "load/collector.hpp"

#include <cstdint>
#include <optional>
#include <tuple>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A part of a deck that shares what stands on it: a bay of a one-way deck under `half`, a strip of one under
/// `lever` or `continuous`.
struct DeckPart {
    enum class Kind : std::uint8_t { bay, strip };
    Kind kind = Kind::bay;
    std::uint32_t index = none; ///< in Sharing::bays or Sharing::strips

    friend bool operator==(const DeckPart&, const DeckPart&) = default;
};

/// Finds the parts of decks under points and lines of the plan.
class DeckPartFinder {
public:
    DeckPartFinder(const FramedLevel& level, const Sharing& sharing);

    /// A stretch of a line from a to b, by fractions of it, that lies over one part.
    struct Hit {
        double from = 0, to = 0;
        DeckPart part;

        [[nodiscard]] auto key() const { return std::tuple(from, part.kind, part.index); }
    };
    /// Where the line runs over parts, within `margin` beside them; by rising `from`, then by part.
    [[nodiscard]] std::vector<Hit> over(Point a, Point b, double margin);
    /// The first part that holds the point within `margin`.
    [[nodiscard]] std::optional<DeckPart> under(Point p, double margin);

private:
    /// The parts of one deck, all in one set of axes.
    struct PartsOfDeck {
        std::vector<DeckPart> parts;
        std::uint32_t axes = 0;
        std::optional<BoxTree> tree; ///< of the parts, in strip axes; built when first asked
    };
    PartsOfDeck& parts_of(std::uint32_t deck);

    const Sharing* sharing_;
    std::vector<PartsOfDeck> decks_;
    BoxTree outlines_;
};

/// Shares a stretch of a line load over one part by statics: in a bay's span to both carriers by the
/// simple-beam rule, on its overhang whole to its carrier; on a strip as the strip carries. `w_a` and `w_b`
/// are the intensities at the stretch's ends a and b, per length of it.
void share_line(const Sharing& sharing, DeckPart part, Point a, Point b, double w_a, double w_b, double snap,
                std::uint32_t load_case, Source source, Collector& collector);

void share_point(const Sharing& sharing, DeckPart part, Point at, double p, std::uint32_t load_case,
                 Source source, Collector& collector);

RUNNEL_NAMESPACE_END
