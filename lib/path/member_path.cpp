#include "path/member_path.hpp"

#include <algorithm>
#include <cmath>
#include <tuple>

RUNNEL_NAMESPACE_BEGIN

namespace {

auto key_of(const ReactionColumn& column) {
    return std::tuple(column.load_case, column.span, column.source.kind, column.source.index);
}

bool is_lever(const FramedMember& member, std::span<const Bearing> bearings) {
    return bearings.size() == 2 && member.hinges.empty() && !bearings[0].fixed && !bearings[1].fixed;
}

bool same(const Beam& a, const Beam& b) {
    const auto same_support = [](const BeamSupport& s, const BeamSupport& t) {
        return s.station == t.station && s.turn_held == t.turn_held;
    };
    return a.length == b.length && a.hinges == b.hinges &&
           std::equal(a.supports.begin(), a.supports.end(), b.supports.begin(), b.supports.end(),
                      same_support);
}

/// The member as a beam; a hinge within `snap` of a bearing or an end is at it.
Beam beam_of(const FramedMember& member, std::span<const Bearing> bearings, double snap) {
    Beam beam;
    beam.length = member.length;
    for (const Bearing& bearing : bearings) {
        beam.supports.push_back({bearing.station, bearing.fixed});
    }
    for (double hinge : member.hinges) {
        for (const double end : {0.0, member.length}) {
            hinge = std::abs(hinge - end) <= snap ? end : hinge;
        }
        for (const Bearing& bearing : bearings) {
            hinge = std::abs(hinge - bearing.station) <= snap ? bearing.station : hinge;
        }
        beam.hinges.push_back(hinge);
    }
    return beam;
}

} // namespace

void push_spans(const FramedMember& member, std::span<const Bearing> bearings, double snap,
                Grouped<Span>& spans) {
    if (!bearings.empty() && bearings.front().station > snap) {
        spans.push({0, bearings.front().station, true});
    }
    for (std::size_t b = 0; b + 1 < bearings.size(); ++b) {
        spans.push({bearings[b].station, bearings[b + 1].station, false});
    }
    if (!bearings.empty() && member.length - bearings.back().station > snap) {
        spans.push({bearings.back().station, member.length, true});
    }
    spans.end_group();
}

std::uint32_t span_at(std::span<const Span> spans, double last_bearing, double station, double noise) {
    const bool at_last = std::abs(station - last_bearing) <= noise;
    std::uint32_t span = 0;
    while (span + 1 < spans.size()) {
        const double end = spans[span].to;
        if (station < end - noise || (at_last && std::abs(end - last_bearing) <= noise)) {
            break;
        }
        ++span;
    }
    return span;
}

bool holds_falling(const FramedMember& member, std::span<const Bearing> bearings, std::size_t b) {
    if (bearings.size() > 1) {
        return b + 1 == bearings.size();
    }
    return bearings[b].station > member.length / 2;
}

int degree_of_indeterminacy(const FramedMember& member, std::span<const Bearing> bearings, double snap) {
    int unknowns = 0;
    for (const Bearing& bearing : bearings) {
        unknowns += bearing.fixed ? 2 : 1;
    }
    int equations = 2;
    for (const double hinge : member.hinges) {
        const bool at_free_end =
            (hinge <= snap && !(bearings.front().fixed && bearings.front().station <= snap)) ||
            (hinge >= member.length - snap &&
             !(bearings.back().fixed && bearings.back().station >= member.length - snap));
        equations += at_free_end ? 0 : 1;
    }
    return unknowns - equations;
}

bool MemberPath::work_out(const FramedMember& member, std::span<const Bearing> bearings,
                          std::span<const Span> spans, std::span<const CarrierLine> lines,
                          std::span<const CarrierPoint> points) {
    columns_.clear();
    reactions_.clear();
    moments_.clear();
    if (bearings.empty() || spans.empty()) {
        return false;
    }
    cut_at_spans(spans, bearings.back().station, lines, points);
    if (is_lever(member, bearings)) {
        if (!(bearings[1].station - bearings[0].station > noise_)) {
            return false;
        }
        add_lever(bearings, lines, points);
        return true;
    }
    if (!prepare_influence(member, bearings)) {
        return false;
    }
    add_influence(bearings.size(), lines, points);
    return true;
}

/// A border of spans within rounding of a load's end does not cut it: no columns of nothing.
void MemberPath::cut_at_spans(std::span<const Span> spans, double last_bearing,
                              std::span<const CarrierLine> lines, std::span<const CarrierPoint> points) {
    parts_.clear();
    for (std::uint32_t i = 0; i < lines.size(); ++i) {
        const CarrierLine& line = lines[i];
        double from = line.piece.from;
        for (std::uint32_t span = 0; span < spans.size() && from < line.piece.to; ++span) {
            const bool last = span + 1 == spans.size() || !(spans[span].to < line.piece.to - noise_);
            if (!last && spans[span].to <= from + noise_) {
                continue;
            }
            const double to = last ? line.piece.to : spans[span].to;
            parts_.push_back({{line.load_case, span, line.source}, i, false, from, to});
            from = to;
        }
    }
    for (std::uint32_t i = 0; i < points.size(); ++i) {
        const CarrierPoint& point = points[i];
        const std::uint32_t span = span_at(spans, last_bearing, point.station, noise_);
        parts_.push_back({{point.load_case, span, point.source}, i, true, 0, 0});
    }
    const auto before = [](const Part& a, const Part& b) { return key_of(a.column) < key_of(b.column); };
    if (!std::is_sorted(parts_.begin(), parts_.end(), before)) {
        std::stable_sort(parts_.begin(), parts_.end(), before);
    }
}

std::size_t MemberPath::column_for(const Part& part, std::size_t bearings, bool held) {
    if (columns_.empty() || key_of(columns_.back()) != key_of(part.column)) {
        columns_.push_back(part.column);
        reactions_.resize(reactions_.size() + bearings, 0.0);
        if (held) {
            moments_.resize(moments_.size() + bearings, 0.0);
        }
    }
    return columns_.size() - 1;
}

void MemberPath::add_lever(std::span<const Bearing> bearings, std::span<const CarrierLine> lines,
                           std::span<const CarrierPoint> points) {
    const double first = bearings[0].station;
    const double second = bearings[1].station;
    const double span = second - first;
    for (const Part& part : parts_) {
        double force = 0;
        double moment = 0; // about `at`
        double at = 0;
        if (part.is_point) {
            force = points[part.index].p;
            at = points[part.index].station;
        } else {
            const LinePiece& whole = lines[part.index].piece;
            const bool cut = part.from != whole.from || part.to != whole.to;
            const LinePiece piece = cut ? whole.between(part.from, part.to) : whole;
            force = piece.total();
            moment = piece.first_moment();
            at = piece.from;
        }
        const std::size_t column = column_for(part, 2, false);
        double* const reactions = reactions_.data() + 2 * column;
        reactions[0] += (force * (second - at) - moment) / span;
        reactions[1] += (force * (at - first) + moment) / span;
    }
}

void MemberPath::add_influence(std::size_t bearings, std::span<const CarrierLine> lines,
                               std::span<const CarrierPoint> points) {
    const bool held = std::any_of(beam_.supports.begin(), beam_.supports.end(),
                                  [](const BeamSupport& support) { return support.turn_held; });
    for (const Part& part : parts_) {
        const std::size_t column = column_for(part, bearings, held);
        const auto row = [&](std::vector<double>& values) {
            return values.empty() ? std::span<double>{}
                                  : std::span<double>(values).subspan(column * bearings, bearings);
        };
        if (part.is_point) {
            influence_->add_point(points[part.index].station, points[part.index].p, row(reactions_),
                                  row(moments_));
            continue;
        }
        const LinePiece& whole = lines[part.index].piece;
        const bool cut = part.from != whole.from || part.to != whole.to;
        influence_->add_line(cut ? whole.between(part.from, part.to) : whole, row(reactions_), row(moments_));
    }
}

bool MemberPath::prepare_influence(const FramedMember& member, std::span<const Bearing> bearings) {
    Beam beam = beam_of(member, bearings, snap_);
    if (!influence_ || !same(beam, beam_)) {
        influence_ = BeamInfluence::of(beam);
        beam_ = std::move(beam);
    }
    return influence_.has_value();
}

RUNNEL_NAMESPACE_END
