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

CarrierWindow window_around(const StripAtLevels& strip, double from, double to, double level) {
    constexpr double worth_counting = 1e-18;
    const std::size_t n = strip.size();
    const std::size_t below = strip.carriers_below(from, level);
    std::size_t first = below == 0 ? 0 : below - 1;
    std::size_t end = std::min(strip.carriers_below(to, level), n - 1);
    const auto span = [&](std::size_t i) { return strip.along(i + 1, level) - strip.along(i, level); };
    // A moment at one end of a span comes to its other end by no more than h / (2 h + 1.5 h'), h' being the
    // span behind it, since that in turn passes on no more than a half.
    double left = 1;
    while (first > 0 && left > worth_counting) {
        --first;
        const double h = span(first);
        left *= first == 0 || !(h > 0) ? 0.5 : h / (2 * h + 1.5 * span(first - 1));
    }
    left = 1;
    while (end + 1 < n && left > worth_counting) {
        const double h = span(end);
        ++end;
        left *= end + 1 == n || !(h > 0) ? 0.5 : h / (2 * h + 1.5 * span(end));
    }
    return {first, end + 1};
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
