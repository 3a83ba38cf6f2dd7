#include "deck/panels.hpp"

#include "geometry/planar_map.hpp"

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// The lines that divide a deck: first its edges, run with the deck on their left, then its carriers.
struct DeckLines {
    std::vector<MapLine> lines;
    std::size_t outline_edges = 0; ///< the first so many
    std::size_t edges = 0;         ///< and those of openings

    DeckLines(const Ring& outline, std::span<const Ring> openings, std::span<const LineCarrier> carriers,
              Point origin) {
        add_ring(outline, false, origin);
        outline_edges = lines.size();
        for (const Ring& opening : openings) {
            add_ring(opening, true, origin);
        }
        edges = lines.size();
        for (const LineCarrier& carrier : carriers) {
            lines.push_back({carrier.from - origin, carrier.to - origin, false});
        }
    }

    [[nodiscard]] bool is_edge(std::uint32_t line) const { return line < edges; }
    [[nodiscard]] bool is_outline(std::uint32_t line) const { return line < outline_edges; }

private:
    void add_ring(const Ring& ring, bool clockwise, Point origin) {
        const bool turn = (signed_area(ring) < 0) != clockwise;
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Point a = ring[i] - origin;
            const Point b = ring[(i + 1) % ring.size()] - origin;
            lines.push_back({turn ? b : a, turn ? a : b, true});
        }
    }
};

/// Which faces of the map are deck.
class DeckFaces {
public:
    DeckFaces(const PlanarMap& map, const DeckLines& lines)
        : map_(map), is_edge_(map.pieces.size(), false), state_(map.faces.size(), State::unknown) {
        for (std::uint32_t p = 0; p < map.pieces.size(); ++p) {
            look_beside(p, lines);
        }
        state_.front() = State::none;
        spread();
    }

    [[nodiscard]] bool is_deck(std::uint32_t face) const { return state_[face] == State::deck; }

private:
    enum class State : std::uint8_t { unknown, deck, none };

    /// The deck's edges tell what lies beside them. Two openings, or an opening and the outline, may have a
    /// stretch in common: then neither side is deck.
    void look_beside(std::uint32_t piece, const DeckLines& lines) {
        bool off_left = false;
        bool off_right = false;
        int outline_runs =
            0; // there less back: a way to an inner ring that is walked both ways bounds nothing
        for (const PlanarMap::LineOnPiece& on : map_.lines[piece]) {
            if (lines.is_outline(on.line)) {
                outline_runs += on.backwards ? -1 : 1;
            } else if (lines.is_edge(on.line)) {
                (on.backwards ? off_left : off_right) = true;
            }
        }
        off_left = off_left || outline_runs < 0;
        off_right = off_right || outline_runs > 0;
        if (!off_left && !off_right) {
            return;
        }
        is_edge_[piece] = true;
        settle(map_.face_left[2 * piece], off_left);
        settle(map_.face_left[2 * piece + 1], off_right);
    }

    void settle(std::uint32_t face, bool off) {
        if (state_[face] == State::unknown) {
            known_.push_back(face);
        }
        state_[face] = off || state_[face] == State::none ? State::none : State::deck;
    }

    /// Faces between carriers alone are what the faces beside them are.
    void spread() {
        while (!known_.empty()) {
            const std::uint32_t face = known_.back();
            known_.pop_back();
            spread_along(map_.faces[face].outer, state_[face]);
            for (const std::vector<std::uint32_t>& hole : map_.faces[face].holes) {
                spread_along(hole, state_[face]);
            }
        }
    }

    void spread_along(std::span<const std::uint32_t> chain, State state) {
        for (const std::uint32_t h : chain) {
            const std::uint32_t other = map_.face_left[h ^ 1U];
            if (!is_edge_[h / 2] && state_[other] == State::unknown) {
                state_[other] = state;
                known_.push_back(other);
            }
        }
    }

    const PlanarMap& map_;
    std::vector<bool> is_edge_; ///< by piece
    std::vector<State> state_;  ///< by face
    std::vector<std::uint32_t> known_;
};

/// Turns borders of the map into borders of panels.
class PanelMaker {
public:
    PanelMaker(const PlanarMap& map, const DeckLines& lines, const DeckFaces& faces)
        : map_(map), lines_(lines), panel_of_(map.faces.size(), none) {
        for (std::uint32_t f = 0; f < map.faces.size(); ++f) {
            if (faces.is_deck(f)) {
                panel_of_[f] = count_++;
            }
        }
    }

    [[nodiscard]] std::vector<Panel> make() const {
        std::vector<Panel> panels;
        panels.reserve(count_);
        for (std::uint32_t f = 0; f < map_.faces.size(); ++f) {
            if (panel_of_[f] == none) {
                continue;
            }
            const PlanarMap::Face& face = map_.faces[f];
            Panel panel{border(face.outer), {}, face.area};
            for (const std::vector<std::uint32_t>& hole : face.holes) {
                panel.holes.push_back(border(hole));
            }
            panels.push_back(std::move(panel));
        }
        return panels;
    }

private:
    [[nodiscard]] std::vector<PanelEdge> border(std::span<const std::uint32_t> chain) const {
        std::vector<PanelEdge> edges;
        edges.reserve(chain.size());
        for (const std::uint32_t h : chain) {
            PanelEdge edge;
            edge.from = map_.nodes[map_.start(h)];
            edge.beyond = panel_of_[map_.face_left[h ^ 1U]];
            for (const PlanarMap::LineOnPiece& on : map_.lines[h / 2]) {
                if (!lines_.is_edge(on.line)) {
                    edge.carrier = on.line - static_cast<std::uint32_t>(lines_.edges);
                    edge.station_from = station(on.line, map_.start(h));
                    edge.station_to = station(on.line, map_.end(h));
                    break;
                }
            }
            edges.push_back(edge);
        }
        return edges;
    }

    /// Station of a node on a carrier; exact at both ends.
    [[nodiscard]] double station(std::uint32_t line, std::uint32_t node) const {
        const MapLine& carrier = lines_.lines[line];
        const double length = distance(carrier.a, carrier.b);
        if (node == map_.line_ends[line].first) {
            return 0;
        }
        if (node == map_.line_ends[line].second) {
            return length;
        }
        return std::clamp(station_of(map_.nodes[node], carrier.a, carrier.b), 0.0, length);
    }

    const PlanarMap& map_;
    const DeckLines& lines_;
    std::vector<std::uint32_t> panel_of_; ///< by face
    std::uint32_t count_ = 0;
};

} // namespace

Panels divide_into_panels(const Ring& outline, std::span<const Ring> openings,
                          std::span<const LineCarrier> carriers, Tolerance tolerance) {
    const Point origin = outline.front();
    const DeckLines lines(outline, openings, carriers, origin);
    const PlanarMap map = map_of(lines.lines, tolerance);
    const DeckFaces faces(map, lines);
    return {origin, PanelMaker(map, lines, faces).make()};
}

RUNNEL_NAMESPACE_END
