#include <runnel/line_piece.hpp>

RUNNEL_NAMESPACE_BEGIN

double LinePiece::at(double station) const noexcept {
    const double s = station - from;
    return c[0] + s * (c[1] + s * (c[2] + s * (c[3] + s * c[4])));
}

double LinePiece::total() const noexcept {
    const double l = to - from;
    return l * (c[0] + l * (c[1] / 2 + l * (c[2] / 3 + l * (c[3] / 4 + l * c[4] / 5))));
}

double LinePiece::first_moment() const noexcept {
    const double l = to - from;
    return l * l * (c[0] / 2 + l * (c[1] / 3 + l * (c[2] / 4 + l * (c[3] / 5 + l * c[4] / 6))));
}

LinePiece LinePiece::between(double station_from, double station_to) const noexcept {
    const double h = station_from - from;
    LinePiece part;
    part.from = station_from;
    part.to = station_to;
    // Taylor shift by repeated synthetic division (Horner's scheme).
    part.c = c;
    for (std::size_t i = 0; i + 1 < part.c.size(); ++i) {
        for (std::size_t k = part.c.size() - 1; k-- > i;) {
            part.c[k] += h * part.c[k + 1];
        }
    }
    return part;
}

RUNNEL_NAMESPACE_END
