#include "load/standing.hpp"

#include "geometry/basic.hpp"
#include "geometry/strip_piece.hpp"
#include "load/fit.hpp"
#include "load/strip_loads.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

std::vector<Box> outline_boxes(const FramedLevel& level) {
    std::vector<Box> boxes;
    for (const FramedDeck& deck : level.decks) {
        boxes.push_back(box_of(deck.outline));
    }
    return boxes;
}

/// Narrows from..to to where start + (end - start) t >= 0.
void keep_positive(double start, double end, double& from, double& to) {
    if (start < 0 && end < 0) {
        to = from - 1;
    } else if (start < 0) {
        from = std::max(from, start / (start - end));
    } else if (end < 0) {
        to = std::min(to, start / (start - end));
    }
}

/// A border's along coordinate at a level, the border taken as going on straight.
double along_of(const Border& border, const StripPiece& piece, double across) {
    const double x = (across - piece.from) / (piece.to - piece.from);
    return (1 - x) * border.start + x * border.end;
}

StripPiece piece_of(const Bay& bay) {
    return {bay.from, bay.to, bay.low, bay.high};
}

StripPiece piece_of(const Sharing& sharing, DeckPart part) {
    switch (part.kind) {
    case DeckPart::Kind::bay:
        return piece_of(sharing.bays[part.index]);
    case DeckPart::Kind::strip: {
        const Strip& strip = sharing.strips[part.index];
        return {strip.from, strip.to, strip.low, strip.high};
    }
    }
    return {};
}

/// Narrows a line to what of it lies over a piece with straight borders.
bool clip_to(const StripPiece& piece, Point a, Point b, double margin, double& from, double& to) {
    from = 0;
    to = 1;
    keep_positive(a.y - piece.from + margin, b.y - piece.from + margin, from, to);
    keep_positive(piece.to - a.y + margin, piece.to - b.y + margin, from, to);
    keep_positive(a.x - along_of(piece.low, piece, a.y) + margin,
                  b.x - along_of(piece.low, piece, b.y) + margin, from, to);
    keep_positive(along_of(piece.high, piece, a.y) - a.x + margin,
                  along_of(piece.high, piece, b.y) - b.x + margin, from, to);
    return to >= from;
}

/// Of a deck under lever or continuous, bays that are in no strip: those that no carrier crosses, and what
/// the drawing is off by, whose load goes to a point.
bool is_in_no_strip(const Bay& bay) {
    const bool bare = bay.low_carrier == none && bay.high_carrier == none;
    const bool sliver = bay.low_carrier != none && bay.low_station_from == bay.low_station_to;
    return bare || sliver;
}

} // namespace

DeckPartFinder::DeckPartFinder(const FramedLevel& level, const Sharing& sharing)
    : sharing_(&sharing), decks_(level.decks.size()), outlines_(outline_boxes(level)) {
    for (std::uint32_t i = 0; i < sharing.bays.size(); ++i) {
        const Bay& bay = sharing.bays[i];
        decks_[bay.deck].axes = bay.axes;
        if (level.decks[bay.deck].share == Share::half || is_in_no_strip(bay)) {
            decks_[bay.deck].parts.push_back({DeckPart::Kind::bay, i});
        }
    }
    for (std::uint32_t i = 0; i < sharing.strips.size(); ++i) {
        decks_[sharing.strips[i].deck].parts.push_back({DeckPart::Kind::strip, i});
    }
}

DeckPartFinder::PartsOfDeck& DeckPartFinder::parts_of(std::uint32_t deck) {
    PartsOfDeck& found = decks_[deck];
    if (!found.tree) {
        std::vector<Box> boxes;
        for (const DeckPart part : found.parts) {
            boxes.push_back(box_of(piece_of(*sharing_, part)));
        }
        found.tree.emplace(boxes);
    }
    return found;
}

std::vector<DeckPartFinder::Hit> DeckPartFinder::over(Point a, Point b, double margin) {
    std::vector<Hit> hits;
    std::vector<std::uint32_t> decks;
    std::vector<std::uint32_t> near;
    outlines_.find(box_of(a, b).grown(margin), decks);
    for (const std::uint32_t d : decks) {
        const PartsOfDeck& deck = parts_of(d);
        if (deck.parts.empty()) {
            continue;
        }
        const StripAxes& axes = sharing_->axes[deck.axes];
        const Point sa = axes.to_strip(a);
        const Point sb = axes.to_strip(b);
        deck.tree->find(box_of(sa, sb).grown(margin), near);
        for (const std::uint32_t k : near) {
            Hit hit;
            hit.part = deck.parts[k];
            if (clip_to(piece_of(*sharing_, hit.part), sa, sb, margin, hit.from, hit.to)) {
                hits.push_back(hit);
            }
        }
    }
    std::sort(hits.begin(), hits.end(), [](const Hit& l, const Hit& r) { return l.key() < r.key(); });
    return hits;
}

std::optional<DeckPart> DeckPartFinder::under(Point p, double margin) {
    const std::vector<Hit> hits = over(p, p, margin);
    return hits.empty() ? std::nullopt : std::optional(hits.front().part);
}

namespace {

/// Part of a load at (along, across) that goes to the bay's high carrier; the rest goes to the low one.
double part_of_high(const Bay& bay, Point p) {
    if (bay.low_carrier == none || bay.high_carrier == none) {
        return bay.high_carrier == none ? 0 : 1;
    }
    const double low = along_of(bay.low, piece_of(bay), p.y);
    const double high = along_of(bay.high, piece_of(bay), p.y);
    return high > low ? std::clamp((p.x - low) / (high - low), 0.0, 1.0) : 0.5;
}

double low_station(const Bay& bay, double across) {
    const double x = std::clamp((across - bay.from) / (bay.to - bay.from), 0.0, 1.0);
    return (1 - x) * bay.low_station_from + x * bay.low_station_to;
}

double high_station(const Bay& bay, double across) {
    const double x = std::clamp((across - bay.from) / (bay.to - bay.from), 0.0, 1.0);
    return (1 - x) * bay.high_station_from + x * bay.high_station_to;
}

/// A stretch of line load over a bay, in strip axes.
struct Stretch {
    const Bay& bay;
    Point a, b;
    double length;
    double w_a, w_b;
    std::uint32_t load_case;
    Source source;

    [[nodiscard]] double part(double t) const { return part_of_high(bay, between(a, b, t)); }
    [[nodiscard]] double w(double t) const { return (1 - t) * w_a + t * w_b; }
};

/// Force and first moment, in the stretch's parameter t, of part of a load.
struct Resultant {
    double force = 0;
    double moment = 0;

    /// Where it acts; for a force that cancels itself, the middle, which a point load cannot better.
    [[nodiscard]] double centre() const { return force != 0 ? std::clamp(moment / force, 0.0, 1.0) : 0.5; }
};

/// A stretch along the strips, to within `snap`, puts one point load on each carrier, where its part of the
/// load acts.
void put_points(const Stretch& s, Collector& collector) {
    // Gauss's rule of three points: exact up to the fifth power, and parts are all but linear along the
    // strips.
    const double apart = std::sqrt(0.6) / 2;
    const std::array<std::pair<double, double>, 3> rule{
        {{0.5 - apart, 5.0 / 18}, {0.5, 8.0 / 18}, {0.5 + apart, 5.0 / 18}}};
    Resultant whole;
    Resultant high;
    for (const auto& [t, weight] : rule) {
        const double w = weight * s.length * s.w(t);
        whole.force += w;
        whole.moment += w * t;
        high.force += w * s.part(t);
        high.moment += w * s.part(t) * t;
    }
    const auto put = [&](std::uint32_t carrier, bool is_high, const Resultant& part) {
        const double across = between(s.a, s.b, part.centre()).y;
        const double station = is_high ? high_station(s.bay, across) : low_station(s.bay, across);
        collector.put_point(carrier, none, {s.load_case, s.source, station, part.force});
    };
    if (s.bay.low_carrier == none || s.bay.high_carrier == none) {
        const bool is_high = s.bay.high_carrier != none;
        put(is_high ? s.bay.high_carrier : s.bay.low_carrier, is_high, whole);
        return;
    }
    put(s.bay.high_carrier, true, high);
    put(s.bay.low_carrier, false, {whole.force - high.force, whole.moment - high.moment});
}

/// `error`: what the quartic is off by, per length of the line.
void put_quartic(const Stretch& s, bool high, double from, double to, Quartic c, double error,
                 Collector& collector) {
    const double across_from = between(s.a, s.b, from).y;
    const double across_to = between(s.a, s.b, to).y;
    const double at_from = high ? high_station(s.bay, across_from) : low_station(s.bay, across_from);
    const double at_to = high ? high_station(s.bay, across_to) : low_station(s.bay, across_to);
    const std::uint32_t carrier = high ? s.bay.high_carrier : s.bay.low_carrier;
    const double stretch = std::abs(at_to - at_from);
    if (!(stretch > 0)) {
        const double force = s.length * (to - from) * (c[0] + c[1] / 2 + c[2] / 3 + c[3] / 4 + c[4] / 5);
        collector.put_point(carrier, none, {s.load_case, s.source, at_from, force});
        return;
    }
    const double rate = s.length * (to - from) / stretch; // per length of carrier
    for (double& k : c) {
        k *= rate;
    }
    collector.put_line(carrier, none, {s.load_case, s.source, line_between(at_from, at_to, c)}, error * rate);
}

/// A stretch across the strips puts a line on each carrier: w times the part, a polynomial where the carriers
/// are parallel, else a rational function that quartics replace.
void put_lines(const Stretch& s, double noise, Collector& collector) {
    const bool both = s.bay.low_carrier != none && s.bay.high_carrier != none;
    if (!both) {
        put_quartic(s, s.bay.high_carrier != none, 0, 1, {s.w_a, s.w_b - s.w_a, 0, 0, 0}, 0, collector);
        return;
    }
    const auto width = [&](Point p) {
        return along_of(s.bay.high, piece_of(s.bay), p.y) - along_of(s.bay.low, piece_of(s.bay), p.y);
    };
    QuarticFit fit;
    if (std::abs(width(s.a) - width(s.b)) <= noise) {
        const double w1 = s.w_b - s.w_a;
        const double f0 = s.part(0);
        const double f1 = s.part(1) - f0;
        fit.pieces.push_back({0, 0, 1, {s.w_a * f0, s.w_a * f1 + w1 * f0, w1 * f1, 0, 0}, 0});
    } else {
        fit = fit_quartics(1, [&](double t, std::span<double> value) { value.front() = s.w(t) * s.part(t); });
    }
    for (const QuarticFit::Piece& piece : fit.pieces) {
        put_quartic(s, true, piece.from, piece.to, piece.c, piece.error, collector);
        const Quartic rest{s.w(piece.from) - piece.c[0], s.w(piece.to) - s.w(piece.from) - piece.c[1],
                           -piece.c[2], -piece.c[3], -piece.c[4]};
        put_quartic(s, false, piece.from, piece.to, rest, piece.error, collector);
    }
}

void share_line_on_bay(const Sharing& sharing, const Bay& bay, Point a, Point b, double w_a, double w_b,
                       double snap, std::uint32_t load_case, Source source, Collector& collector) {
    if (bay.low_carrier == none && bay.high_carrier == none) {
        return; // an unsupported strip: an error already
    }
    const StripAxes& axes = sharing.axes[bay.axes];
    const Stretch stretch{bay,   axes.to_strip(a), axes.to_strip(b), distance(a, b), w_a, w_b, load_case,
                          source};
    if (std::abs(stretch.b.y - stretch.a.y) <= snap) {
        put_points(stretch, collector);
    } else {
        put_lines(stretch, collector.noise(), collector);
    }
}

void share_point_on_bay(const Sharing& sharing, const Bay& bay, Point at, double p, std::uint32_t load_case,
                        Source source, Collector& collector) {
    const Point q = sharing.axes[bay.axes].to_strip(at);
    const double high = part_of_high(bay, q);
    if (bay.high_carrier != none) {
        collector.put_point(bay.high_carrier, none, {load_case, source, high_station(bay, q.y), p * high});
    }
    if (bay.low_carrier != none) {
        collector.put_point(bay.low_carrier, none, {load_case, source, low_station(bay, q.y), p - p * high});
    }
}

} // namespace

void share_line(const Sharing& sharing, DeckPart part, Point a, Point b, double w_a, double w_b, double snap,
                std::uint32_t load_case, Source source, Collector& collector) {
    switch (part.kind) {
    case DeckPart::Kind::bay:
        share_line_on_bay(sharing, sharing.bays[part.index], a, b, w_a, w_b, snap, load_case, source,
                          collector);
        return;
    case DeckPart::Kind::strip:
        share_line_on_strip(sharing, part.index, a, b, w_a, w_b, snap, load_case, source, collector);
        return;
    }
}

void share_point(const Sharing& sharing, DeckPart part, Point at, double p, std::uint32_t load_case,
                 Source source, Collector& collector) {
    switch (part.kind) {
    case DeckPart::Kind::bay:
        share_point_on_bay(sharing, sharing.bays[part.index], at, p, load_case, source, collector);
        return;
    case DeckPart::Kind::strip:
        share_point_on_strip(sharing, part.index, at, p, load_case, source, collector);
        return;
    }
}

RUNNEL_NAMESPACE_END
