#include "deck/strip_beam.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <numeric>

RUNNEL_NAMESPACE_BEGIN

void StripBeam::set(std::span<const double> at) {
    const std::size_t n = at.size();
    at_.assign(at.begin(), at.end());
    span_.resize(n > 0 ? n - 1 : 0);
    collapsed_ = false;
    for (std::size_t i = 0; i + 1 < n; ++i) {
        span_[i] = at_[i + 1] - at_[i];
        collapsed_ = collapsed_ || !(span_[i] > 0);
    }
    passed_.assign(n, 0);
    pivot_.assign(n, 1);
    for (std::size_t i = 1; i + 1 < n && !collapsed_; ++i) {
        pivot_[i] = 2 * (span_[i - 1] + span_[i]) - span_[i - 1] * passed_[i - 1];
        passed_[i] = span_[i] / pivot_[i];
    }
    unload();
}

void StripBeam::unload() {
    simple_.assign(at_.size(), 0);
    term_.assign(at_.size(), 0);
    low_moment_ = 0;
    high_moment_ = 0;
}

std::size_t StripBeam::stretch_of(double at) const {
    return static_cast<std::size_t>(std::upper_bound(at_.begin(), at_.end(), at) - at_.begin());
}

void StripBeam::add_point(double at, double load) {
    add_in(stretch_of(at), at, load);
}

/// `stretch` 0 is the overhang below the first carrier, stretch i the span up to carrier i, the last the
/// overhang above.
void StripBeam::add_in(std::size_t stretch, double at, double load) {
    if (collapsed_) {
        simple_.front() += load; // dealt out in equal parts later
    } else if (stretch == 0) {
        simple_.front() += load;
        low_moment_ -= load * (at_.front() - at);
    } else if (stretch == at_.size()) {
        simple_.back() += load;
        high_moment_ -= load * (at - at_.back());
    } else {
        const double h = span_[stretch - 1];
        const double x = (at - at_[stretch - 1]) / h;
        const double to_high = load * x;
        simple_[stretch - 1] += load - to_high;
        simple_[stretch] += to_high;
        const double bent = to_high * (1 - x) * h * h;
        term_[stretch - 1] -= bent * (2 - x);
        term_[stretch] -= bent * (1 + x);
    }
}

void StripBeam::add_line(double from, double to, double w_from, double w_to) {
    if (!(to > from)) {
        return;
    }
    // Gauss's rule of three points is exact up to the fifth power: a span's parts have three, the load one.
    static const double apart = std::sqrt(0.6) / 2;
    static const std::array<std::pair<double, double>, 3> rule{
        {{0.5 - apart, 5.0 / 18}, {0.5, 8.0 / 18}, {0.5 + apart, 5.0 / 18}}};
    double start = from;
    for (std::size_t stretch = stretch_of(from); start < to; ++stretch) {
        const double end = stretch < at_.size() ? std::min(to, at_[stretch]) : to;
        for (const auto& [x, weight] : rule) {
            const double at = (1 - x) * start + x * end;
            const double t = (at - from) / (to - from);
            add_in(stretch, at, weight * (end - start) * ((1 - t) * w_from + t * w_to));
        }
        start = end;
    }
}

void StripBeam::reactions(std::span<double> taken) {
    const std::size_t n = at_.size();
    if (collapsed_ || n < 2) {
        const double force = std::accumulate(simple_.begin(), simple_.end(), 0.0);
        std::fill(taken.begin(), taken.end(), force / static_cast<double>(n));
        return;
    }
    moment_.resize(n);
    moment_.front() = low_moment_;
    moment_.back() = high_moment_;
    for (std::size_t i = 1; i + 1 < n; ++i) { // forwards
        moment_[i] = (term_[i] - span_[i - 1] * moment_[i - 1]) / pivot_[i];
    }
    for (std::size_t i = n - 1; i-- > 1;) { // back
        moment_[i] -= passed_[i] * moment_[i + 1];
    }
    std::copy(simple_.begin(), simple_.end(), taken.begin());
    for (std::size_t i = 0; i + 1 < n; ++i) {
        const double couple = (moment_[i + 1] - moment_[i]) / span_[i];
        taken[i] += couple;
        taken[i + 1] -= couple;
    }
}

RUNNEL_NAMESPACE_END
