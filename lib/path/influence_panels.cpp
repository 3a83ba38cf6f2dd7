#include "path/influence_panels.hpp"

#include "geometry/box_tree.hpp"
#include "geometry/ring_area.hpp"
#include "geometry/strip_piece.hpp"

#include <algorithm>
#include <map>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

StripPiece piece_of(const Cell& cell) {
    return {cell.from, cell.to, cell.low, cell.high};
}

/// Stretches of carriers along a panel's border: sorted by carrier and station, those that meet joined.
std::vector<FeltAlong> border_of(const Panel& panel, std::span<const LineCarrier> carriers, double snap) {
    std::vector<FeltAlong> all;
    const auto add = [&](const std::vector<PanelEdge>& border) {
        for (const PanelEdge& edge : border) {
            if (edge.carrier != none) {
                all.push_back({carriers[edge.carrier].number, std::min(edge.station_from, edge.station_to),
                               std::max(edge.station_from, edge.station_to)});
            }
        }
    };
    add(panel.outer);
    std::for_each(panel.holes.begin(), panel.holes.end(), add);
    std::sort(all.begin(), all.end(), [](const FeltAlong& l, const FeltAlong& r) {
        return std::pair(l.carrier, l.station_from) < std::pair(r.carrier, r.station_from);
    });
    std::vector<FeltAlong> joined;
    for (const FeltAlong& next : all) {
        if (!joined.empty() && joined.back().carrier == next.carrier &&
            next.station_from <= joined.back().station_to + snap) {
            joined.back().station_to = std::max(joined.back().station_to, next.station_to);
        } else {
            joined.push_back(next);
        }
    }
    return joined;
}

/// Which panel a point lies in.
class PanelFinder {
public:
    PanelFinder(const Panels& panels, double noise, std::size_t questions) : origin_(panels.origin) {
        if (panels.panels.size() <= 1) {
            return;
        }
        std::vector<Box> boxes;
        std::size_t all_edges = 0;
        for (const Panel& panel : panels.panels) {
            all_edges += edges_of(panel);
        }
        for (const Panel& panel : panels.panels) {
            std::vector<Ring> rings{ring_of(panel.outer)};
            boxes.push_back(box_of(rings.front()));
            for (const std::vector<PanelEdge>& hole : panel.holes) {
                rings.push_back(ring_of(hole));
            }
            // A longer border has more cells beside it.
            areas_.emplace_back(std::move(rings), noise, questions * edges_of(panel) / all_edges);
        }
        finder_ = BoxFinder(std::move(boxes));
    }

    /// `none`: rounding puts it in none of them.
    [[nodiscard]] std::uint32_t find(Point in_plan) {
        if (areas_.empty()) {
            return 0;
        }
        const Point p = in_plan - origin_;
        finder_.find(box_of(p, p), near_);
        const auto at = std::find_if(near_.begin(), near_.end(),
                                     [&](std::uint32_t panel) { return areas_[panel].contains(p); });
        return at == near_.end() ? none : *at;
    }

private:
    static std::size_t edges_of(const Panel& panel) {
        std::size_t count = panel.outer.size();
        for (const std::vector<PanelEdge>& hole : panel.holes) {
            count += hole.size();
        }
        return count;
    }

    static Ring ring_of(const std::vector<PanelEdge>& border) {
        Ring ring;
        for (const PanelEdge& edge : border) {
            ring.push_back(edge.from);
        }
        return ring;
    }

    Point origin_;
    std::vector<RingArea> areas_; ///< by panel; empty where there is but one
    BoxFinder finder_;
    std::vector<std::uint32_t> near_;
};

/// Adds up a deck's cells by panel, and by those of their carriers that do not lie along it there.
class PanelParts {
public:
    PanelParts(const Panels& panels, std::span<const LineCarrier> carriers, Tolerance tolerance,
               std::size_t cells)
        : tolerance_(tolerance), finder_(panels, tolerance.noise, cells) {
        for (const Panel& panel : panels.panels) {
            borders_.push_back(border_of(panel, carriers, tolerance.snap));
        }
        areas_.resize(borders_.size());
        borders_.emplace_back(); // of what lies in no panel
    }

    void add(const Cell& cell, const StripAxes& axes, std::span<const Transfer> transfers) {
        const StripPiece piece = piece_of(cell);
        constexpr double half = 0.5;
        const Point middle{(cell.low.at(half) + cell.high.at(half)) / 2, (cell.from + cell.to) / 2};
        const std::uint32_t found = finder_.find(axes.to_plan(middle));
        const std::uint32_t panel = found == none ? static_cast<std::uint32_t>(borders_.size() - 1) : found;
        Elsewhere elsewhere;
        for (const Transfer& transfer : transfers) {
            const FeltAlong own{transfer.carrier, std::min(transfer.station_from, transfer.station_to),
                                std::max(transfer.station_from, transfer.station_to)};
            if (!is_along(borders_[panel], own)) {
                elsewhere.push_back(own);
            }
        }
        if (found != none) {
            areas_[panel].add(area_of(piece));
        }
        if (!elsewhere.empty()) {
            Gathered& part = parts_[{panel, carriers_of(elsewhere)}];
            part.area.add(area_of(piece));
            part.elsewhere.insert(part.elsewhere.end(), elsewhere.begin(), elsewhere.end());
        }
    }

    [[nodiscard]] std::vector<PanelPart> finish() {
        std::vector<PanelPart> parts;
        for (std::uint32_t p = 0; p < areas_.size(); ++p) {
            parts.push_back({areas_[p].value(), std::move(borders_[p]), none});
        }
        for (auto& [key, gathered] : parts_) {
            parts.push_back({gathered.area.value(), std::move(gathered.elsewhere),
                             key.first < areas_.size() ? key.first : none});
        }
        return parts;
    }

private:
    using Elsewhere = std::vector<FeltAlong>;
    struct Gathered {
        Sum area;
        Elsewhere elsewhere;
    };

    /// Stretches of one carrier are farther apart than `snap`: the last that starts no later decides.
    [[nodiscard]] bool is_along(const std::vector<FeltAlong>& border, const FeltAlong& own) const {
        const double snap = tolerance_.snap;
        const auto next =
            std::upper_bound(border.begin(), border.end(), std::pair(own.carrier, own.station_from + snap),
                             [](const std::pair<std::uint32_t, double>& at, const FeltAlong& along) {
                                 return at < std::pair(along.carrier, along.station_from);
                             });
        if (next == border.begin()) {
            return false;
        }
        const FeltAlong& last = *(next - 1);
        return last.carrier == own.carrier && own.station_from >= last.station_from - snap &&
               own.station_to <= last.station_to + snap;
    }

    static std::vector<std::uint32_t> carriers_of(const Elsewhere& elsewhere) {
        std::vector<std::uint32_t> carriers;
        for (const FeltAlong& one : elsewhere) {
            carriers.push_back(one.carrier);
        }
        std::sort(carriers.begin(), carriers.end());
        carriers.erase(std::unique(carriers.begin(), carriers.end()), carriers.end());
        return carriers;
    }

    Tolerance tolerance_;
    PanelFinder finder_;
    std::vector<std::vector<FeltAlong>> borders_; ///< by panel, and one more
    std::vector<Sum> areas_;                      ///< by panel
    std::map<std::pair<std::uint32_t, std::vector<std::uint32_t>>, Gathered> parts_;
};

} // namespace

std::vector<PanelPart> panel_parts(const FramedDeck& deck, std::span<const LineCarrier> carriers,
                                   const Sharing& sharing, std::span<const std::uint32_t> cells,
                                   Tolerance tolerance) {
    PanelParts parts(divide_into_panels(deck, carriers, tolerance), carriers, tolerance, cells.size());
    for (const std::uint32_t c : cells) {
        const Cell& cell = sharing.cells[c];
        parts.add(cell, sharing.axes[cell.axes], sharing.transfers[c]);
    }
    return parts.finish();
}

RUNNEL_NAMESPACE_END
