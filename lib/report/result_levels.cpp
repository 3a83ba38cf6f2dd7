#include "geometry/basic.hpp"
#include "geometry/line_pieces.hpp"
#include "report/region_json.hpp"
#include "report/result_writer.hpp"

#include <runnel/deck.hpp>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// How many of a piece's coefficients count: those that add more to its ordinates than rounding does. Two or
/// less: it is linear.
std::size_t coefficients_of(const LinePiece& piece) {
    constexpr double rounding = 64 * std::numeric_limits<double>::epsilon();
    const double length = piece.to - piece.from;
    double power = 1;
    double scale = 0;
    std::array<double, 5> ordinates{};
    for (std::size_t i = 0; i < piece.c.size(); ++i, power *= length) {
        ordinates[i] = std::abs(piece.c[i]) * power;
        scale += ordinates[i];
    }
    std::size_t count = piece.c.size();
    while (count > 0 && ordinates[count - 1] <= rounding * scale) {
        --count;
    }
    return count;
}

} // namespace

void ResultWriter::line_piece(const LinePiece& piece) {
    json_.key("from").number(piece.from, scale_.length);
    json_.key("to").number(piece.to, scale_.length);
    json_.key("start").number(piece.at(piece.from), scale_.line_load);
    json_.key("end").number(piece.at(piece.to), scale_.line_load);
    const std::size_t coefficients = coefficients_of(piece);
    constexpr std::size_t linear = 2;
    if (coefficients > linear) {
        json_.key("curve").open_array();
        double power = 1;
        for (std::size_t i = 0; i < coefficients; ++i, power *= scale_.length) {
            json_.number(piece.c[i] * power, scale_.line_load);
        }
        json_.close_array();
    }
}

void ResultWriter::levels() {
    json_.key("levels").open_array(JsonWriter::Layout::block);
    for (std::uint32_t l = 0; l < takedown_.levels.size(); ++l) {
        level(l);
    }
    json_.close_array();
}

void ResultWriter::level(std::uint32_t level) {
    const FramedLevel& framed = takedown_.framing.levels[level];
    json_.open_object(JsonWriter::Layout::block);
    json_.key("id").text(framed.id);
    json_.key("elevation").number(framed.elevation, scale_.length);
    json_.key("balance");
    balances(takedown_.level_balance[level], true);
    if (const double off = takedown_.levels[level].loads.curve_error; off > 0) {
        json_.key("curve_error").number(off, scale_.line_load);
    }
    decks(level);
    regions(level);
    members(level);
    json_.close_object();
}

void ResultWriter::decks(std::uint32_t level) {
    const FramedLevel& framed = takedown_.framing.levels[level];
    const Sharing& sharing = takedown_.levels[level].sharing;
    json_.key("decks").open_array(JsonWriter::Layout::block);
    for (std::uint32_t d = 0; d < framed.decks.size(); ++d) {
        json_.open_object();
        json_.key("id").text(framed.decks[d].id);
        json_.key("span").text(name_of(framed.decks[d].span));
        json_.key("share").text(name_of(framed.decks[d].share));
        json_.key("area").number(sharing.deck_area[d], scale_.area);
        json_.close_object();
    }
    json_.close_array();
}

void ResultWriter::regions(std::uint32_t level) {
    const Sharing& sharing = takedown_.levels[level].sharing;
    json_.key("regions").open_array(JsonWriter::Layout::block);
    for (const Region& region : regions_of(sharing)) {
        write_region(json_, region, sharing, level, takedown_.framing, names_, scale_);
    }
    json_.close_array();
}

void ResultWriter::members(std::uint32_t level) {
    const std::size_t count = takedown_.framing.levels[level].members.size();
    json_.key("members").open_array(JsonWriter::Layout::block);
    for (std::uint32_t m = 0; m < count; ++m) {
        member(level, m);
    }
    json_.close_array();
}

void ResultWriter::member(std::uint32_t level, std::uint32_t member) {
    const FramedMember& framed = takedown_.framing.levels[level].members[member];
    const LevelTakedown& result = takedown_.levels[level];
    json_.open_object();
    json_.key("id").text(framed.id);
    json_.key("role").text(name_of(framed.role));
    json_.key("from");
    point(framed.from);
    json_.key("to");
    point(framed.to);
    json_.key("length").number(framed.length, scale_.length);
    json_.key("region_area").number(result.region_area[member], scale_.area);
    json_.key("tributary_area").number(result.tributary_area[member], scale_.area);
    json_.key("influence_area").number(result.influence_area[member], scale_.area);
    bearings(level, member);
    loads(level, member);
    spans(level, member);
    json_.close_object();
}

void ResultWriter::bearings(std::uint32_t level, std::uint32_t member) {
    const FramedLevel& framed = takedown_.framing.levels[level];
    const LevelTakedown& result = takedown_.levels[level];
    const std::size_t cases = takedown_.plan.cases.size();
    const std::size_t first = framed.bearings.first(member);
    const std::span<const Bearing> bearings = framed.bearings[member];
    json_.key("bearings").open_array();
    for (std::size_t b = 0; b < bearings.size(); ++b) {
        const Bearing& bearing = bearings[b];
        json_.open_object();
        json_.key("station").number(bearing.station, scale_.length);
        json_.key("on").text(names_.carrier(level, bearing.on));
        json_.key("kind").text(Names::kind(bearing.on.kind));
        if (bearing.on.kind != CarrierKind::column) {
            json_.key("on_station").number(bearing.on_station, scale_.length);
        }
        const std::size_t row = (first + b) * cases;
        json_.key("reactions");
        by_case(std::span(result.reactions).subspan(row, cases), scale_.force);
        if (bearing.fixed && !result.fixed_moments.empty()) {
            json_.key("moment");
            by_case(std::span(result.fixed_moments).subspan(row, cases), scale_.moment);
        }
        json_.close_object();
    }
    json_.close_array();
}

void ResultWriter::loads(std::uint32_t level, std::uint32_t member) {
    const std::span<const CarrierLine> lines = takedown_.levels[level].lines[member];
    const std::span<const CarrierPoint> points = takedown_.levels[level].points[member];
    for (const CarrierLine& line : lines) {
        pieces_[line.load_case].push_back(line.piece);
    }
    json_.key("loads").open_array();
    for (std::uint32_t c = 0; c < pieces_.size(); ++c) {
        Sum total;
        for (const LinePiece& piece : pieces_[c]) {
            total.add(piece.total());
        }
        bool any = !pieces_[c].empty();
        for (const CarrierPoint& point : points) {
            if (point.load_case == c) {
                total.add(point.p);
                any = true;
            }
        }
        if (!any) {
            continue;
        }
        json_.open_object();
        json_.key("case").text(case_id(c));
        json_.key("line").open_array();
        for (const LinePiece& piece : merged(pieces_[c], noise_)) {
            json_.open_object();
            line_piece(piece);
            json_.close_object();
        }
        json_.close_array();
        json_.key("point").open_array();
        for (const CarrierPoint& point : points) {
            if (point.load_case == c) {
                json_.open_object();
                json_.key("station").number(point.station, scale_.length);
                json_.key("p").number(point.p, scale_.force);
                json_.key("source").text(names_.source(level, point.source));
                json_.close_object();
            }
        }
        json_.close_array();
        json_.key("total").number(total.value(), scale_.force);
        json_.close_object();
        pieces_[c].clear();
    }
    json_.close_array();
}

void ResultWriter::spans(std::uint32_t level, std::uint32_t member) {
    json_.key("spans").open_array();
    for (const Span& span : takedown_.levels[level].spans[member]) {
        json_.open_object();
        json_.key("from").number(span.from, scale_.length);
        json_.key("to").number(span.to, scale_.length);
        json_.key("kind").text(span.overhang ? "overhang" : "span");
        json_.close_object();
    }
    json_.close_array();
}

RUNNEL_NAMESPACE_END
