#include "geometry/line_pieces.hpp"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <limits>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// A polynomial of degree four, moved along and summed, loses some tens of ulps of its largest term.
constexpr double rounding = 64 * std::numeric_limits<double>::epsilon();

bool comes_before(const LinePiece& a, const LinePiece& b) {
    if (a.from != b.from) {
        return a.from < b.from;
    }
    if (a.to != b.to) {
        return a.to < b.to;
    }
    return a.c < b.c;
}

/// The first station of each cluster, rising. Measured from the first, so that a cluster cannot creep.
std::vector<double> clusters_of(const std::vector<LinePiece>& pieces, double noise) {
    std::vector<double> stations;
    stations.reserve(2 * pieces.size());
    for (const LinePiece& piece : pieces) {
        stations.push_back(piece.from);
        stations.push_back(piece.to);
    }
    std::sort(stations.begin(), stations.end());
    std::size_t kept = 0;
    for (const double station : stations) {
        if (kept == 0 || station - stations[kept - 1] > noise) {
            stations[kept++] = station;
        }
    }
    stations.resize(kept);
    return stations;
}

std::size_t cluster_of(const std::vector<double>& clusters, double station) {
    const auto after = std::upper_bound(clusters.begin(), clusters.end(), station);
    return static_cast<std::size_t>(after - clusters.begin()) - 1;
}

/// Bound of |w| over a distance `reach` on both sides of the piece's start.
double size_over(const LinePiece& piece, double reach) {
    double size = 0;
    double power = 1;
    for (const double c : piece.c) {
        size += std::abs(c) * power;
        power *= reach;
    }
    return size;
}

/// Force and first moment about a station.
struct Resultant {
    double force = 0;
    double moment = 0;
};

Resultant resultant_of(const LinePiece& piece, double station) {
    const double force = piece.total();
    return {force, piece.first_moment() + force * (piece.from - station)};
}

Resultant operator+(const Resultant& a, const Resultant& b) {
    return {a.force + b.force, a.moment + b.moment};
}

/// Gives a piece this resultant (about its start) by the linear load that makes up the difference. Where that
/// is rounding, an even load stays even.
void set_resultant(LinePiece& piece, const Resultant& wanted) {
    const double l = piece.to - piece.from;
    const double force = wanted.force - piece.total();
    const double moment = wanted.moment - piece.first_moment();
    const double noise = rounding * size_over(piece, l) * l;
    if (std::abs(force) > noise || std::abs(moment) > noise * l) {
        piece.c[0] += (4 * force - 6 * moment / l) / l;
        piece.c[1] += (12 * moment / l - 6 * force) / (l * l);
    }
}

/// Bound of how far the ordinates of two pieces are apart over the second one.
double apart(const LinePiece& changed, const LinePiece& piece) {
    LinePiece difference = changed.between(piece.from, piece.to);
    for (std::size_t k = 0; k < piece.c.size(); ++k) {
        difference.c[k] -= piece.c[k];
    }
    return size_over(difference, piece.to - piece.from);
}

struct Stretch {
    std::size_t from = 0, to = 0; ///< clusters
    LinePiece piece;
    double moved = 0; ///< bound of what its ordinates changed by
};

/// A piece of the sum with bounds of what its ordinates changed by: where ends moved by noise, and where
/// neighbours were joined.
struct Summed {
    LinePiece piece;
    double moved = 0;
    double joined = 0;
};

/// The piece stretched to other ends, its force and moment kept: a short steep piece would otherwise gain or
/// lose what its ends move.
LinePiece moved_to(const LinePiece& piece, double from, double to) {
    LinePiece moved = piece;
    moved.from = from;
    moved.to = to;
    const double rate = (piece.to - piece.from) / (to - from);
    double scale = rate;
    for (double& c : moved.c) {
        c *= scale;
        scale *= rate;
    }
    set_resultant(moved, resultant_of(piece, from));
    return moved;
}

/// The pieces between clusters, none changed in force and moment; what is too short to reach from one to the
/// next is left over.
std::vector<Stretch> stretches_of(const std::vector<LinePiece>& pieces, const std::vector<double>& clusters,
                                  std::vector<LinePiece>& left_over) {
    std::vector<Stretch> stretches;
    stretches.reserve(pieces.size());
    for (const LinePiece& piece : pieces) {
        Stretch stretch{cluster_of(clusters, piece.from), cluster_of(clusters, piece.to), piece, 0};
        if (stretch.from >= stretch.to) {
            left_over.push_back(piece);
            continue;
        }
        const double from = clusters[stretch.from];
        const double to = clusters[stretch.to];
        if (from != piece.from || to != piece.to) {
            stretch.piece = moved_to(piece, from, to);
            stretch.moved = apart(stretch.piece, piece);
        }
        stretches.push_back(stretch);
    }
    std::stable_sort(stretches.begin(), stretches.end(),
                     [](const Stretch& a, const Stretch& b) { return a.from < b.from; });
    return stretches;
}

bool is_nothing(const LinePiece& piece) {
    return std::all_of(piece.c.begin(), piece.c.end(), [](double c) { return c == 0; });
}

/// Whether a piece continues the other as the same polynomial, to rounding, and where they may differ because
/// a border moved by noise: by the force on a strip as narrow as that.
bool continues(const LinePiece& longer, const LinePiece& shorter, double reach, double own, double noise) {
    constexpr double fitted = 16; // set_resultant at most multiplies a strip's intensity by 4 + 12
    const LinePiece continued = longer.between(shorter.from, shorter.to);
    const double length = shorter.to - shorter.from;
    const double size = std::max(size_over(longer, reach), size_over(shorter, reach));
    const double allowed = rounding * size + fitted * noise / length * own;
    double power = 1;
    for (std::size_t k = 0; k < continued.c.size(); ++k) {
        if (!(std::abs(continued.c[k] - shorter.c[k]) * power <= allowed)) {
            return false;
        }
        power *= length;
    }
    return true;
}

/// One polynomial for both, where they are the same: that of the longer piece, since to continue a short one
/// far would blow up its rounding; force and moment stay those of both. Noise is coarse far from the origin
/// and on short pieces, so what all joins of a piece change is limited besides.
bool join(Summed& left, const Summed& right, double noise) {
    if (left.piece.to != right.piece.from) {
        return false;
    }
    constexpr double most = 1e-9; // of the ordinates: as far as a fitted curve may be off
    const double left_length = left.piece.to - left.piece.from;
    const double right_length = right.piece.to - right.piece.from;
    const bool left_leads = left_length >= right_length;
    // What a moved border does counts by what stands on the pieces themselves, not by how far they would
    // reach.
    const double own = std::max(size_over(left.piece, left_length), size_over(right.piece, right_length));
    const LinePiece& longer = left_leads ? left.piece : right.piece;
    const LinePiece& shorter = left_leads ? right.piece : left.piece;
    if (!continues(longer, shorter, left_length + right_length, own, noise)) {
        return false;
    }
    LinePiece whole = longer.between(left.piece.from, right.piece.to);
    set_resultant(whole, resultant_of(left.piece, whole.from) + resultant_of(right.piece, whole.from));
    const double joined =
        std::max(left.joined + apart(whole, left.piece), right.joined + apart(whole, right.piece));
    if (!(joined <= most * own)) {
        return false;
    }
    left = {whole, std::max(left.moved, right.moved), joined};
    return true;
}

/// Adds a piece too short to stand by itself to the longer of its neighbours, with its force and moment.
void absorb(std::vector<Summed>& sums, const LinePiece& sliver) {
    const auto after =
        std::upper_bound(sums.begin(), sums.end(), sliver.from,
                         [](double station, const Summed& sum) { return station < sum.piece.from; });
    auto chosen = after == sums.begin() ? after : after - 1;
    if (after != sums.end() && after->piece.from == chosen->piece.to &&
        after->piece.to - after->piece.from > chosen->piece.to - chosen->piece.from) {
        chosen = after;
    }
    const LinePiece before = chosen->piece;
    set_resultant(chosen->piece, resultant_of(before, before.from) + resultant_of(sliver, before.from));
    chosen->moved += apart(chosen->piece, before);
}

/// The sum between every two clusters, neighbours joined.
std::vector<Summed> sums_of(const std::vector<Stretch>& stretches, const std::vector<double>& clusters,
                            double noise) {
    std::vector<Summed> sums;
    std::vector<Stretch> active;
    std::size_t next = 0;
    for (std::size_t i = 0; i + 1 < clusters.size(); ++i) {
        active.erase(
            std::remove_if(active.begin(), active.end(), [i](const Stretch& s) { return s.to <= i; }),
            active.end());
        for (; next < stretches.size() && stretches[next].from <= i; ++next) {
            active.push_back(stretches[next]);
        }
        Summed sum{{clusters[i], clusters[i + 1], {}}, 0, 0};
        for (const Stretch& stretch : active) {
            const LinePiece part = stretch.piece.between(sum.piece.from, sum.piece.to);
            for (std::size_t k = 0; k < part.c.size(); ++k) {
                sum.piece.c[k] += part.c[k];
            }
            sum.moved += stretch.moved;
        }
        if (!is_nothing(sum.piece) && (sums.empty() || !join(sums.back(), sum, noise))) {
            sums.push_back(sum);
        }
    }
    return sums;
}

} // namespace

std::vector<LinePiece> merged(std::vector<LinePiece> pieces, double noise, double* changed) {
    if (pieces.size() < 2) {
        return pieces;
    }
    std::sort(pieces.begin(), pieces.end(), comes_before);
    const std::vector<double> clusters = clusters_of(pieces, noise);
    std::vector<LinePiece> slivers;
    const std::vector<Stretch> stretches = stretches_of(pieces, clusters, slivers);
    if (stretches.empty()) {
        return slivers;
    }
    std::vector<Summed> sums = sums_of(stretches, clusters, noise);
    for (const LinePiece& sliver : slivers) {
        if (!sums.empty()) {
            absorb(sums, sliver);
        }
    }
    pieces.clear();
    for (const Summed& sum : sums) {
        pieces.push_back(sum.piece);
        if (changed != nullptr) {
            *changed = std::max(*changed, sum.moved + sum.joined);
        }
    }
    return pieces;
}

RUNNEL_NAMESPACE_END
