#include "frame/beam.hpp"

#include "frame/beam_spans.hpp"

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Integrals of w (s - from)^k over a piece, k = 0 to 3.
std::array<double, 4> moments_of(const LinePiece& piece) {
    const double l = piece.to - piece.from;
    std::array<double, 4> moments{};
    double power = l;
    for (std::size_t k = 0; k < moments.size(); ++k) {
        double sum = 0;
        for (std::size_t i = piece.c.size(); i-- > 0;) {
            sum = sum * l + piece.c[i] / static_cast<double>(i + k + 1);
        }
        moments[k] = power * sum;
        power *= l;
    }
    return moments;
}

} // namespace

std::optional<BeamInfluence> BeamInfluence::of(const Beam& beam) {
    const std::optional<BeamSpans> spans = BeamSpans::of(beam);
    if (!spans) {
        return std::nullopt;
    }
    BeamInfluence influence;
    influence.supports_ = beam.supports.size();
    const auto add_line_of = [&](const std::vector<BeamSpans::Stretch>& shape) {
        const bool first = influence.starts_.empty();
        for (const BeamSpans::Stretch& stretch : shape) {
            influence.shapes_.push_back(stretch.cubic);
            if (first) {
                influence.starts_.push_back(stretch.from);
            }
        }
    };
    for (std::size_t i = 0; i < influence.supports_; ++i) {
        add_line_of(spans->moved(i));
    }
    for (std::size_t i = 0; i < influence.supports_; ++i) {
        if (spans->held(i)) {
            influence.held_.push_back(i);
            add_line_of(spans->turned(i));
        }
    }
    return influence;
}

std::size_t BeamInfluence::element_at(double station) const {
    const auto after = std::upper_bound(starts_.begin() + 1, starts_.end(), station);
    return static_cast<std::size_t>(after - starts_.begin()) - 1;
}

void BeamInfluence::add_moments(std::size_t element, double station,
                                const std::array<double, 4>& load_moments, std::span<double> reactions,
                                std::span<double> moments) const {
    const std::size_t elements = starts_.size();
    const double h = station - starts_[element];
    const auto effect_of = [&](std::size_t line) {
        const Cubic& c = shapes_[line * elements + element];
        // Taylor coefficients at the load's start, times the load's moments about it.
        return load_moments[0] * (c[0] + h * (c[1] + h * (c[2] + h * c[3]))) +
               load_moments[1] * (c[1] + h * (2 * c[2] + h * 3 * c[3])) +
               load_moments[2] * (c[2] + 3 * h * c[3]) + load_moments[3] * c[3];
    };
    for (std::size_t i = 0; i < supports_; ++i) {
        reactions[i] += effect_of(i);
    }
    for (std::size_t i = 0; i < held_.size(); ++i) {
        moments[held_[i]] += effect_of(supports_ + i);
    }
}

void BeamInfluence::add_point(double station, double p, std::span<double> reactions,
                              std::span<double> moments) const {
    add_moments(element_at(station), station, {p, 0, 0, 0}, reactions, moments);
}

void BeamInfluence::add_line(const LinePiece& piece, std::span<double> reactions,
                             std::span<double> moments) const {
    double from = piece.from;
    for (std::size_t element = element_at(piece.from); from < piece.to; ++element) {
        const bool last = element + 1 >= starts_.size();
        const double to = last ? piece.to : std::min(piece.to, starts_[element + 1]);
        if (to > from) {
            const bool whole = from == piece.from && to == piece.to;
            add_moments(element, from, moments_of(whole ? piece : piece.between(from, to)), reactions,
                        moments);
        }
        from = std::max(from, to);
    }
}

RUNNEL_NAMESPACE_END
