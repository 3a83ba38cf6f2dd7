#include "framing/snap.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A point that belongs into an edge, by its station there.
struct Node {
    double station;
    Point at;
};

class RingNoder {
public:
    explicit RingNoder(LevelDraft& draft) : draft_(draft) {}

    void node(Ring& ring) {
        Ring noded;
        noded.reserve(ring.size());
        for (std::size_t i = 0; i < ring.size(); ++i) {
            noded.push_back(ring[i]);
            collect({ring[i], ring[(i + 1) % ring.size()]});
            for (const Node& node : nodes_) {
                if (!(node.at == noded.back())) {
                    noded.push_back(node.at);
                }
            }
        }
        ring = std::move(noded);
    }

private:
    void collect(const Axis& edge) {
        nodes_.clear();
        found_.clear();
        draft_.surroundings.find(edge.from, edge.to, 2 * draft_.reach(), found_);
        for (const std::uint32_t e : found_) {
            if (draft_.elements.is_column(e)) {
                offer(edge, draft_.plan.columns[draft_.column_of(e)].at);
            } else if (draft_.elements.is_wall(e)) {
                offer(edge, draft_.plan.walls[draft_.wall_of(e)].from);
                offer(edge, draft_.plan.walls[draft_.wall_of(e)].to);
            } else {
                const auto [first, last] = draft_.members_near(e, edge.from, edge.to, draft_.reach());
                for (std::uint32_t m = first; m < last; ++m) {
                    offer(edge, draft_.level.members[m].from);
                    offer(edge, draft_.level.members[m].to);
                }
            }
        }
        std::sort(nodes_.begin(), nodes_.end(), [](const Node& a, const Node& b) {
            return a.station != b.station ? a.station < b.station
                   : a.at.x != b.at.x     ? a.at.x < b.at.x
                                          : a.at.y < b.at.y;
        });
    }

    void offer(const Axis& edge, Point p) {
        const NearPoint near = nearest_on(edge, p);
        if (near.distance > draft_.tolerance.noise && near.distance <= draft_.reach() &&
            !edge.is_end(near.station, draft_.reach())) {
            nodes_.push_back({near.station, p});
        }
    }

    LevelDraft& draft_;
    std::vector<Node> nodes_;
    std::vector<std::uint32_t> found_;
};

} // namespace

void node_decks(LevelDraft& draft) {
    RingNoder noder(draft);
    for (FramedDeck& deck : draft.level.decks) {
        noder.node(deck.outline);
        for (Ring& opening : deck.openings) {
            noder.node(opening);
        }
    }
}

RUNNEL_NAMESPACE_END
