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

struct Stretch {
    std::size_t from = 0, to = 0; ///< clusters
    LinePiece piece;
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
        Stretch stretch{cluster_of(clusters, piece.from), cluster_of(clusters, piece.to), piece};
        if (stretch.from >= stretch.to) {
            left_over.push_back(piece);
            continue;
        }
        const double from = clusters[stretch.from];
        const double to = clusters[stretch.to];
        if (from != piece.from || to != piece.to) {
            stretch.piece = moved_to(piece, from, to);
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

/// One polynomial for both, where they are the same to rounding, and where they may differ because a border
/// moved by noise: by the force on a strip as narrow as that. It is that of the longer piece, since to
/// continue a short one far would blow up its rounding; force and moment stay those of both.
bool join(LinePiece& left, const LinePiece& right, double noise) {
    if (left.to != right.from) {
        return false;
    }
    constexpr double fitted = 16; // set_resultant at most multiplies a strip's intensity by 4 + 12
    const bool left_leads = left.to - left.from >= right.to - right.from;
    const LinePiece& shorter = left_leads ? right : left;
    const LinePiece continued = (left_leads ? left : right).between(shorter.from, shorter.to);
    const double reach = right.to - left.from;
    const double length = shorter.to - shorter.from;
    const double size = std::max(size_over(left, reach), size_over(right, reach));
    // What a moved border does counts by what stands on the pieces themselves, not by how far they would
    // reach.
    const double own =
        std::max(size_over(left, left.to - left.from), size_over(right, right.to - right.from));
    const double allowed = rounding * size + fitted * noise / length * own;
    double power = 1;
    for (std::size_t k = 0; k < continued.c.size(); ++k) {
        if (!(std::abs(continued.c[k] - shorter.c[k]) * power <= allowed)) {
            return false;
        }
        power *= length;
    }
    const Resultant both = resultant_of(left, left.from) + resultant_of(right, left.from);
    left = left_leads ? LinePiece{left.from, right.to, left.c} : right.between(left.from, right.to);
    set_resultant(left, both);
    return true;
}

/// Adds a piece too short to stand by itself to the longer of its neighbours, with its force and moment.
void absorb(std::vector<LinePiece>& pieces, const LinePiece& sliver) {
    const auto after = std::upper_bound(pieces.begin(), pieces.end(), sliver.from,
                                        [](double station, const LinePiece& p) { return station < p.from; });
    auto chosen = after == pieces.begin() ? after : after - 1;
    if (after != pieces.end() && after->from == chosen->to &&
        after->to - after->from > chosen->to - chosen->from) {
        chosen = after;
    }
    set_resultant(*chosen, resultant_of(*chosen, chosen->from) + resultant_of(sliver, chosen->from));
}

} // namespace

std::vector<LinePiece> merged(std::vector<LinePiece> pieces, double noise) {
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

    std::vector<LinePiece> result;
    std::vector<Stretch> active;
    std::size_t next = 0;
    for (std::size_t i = 0; i + 1 < clusters.size(); ++i) {
        active.erase(
            std::remove_if(active.begin(), active.end(), [i](const Stretch& s) { return s.to <= i; }),
            active.end());
        for (; next < stretches.size() && stretches[next].from <= i; ++next) {
            active.push_back(stretches[next]);
        }
        LinePiece sum{clusters[i], clusters[i + 1], {}};
        for (const Stretch& stretch : active) {
            const LinePiece part = stretch.piece.between(sum.from, sum.to);
            for (std::size_t k = 0; k < sum.c.size(); ++k) {
                sum.c[k] += part.c[k];
            }
        }
        if (!is_nothing(sum) && (result.empty() || !join(result.back(), sum, noise))) {
            result.push_back(sum);
        }
    }
    for (const LinePiece& sliver : slivers) {
        if (!result.empty()) {
            absorb(result, sliver);
        }
    }
    return result;
}

RUNNEL_NAMESPACE_END
