#include "load/strip_loads_window.hpp"

#include <algorithm>

RUNNEL_NAMESPACE_BEGIN

std::size_t StripAtLevels::carriers_below(double place, double level) const {
    std::size_t low = 0;
    std::size_t high = carriers_.size();
    while (low < high) {
        const std::size_t middle = (low + high) / 2;
        if (along(middle, level) <= place) {
            low = middle + 1;
        } else {
            high = middle;
        }
    }
    return low;
}

namespace {

/// No more than this part of a moment at one end of a span of length `h` comes to its other end, where a span
/// `next` is, and one `then` behind that; 0: none.
double most_carried_over(double h, double next, double then) {
    if (!(h > 0) || !(next > 0)) {
        return 0.5;
    }
    const double in_next = then > 0 ? next / (2 * next + 1.5 * then) : 0.5;
    return h / (2 * h + (2 - in_next) * next);
}

} // namespace

CarrierWindow window_around(const StripAtLevels& strip, double from, double to, double level) {
    constexpr double worth_counting = 1e-13;
    const std::size_t n = strip.size();
    const std::size_t below = strip.carriers_below(from, level);
    std::size_t first = below == 0 ? 0 : below - 1;
    std::size_t last = std::min(strip.carriers_below(to, level), n - 1);
    // span(i) goes from carrier i to the next; there is none past the ends
    const auto span = [&](std::size_t i) {
        return i + 1 < n ? strip.along(i + 1, level) - strip.along(i, level) : 0;
    };
    // A load bends a strip over a carrier by no more than 0.2 of it times its span (Pab (l + b) / 2 l^2 with
    // the far end free), or by all of it times its overhang.
    constexpr double in_span = 0.2;
    double bent = std::max(strip.along(first, level) - from, to - strip.along(last, level));
    for (std::size_t i = first; i < last; ++i) {
        bent = std::max(bent, in_span * span(i));
    }
    // What the carriers beyond take of a moment is about that moment over their spans.
    double moment = bent;
    while (first > 0) {
        const double h = span(--first);
        if (!(moment > worth_counting * h)) {
            break;
        }
        moment *= most_carried_over(h, first > 0 ? span(first - 1) : 0, first > 1 ? span(first - 2) : 0);
    }
    moment = bent;
    while (last + 1 < n) {
        const double h = span(last++);
        if (!(moment > worth_counting * h)) {
            break;
        }
        moment *= most_carried_over(h, span(last), span(last + 1));
    }
    return {first, last + 1};
}

void set_beam(StripBeam& beam, const StripAtLevels& strip, const CarrierWindow& window, double level,
              std::vector<double>& places) {
    places.clear();
    for (std::size_t i = window.first; i < window.last; ++i) {
        places.push_back(strip.along(i, level));
    }
    beam.set(places);
}

RUNNEL_NAMESPACE_END
