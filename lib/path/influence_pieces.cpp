#include "path/influence_pieces.hpp"

#include "geometry/box_tree.hpp"
#include "path/influence_columns.hpp"
#include "path/influence_panels.hpp"

#include <algorithm>
#include <optional>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

double FloorPieces::area_between(std::uint32_t piece, double from, double to) const {
    const bool all = from <= 0 && to >= 1;
    if (all || piece >= shapes.size()) {
        return areas[piece];
    }
    const StripPiece& shape = shapes[piece];
    const double breadth = shape.to - shape.from;
    return area_of({shape.from + from * breadth, shape.from + to * breadth, stretch_of(shape.low, from, to),
                    stretch_of(shape.high, from, to)});
}

namespace {

class PieceMaker {
public:
    PieceMaker(const Plan& plan, const FramedLevel& framed, const Sharing& sharing, Tolerance tolerance)
        : plan_(plan), framed_(framed), sharing_(sharing), tolerance_(tolerance) {}

    FloorPieces make() {
        add_bays();
        const Grouped<std::uint32_t> nearest = cells_of_nearest();
        for (std::uint32_t d = 0; d < framed_.decks.size(); ++d) {
            if (nearest[d].empty()) {
                continue;
            }
            if (framed_.decks[d].span == SpanKind::two_way) {
                add_panels(framed_.decks[d], nearest[d]);
            } else {
                add_felt_areas(d, nearest[d]);
            }
        }
        pieces_.beside = Grouped<Beside>::from_pairs(sharing_.carrier_count(), std::move(beside_));
        return std::move(pieces_);
    }

private:
    void add_bays() {
        pieces_.shapes.reserve(sharing_.bays.size());
        pieces_.areas.reserve(sharing_.bays.size());
        pieces_.within.reserve(sharing_.bays.size());
        beside_.reserve(2 * sharing_.bays.size());
        for (const Bay& bay : sharing_.bays) {
            pieces_.shapes.push_back({bay.from, bay.to, bay.low, bay.high});
            const std::uint32_t piece = add_piece(area_of(pieces_.shapes.back()));
            if (bay.low_carrier != none) {
                beside_.push_back(
                    {bay.low_carrier, {piece, bay.low_station_from, bay.low_station_to, false}});
            }
            if (bay.high_carrier != none) {
                beside_.push_back(
                    {bay.high_carrier, {piece, bay.high_station_from, bay.high_station_to, false}});
            }
        }
    }

    std::uint32_t add_piece(double area, std::uint32_t within = none) {
        pieces_.areas.push_back(area);
        pieces_.within.push_back(within);
        return static_cast<std::uint32_t>(pieces_.areas.size() - 1);
    }

    void add_panels(const FramedDeck& deck, std::span<const std::uint32_t> cells) {
        const auto first = static_cast<std::uint32_t>(pieces_.areas.size());
        for (const PanelPart& part : panel_parts(deck, carriers_near(deck), sharing_, cells, tolerance_)) {
            const std::uint32_t piece =
                add_piece(part.area, part.within == none ? none : first + part.within);
            for (const FeltAlong& along : part.along) {
                beside_.push_back({along.carrier, {piece, along.station_from, along.station_to, true}});
            }
        }
    }

    /// Members and walls of the level that may carry a deck.
    std::vector<LineCarrier> carriers_near(const FramedDeck& deck) {
        if (!tree_) {
            find_carriers();
        }
        std::vector<std::uint32_t> near;
        tree_->find(box_of(deck.outline).grown(tolerance_.snap), near);
        std::vector<LineCarrier> carriers;
        for (const std::uint32_t i : near) {
            carriers.push_back(carriers_[i]);
        }
        return carriers;
    }

    void find_carriers() {
        for (std::uint32_t m = 0; m < framed_.members.size(); ++m) {
            if (framed_.members[m].carries_deck) {
                carriers_.push_back({m, framed_.members[m].from, framed_.members[m].to});
            }
        }
        for (const std::uint32_t w : framed_.walls) {
            carriers_.push_back(
                {sharing_.number_of({CarrierKind::wall, w}), plan_.walls[w].from, plan_.walls[w].to});
        }
        std::vector<Box> boxes;
        boxes.reserve(carriers_.size());
        for (const LineCarrier& carrier : carriers_) {
            boxes.push_back(box_of(carrier.from, carrier.to));
        }
        tree_.emplace(boxes);
    }

    void add_felt_areas(std::uint32_t d, std::span<const std::uint32_t> cells) {
        for (const FeltArea& felt : felt_areas(plan_, framed_.decks[d], sharing_, cells, tolerance_)) {
            const std::uint32_t piece = add_piece(felt.area);
            for (const std::uint32_t carrier : felt.carriers) {
                beside_.push_back({carrier, {piece, 0, 0, true}});
            }
        }
    }

    /// Cells of two-way decks and decks on columns that go to any carrier, by deck.
    Grouped<std::uint32_t> cells_of_nearest() const {
        std::vector<std::pair<std::uint32_t, std::uint32_t>> cells;
        for (std::uint32_t c = 0; c < sharing_.cells.size(); ++c) {
            const std::uint32_t deck = sharing_.cells[c].deck;
            if (framed_.decks[deck].span != SpanKind::one_way && !sharing_.transfers[c].empty()) {
                cells.emplace_back(deck, c);
            }
        }
        return Grouped<std::uint32_t>::from_pairs(framed_.decks.size(), std::move(cells));
    }

    const Plan& plan_;
    const FramedLevel& framed_;
    const Sharing& sharing_;
    Tolerance tolerance_;
    std::vector<LineCarrier> carriers_;
    std::optional<BoxTree> tree_; ///< of the carriers; built when first asked
    FloorPieces pieces_;
    std::vector<std::pair<std::uint32_t, Beside>> beside_;
};

} // namespace

FloorPieces floor_pieces(const Plan& plan, const FramedLevel& framed, const Sharing& sharing,
                         Tolerance tolerance) {
    return PieceMaker(plan, framed, sharing, tolerance).make();
}

RUNNEL_NAMESPACE_END
