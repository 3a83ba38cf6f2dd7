#include "load/phases.hpp"

#include "deck/deck_area.hpp"
#include "deck/pressure.hpp"
#include "geometry/line_pieces.hpp"
#include "load/strip_loads.hpp"

#include <algorithm>
#include <array>

// Design. A piece of a cell brings to each station of its carrier what stands on one strip square to it (or
// along the deck's strips): breadth times the pressure at the strip's middle, both of degree two at most
// along the carrier, so that a plane of pressure between two parabolas is a quartic and stays exact. Uniform
// loads share one profile of unit pressure by carrier, which is joined once and scaled by case.

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Coefficients of a polynomial of degree four at most.
using Polynomial = std::array<double, 5>;

Polynomial product(const std::array<double, 3>& a, const std::array<double, 3>& b) {
    Polynomial c{};
    for (std::size_t i = 0; i < a.size(); ++i) {
        for (std::size_t k = 0; k < b.size(); ++k) {
            c[i + k] += a[i] * b[k];
        }
    }
    return c;
}

std::array<double, 3> polynomial_of(const Border& border) {
    return {border.start, border.end - border.start - border.bulge, border.bulge};
}

/// The piece seen from its other end.
StripPiece turned_about(const StripPiece& piece) {
    return {piece.to,
            piece.from,
            {piece.low.end, piece.low.start, piece.low.bulge},
            {piece.high.end, piece.high.start, piece.high.bulge}};
}

/// What a pressure on a piece brings to its carrier, as a line along it between the stations at the piece's
/// ends, which differ.
LinePiece line_of(StripPiece piece, const Intensity& intensity, double station_from, double station_to,
                  double weight) {
    const double levels = piece.to - piece.from;
    if (station_to < station_from) {
        std::swap(station_from, station_to);
        piece = turned_about(piece);
    }
    const std::array<double, 3> low = polynomial_of(piece.low);
    const std::array<double, 3> high = polynomial_of(piece.high);
    std::array<double, 3> breadth{};
    std::array<double, 3> at_middle{intensity.q + intensity.by_across * piece.from,
                                    intensity.by_across * (piece.to - piece.from), 0};
    for (std::size_t i = 0; i < breadth.size(); ++i) {
        breadth[i] = high[i] - low[i];
        at_middle[i] += intensity.by_along * (low[i] + breadth[i] / 2);
    }
    const Polynomial c = product(breadth, at_middle);
    const double stretch = station_to - station_from;
    LinePiece line{station_from, station_to, {}};
    double scale = weight * levels / stretch; // of the cell's levels to the carrier's stations
    for (std::size_t i = 0; i < c.size(); ++i) {
        line.c[i] = scale * c[i];
        scale /= stretch;
    }
    return line;
}

StripPiece piece_of(const Cell& cell) {
    return {cell.from, cell.to, cell.low, cell.high};
}

bool goes_to_points(std::span<const Transfer> transfers) {
    return transfers.front().station_from == transfers.front().station_to;
}

/// A piece of line on a carrier before pieces are joined; `load_case` is `none` for the profile of unit
/// pressure.
struct RawLine {
    std::uint32_t carrier = none;
    std::uint32_t load_case = none;
    LinePiece piece;
};

/// Brings the pressure on one deck to the carriers of its cells.
class DeckLoader {
public:
    DeckLoader(const Sharing& sharing, std::uint32_t deck, const DeckPressure& pressure, std::size_t cases,
               Collector& collector)
        : sharing_(sharing), deck_(deck), pressure_(pressure), cases_(cases), collector_(collector) {}

    void load_cells(std::size_t first, std::size_t last) {
        for (std::size_t c = first; c < last; ++c) {
            const std::span<const Transfer> transfers = sharing_.transfers[c];
            if (transfers.empty()) {
                continue;
            }
            const Cell& cell = sharing_.cells[c];
            const StripPiece where = piece_of(cell);
            if (goes_to_points(transfers)) {
                for (const DeckPressure::Uniform& u : pressure_.uniform()) {
                    put_points(transfers, u.load_case, u.q * area_of(where));
                }
            } else {
                for (const Transfer& t : transfers) {
                    raw_.push_back(
                        {t.carrier, none, line_of(where, {1, 0, 0}, t.station_from, t.station_to, t.weight)});
                }
            }
            if (pressure_.has_zones()) {
                gather_zones(cell, where, transfers);
            }
        }
        std::stable_sort(raw_.begin(), raw_.end(),
                         [](const RawLine& l, const RawLine& r) { return l.carrier < r.carrier; });
        for (std::size_t i = 0; i < raw_.size();) {
            std::size_t end = i + 1;
            while (end < raw_.size() && raw_[end].carrier == raw_[i].carrier) {
                ++end;
            }
            put_carrier(std::span(raw_).subspan(i, end - i));
            i = end;
        }
    }

private:
    void put_points(std::span<const Transfer> transfers, std::uint32_t load_case, double force) {
        for (const Transfer& t : transfers) {
            collector_.put_point(t.carrier, deck_,
                                 {load_case, {SourceKind::deck, deck_}, t.station_from, t.weight * force});
        }
    }

    void gather_zones(const Cell& cell, const StripPiece& where, std::span<const Transfer> transfers) {
        pressure_.zones_over(where, sharing_.axes[cell.axes], parts_);
        for (const DeckPressure::Piece& part : parts_) {
            if (goes_to_points(transfers)) {
                put_points(transfers, part.load_case, moments_of(part.where, part.intensity).area);
                continue;
            }
            const double x_from = where.fraction(part.where.from);
            const double x_to = part.where.to == where.to ? 1 : where.fraction(part.where.to);
            for (const Transfer& t : transfers) {
                const auto station = [&t](double x) { return (1 - x) * t.station_from + x * t.station_to; };
                if (station(x_from) != station(x_to)) {
                    raw_.push_back(
                        {t.carrier, part.load_case,
                         line_of(part.where, part.intensity, station(x_from), station(x_to), t.weight)});
                } else { // a part so narrow that its stations are one
                    put_points({&t, 1}, part.load_case, moments_of(part.where, part.intensity).area);
                }
            }
        }
    }

    /// Joins what came to one carrier, case by case, and hands it on.
    void put_carrier(std::span<const RawLine> raw) {
        std::vector<LinePiece> profile;
        std::vector<std::vector<LinePiece>> zoned;
        for (const RawLine& line : raw) {
            if (line.load_case == none) {
                profile.push_back(line.piece);
            } else {
                zoned.resize(cases_);
                zoned[line.load_case].push_back(line.piece);
            }
        }
        profile = merged(std::move(profile), collector_.noise());
        const std::uint32_t carrier = raw.front().carrier;
        const Source source{SourceKind::deck, deck_};
        for (const DeckPressure::Uniform& u : pressure_.uniform()) {
            for (LinePiece piece : profile) {
                for (double& c : piece.c) {
                    c *= u.q;
                }
                if (zoned.empty() || zoned[u.load_case].empty()) {
                    collector_.put_line(carrier, deck_, {u.load_case, source, piece});
                } else {
                    zoned[u.load_case].push_back(piece);
                }
            }
        }
        for (std::uint32_t c = 0; c < zoned.size(); ++c) {
            for (const LinePiece& piece : merged(std::move(zoned[c]), collector_.noise())) {
                collector_.put_line(carrier, deck_, {c, source, piece});
            }
        }
    }

    const Sharing& sharing_;
    std::uint32_t deck_;
    const DeckPressure& pressure_;
    std::size_t cases_;
    Collector& collector_;
    std::vector<RawLine> raw_;
    std::vector<DeckPressure::Piece> parts_;
};

/// Integral of |pressure| over a piece; where it changes sign within the piece's box, a bound of that.
double magnitude_on(const StripPiece& piece, const Intensity& intensity, double force) {
    const Box box = box_of(piece);
    double least = intensity.at(box.low);
    double most = least;
    for (const Point p : {box.high, Point{box.low.x, box.high.y}, Point{box.high.x, box.low.y}}) {
        least = std::min(least, intensity.at(p));
        most = std::max(most, intensity.at(p));
    }
    return least < 0 && most > 0 ? std::abs(area_of(piece)) * std::max(-least, most) : std::abs(force);
}

/// The account of what presses on a deck, from the deck alone: its rings and the zones, no carriers.
void account_applied(const FramedDeck& deck, std::uint32_t index, const DeckPressure& pressure,
                     const StripAxes& plain, const std::vector<StripPiece>& pieces, Collector& collector) {
    const AreaMoments whole = moments_of_deck(deck, plain, collector.noise());
    for (const DeckPressure::Uniform& u : pressure.uniform()) {
        collector.applied(index, u.load_case, u.q * whole.area,
                          u.q * (whole.moment + whole.area * plain.origin), std::abs(u.q * whole.area));
    }
    if (!pressure.has_zones()) {
        return;
    }
    std::vector<DeckPressure::Piece> parts;
    for (const StripPiece& piece : pieces) {
        pressure.zones_over(piece, plain, parts);
        for (const DeckPressure::Piece& part : parts) {
            const AreaMoments on = moments_of(part.where, part.intensity);
            collector.applied(index, part.load_case, on.area, on.moment + on.area * plain.origin,
                              magnitude_on(part.where, part.intensity, on.area));
        }
    }
}

/// Whether loads follow the cells. Under lever and continuous they follow the strips, and the cells are for
/// regions only.
bool follows_cells(const FramedDeck& deck) {
    return deck.span != SpanKind::one_way || deck.share == Share::half;
}

} // namespace

void load_areas(const Plan& plan, const Framing& framing, std::uint32_t level_index, const Sharing& sharing,
                Collector& collector) {
    const FramedLevel& level = framing.levels[level_index];
    const double noise = collector.noise();
    const Grouped<std::uint32_t> acting = area_loads_by_deck(level, noise);
    std::size_t first = 0;
    for (std::uint32_t d = 0; d < level.decks.size(); ++d) {
        std::size_t last = first;
        while (last < sharing.cells.size() && sharing.cells[last].deck == d) {
            ++last;
        }
        const StripAxes plain{level.decks[d].outline.front(), 1, 0};
        const bool uneven = std::any_of(acting[d].begin(), acting[d].end(), [&](std::uint32_t i) {
            return level.area_loads[i].plane || !level.area_loads[i].outline.empty();
        });
        const std::vector<StripPiece> pieces =
            uneven ? pieces_of_deck(level.decks[d], plain, noise) : std::vector<StripPiece>{};
        const std::vector<std::uint32_t> on_deck = really_acting(level, acting[d], pieces, plain, noise);
        const DeckPressure upright(plan, level, d, on_deck, plain, noise);
        account_applied(level.decks[d], d, upright, plain, pieces, collector);
        if (last > first) {
            // One-way decks have one pair of axes; in those of others zones are turned as they are asked for.
            const DeckPressure pressure(plan, level, d, on_deck, sharing.axes[sharing.cells[first].axes],
                                        noise);
            if (follows_cells(level.decks[d])) {
                DeckLoader(sharing, d, pressure, plan.cases.size(), collector).load_cells(first, last);
            } else {
                load_strips(sharing, d, first, last, pressure, collector);
            }
        }
        first = last;
    }
}

RUNNEL_NAMESPACE_END
