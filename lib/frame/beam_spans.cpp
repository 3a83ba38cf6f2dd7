#include "frame/beam_spans.hpp"

#include <cmath>
#include <limits>

RUNNEL_NAMESPACE_BEGIN

namespace {

using SpanBetween = BeamSpans::SpanBetween;
using Ends = BeamSpans::Ends;
using Stretch = BeamSpans::Stretch;

/// Stations closer than this part of the length are one: they differ by rounding only.
constexpr double same_station = 64 * std::numeric_limits<double>::epsilon();

double cube(double x) {
    return x * x * x;
}

/// How far a hinge at distances a and b from the span's ends would gape, if its two arms were rigid.
double gap_of(const Ends& ends, double a, double b) {
    return (ends.move_to - ends.turn_to * b) - (ends.move_from + ends.turn_from * a);
}

/// Stiffness of a span against the turns of its ends: no hinge 4, 2, 4 EI / l; one hinge, 3 EI / (a3 + b3)
/// against its gap; two hinges, nothing.
void set_stiffness(SpanBetween& span) {
    if (span.hinges.empty()) {
        const double k = span.rigidity / span.length;
        span.near_from = 4 * k;
        span.shared = 2 * k;
        span.near_to = 4 * k;
        span.determinant = 12 * k * k;
    } else if (span.hinges.size() == 1) {
        const double a = span.hinges[0];
        const double b = span.length - a;
        const double k = 3 * span.rigidity / (cube(a) + cube(b));
        span.near_from = k * a * a;
        span.shared = k * a * b;
        span.near_to = k * b * b;
        span.determinant = 0;
    }
}

/// Moments on the ends' turns when the ends are as given.
std::array<double, 2> moments_on_turns(const SpanBetween& span, const Ends& ends) {
    if (span.hinges.empty()) {
        const double k = span.rigidity / span.length;
        const double chord = (ends.move_to - ends.move_from) / span.length;
        return {k * (4 * ends.turn_from + 2 * ends.turn_to - 6 * chord),
                k * (2 * ends.turn_from + 4 * ends.turn_to - 6 * chord)};
    }
    if (span.hinges.size() == 1) {
        const double a = span.hinges[0];
        const double b = span.length - a;
        const double force = 3 * span.rigidity / (cube(a) + cube(b)) * gap_of(ends, a, b);
        return {-force * a, -force * b};
    }
    return {0, 0};
}

void add_stretches(const SpanBetween& span, const Ends& ends, std::vector<Stretch>& shape) {
    const double l = span.length;
    if (span.hinges.empty()) { // Hermite's cubic
        const double chord = (ends.move_to - ends.move_from) / l;
        shape.push_back({span.from,
                         {ends.move_from, ends.turn_from, (3 * chord - 2 * ends.turn_from - ends.turn_to) / l,
                          (ends.turn_from + ends.turn_to - 2 * chord) / (l * l)}});
        return;
    }
    const double a = span.hinges.front();
    const double b = l - span.hinges.back();
    if (span.hinges.size() == 1) { // two cantilevers with one force at their tips
        const double g = gap_of(ends, a, b) / (2 * (cube(a) + cube(b)));
        shape.push_back({span.from, {ends.move_from, ends.turn_from, 3 * g * a, -g}});
        shape.push_back(
            {span.from + a,
             {ends.move_to - ends.turn_to * b - 2 * g * cube(b), ends.turn_to + 3 * g * b * b, 0, -g}});
        return;
    }
    // Two straight arms, and a straight piece hung between them.
    const double from = ends.move_from + ends.turn_from * a;
    const double to = ends.move_to - ends.turn_to * b;
    shape.push_back({span.from, {ends.move_from, ends.turn_from, 0, 0}});
    shape.push_back({span.from + a, {from, (to - from) / (l - a - b), 0, 0}});
    shape.push_back({span.from + l - b, {to, ends.turn_to, 0, 0}});
}

} // namespace

std::optional<BeamSpans> BeamSpans::of(const Beam& beam) {
    BeamSpans spans;
    if (!spans.place_hinges(beam)) {
        return std::nullopt;
    }
    spans.number_turns();
    if (!spans.eliminate()) {
        return std::nullopt;
    }
    return spans;
}

/// Bearings and spans, each hinge in its span or over its bearing. False where that alone leaves a part free.
bool BeamSpans::place_hinges(const Beam& beam) {
    const double noise = same_station * beam.length;
    for (const BeamSupport& support : beam.supports) {
        if (!stations_.empty() && !(support.station - stations_.back() > noise)) {
            return false;
        }
        if (!stations_.empty()) {
            SpanBetween span;
            span.from = stations_.back();
            span.length = support.station - span.from;
            span.rigidity = beam.span_stiffness.empty() ? 1 : beam.span_stiffness[spans_.size()];
            spans_.push_back(span);
        }
        stations_.push_back(support.station);
        held_.push_back(support.turn_held);
        parted_.push_back(false);
    }
    if (stations_.empty()) {
        return false;
    }
    for (const double hinge : beam.hinges) {
        const bool at_start = hinge <= noise;
        const bool at_end = hinge >= beam.length - noise;
        std::size_t next = 0; // the first bearing that is not before the hinge
        while (next < stations_.size() && stations_[next] < hinge - noise) {
            ++next;
        }
        if (next < stations_.size() && stations_[next] <= hinge + noise) {
            // Over the first or the last bearing it lets an overhang fall.
            const bool first_or_last = next == 0 || next + 1 == stations_.size();
            if (first_or_last && !at_start && !at_end) {
                return false;
            }
            parted_[next] = true;
            held_[next] = false;
        } else if (next == 0 || next == stations_.size()) {
            if (!at_start && !at_end) {
                return false; // the tip of an overhang falls
            }
        } else {
            std::vector<double>& hinges = spans_[next - 1].hinges;
            if (!hinges.empty() && !(hinge - spans_[next - 1].from - hinges.back() > noise)) {
                continue; // twice the same
            }
            hinges.push_back(hinge - spans_[next - 1].from);
            if (hinges.size() > 2) {
                return false;
            }
        }
    }
    return !spans_.empty() || held_.front();
}

/// One unknown for each turn that is not held, two where a hinge parts the beam over a bearing.
void BeamSpans::number_turns() {
    std::uint32_t next = 0;
    for (std::size_t s = 0; s < spans_.size(); ++s) {
        set_stiffness(spans_[s]);
        if (!held_[s]) {
            const bool goes_on = s > 0 && !parted_[s];
            spans_[s].turn_from = goes_on ? spans_[s - 1].turn_to : next++;
        }
        if (!held_[s + 1]) {
            spans_[s].turn_to = next++;
        }
    }
    pivots_.assign(next, 0.0);
}

/// L D L^T from the first turn to the last. What a turn finds on its left is carried over as a stiffness:
/// (determinant + near_to x left) / (near_from + left), where the plain pivot near_to - shared^2 / (near_from
/// + left) would cancel.
bool BeamSpans::eliminate() {
    for (const SpanBetween& span : spans_) {
        double carried = span.near_to;
        if (span.turn_from != known) {
            double& pivot = pivots_[span.turn_from];
            const double left = pivot; // what the spans before have left there
            pivot = left + span.near_from;
            if (!(pivot > 0)) {
                return false;
            }
            carried = (span.determinant + span.near_to * left) / pivot;
        }
        if (span.turn_to != known) {
            pivots_[span.turn_to] = carried;
        }
    }
    for (const double pivot : pivots_) {
        if (!(pivot > 0)) {
            return false;
        }
    }
    return true;
}

std::vector<double> BeamSpans::turns_for(const std::vector<Ends>& imposed) const {
    std::vector<double> turns(pivots_.size(), 0.0);
    for (std::size_t s = 0; s < spans_.size(); ++s) {
        const auto moments = moments_on_turns(spans_[s], imposed[s]);
        if (spans_[s].turn_from != known) {
            turns[spans_[s].turn_from] -= moments[0];
        }
        if (spans_[s].turn_to != known) {
            turns[spans_[s].turn_to] -= moments[1];
        }
    }
    for (const SpanBetween& span : spans_) {
        if (span.turn_from != known && span.turn_to != known) {
            turns[span.turn_to] -= span.shared / pivots_[span.turn_from] * turns[span.turn_from];
        }
    }
    for (std::size_t i = 0; i < turns.size(); ++i) {
        turns[i] /= pivots_[i];
    }
    for (std::size_t s = spans_.size(); s-- > 0;) {
        const SpanBetween& span = spans_[s];
        if (span.turn_from != known && span.turn_to != known) {
            turns[span.turn_from] -= span.shared / pivots_[span.turn_from] * turns[span.turn_to];
        }
    }
    return turns;
}

std::vector<Stretch> BeamSpans::shape(std::size_t support, bool turned) const {
    std::vector<Ends> ends(spans_.size());
    if (support > 0) {
        (turned ? ends[support - 1].turn_to : ends[support - 1].move_to) = 1;
    }
    if (support < spans_.size()) {
        (turned ? ends[support].turn_from : ends[support].move_from) = 1;
    }
    const std::vector<double> turns = turns_for(ends);
    for (std::size_t s = 0; s < spans_.size(); ++s) {
        if (spans_[s].turn_from != known) {
            ends[s].turn_from = turns[spans_[s].turn_from];
        }
        if (spans_[s].turn_to != known) {
            ends[s].turn_to = turns[spans_[s].turn_to];
        }
    }
    // Beyond the bearings the unloaded beam is straight. On one bearing, built in, it moves or turns as a
    // whole.
    Ends single;
    (turned ? single.turn_from : single.move_from) = 1;
    single.turn_to = single.turn_from;
    single.move_to = single.move_from;
    const Ends& first = ends.empty() ? single : ends.front();
    const Ends& last = ends.empty() ? single : ends.back();
    std::vector<Stretch> shape;
    shape.push_back({0, {first.move_from - first.turn_from * stations_.front(), first.turn_from, 0, 0}});
    for (std::size_t s = 0; s < spans_.size(); ++s) {
        add_stretches(spans_[s], ends[s], shape);
    }
    shape.push_back({stations_.back(), {last.move_to, last.turn_to, 0, 0}});
    return shape;
}

RUNNEL_NAMESPACE_END
