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

struct Stretch {
    std::size_t from = 0, to = 0; ///< clusters
    LinePiece piece;              ///< moved to them
};

/// The piece stretched to other ends, its force kept: a short steep piece would otherwise gain or lose what
/// its ends move.
LinePiece moved_to(const LinePiece& piece, double from, double to) {
    if (piece.from == from && piece.to == to) {
        return piece;
    }
    LinePiece moved = piece;
    moved.from = from;
    moved.to = to;
    const double rate = (piece.to - piece.from) / (to - from);
    double scale = rate;
    for (double& c : moved.c) {
        c *= scale;
        scale *= rate;
    }
    return moved;
}

std::vector<Stretch> stretches_of(const std::vector<LinePiece>& pieces, const std::vector<double>& clusters) {
    std::vector<Stretch> stretches;
    stretches.reserve(pieces.size());
    for (const LinePiece& piece : pieces) {
        const std::size_t from = cluster_of(clusters, piece.from);
        const std::size_t to = cluster_of(clusters, piece.to);
        if (from < to) {
            stretches.push_back({from, to, moved_to(piece, clusters[from], clusters[to])});
        }
    }
    std::stable_sort(stretches.begin(), stretches.end(),
                     [](const Stretch& a, const Stretch& b) { return a.from < b.from; });
    return stretches;
}

bool is_nothing(const LinePiece& piece) {
    return std::all_of(piece.c.begin(), piece.c.end(), [](double c) { return c == 0; });
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

/// One polynomial for both, where they are the same: that of the longer piece, since to continue a short one
/// far would blow up its rounding.
bool join(LinePiece& left, const LinePiece& right, double noise) {
    if (left.to != right.from) {
        return false;
    }
    const bool left_leads = left.to - left.from >= right.to - right.from;
    const LinePiece& shorter = left_leads ? right : left;
    const LinePiece continued = (left_leads ? left : right).between(shorter.from, shorter.to);
    const double reach = right.to - left.from;
    // Where a border moved by noise, the steepest change of intensity there follows from size and reach.
    const double size = std::max(size_over(left, reach), size_over(right, reach));
    const double length = shorter.to - shorter.from;
    // Pieces whose ends were moved carry their force on another length; that counts by what stands on them
    // themselves.
    const double own =
        std::max(size_over(left, left.to - left.from), size_over(right, right.to - right.from));
    const double allowed = rounding * size + noise / length * own + noise * std::abs(left.c[1]);
    double power = 1;
    for (std::size_t k = 0; k < continued.c.size(); ++k) {
        if (!(std::abs(continued.c[k] - shorter.c[k]) * power <= allowed)) {
            return false;
        }
        power *= length;
    }
    const double force = left.total() + right.total();
    left = left_leads ? LinePiece{left.from, right.to, left.c} : right.between(left.from, right.to);
    left.c[0] += (force - left.total()) / (left.to - left.from); // what the shorter differed by is not lost
    return true;
}

} // namespace

std::vector<LinePiece> merged(std::vector<LinePiece> pieces, double noise) {
    if (pieces.size() < 2) {
        return pieces;
    }
    std::sort(pieces.begin(), pieces.end(), comes_before);
    const std::vector<double> clusters = clusters_of(pieces, noise);
    const std::vector<Stretch> stretches = stretches_of(pieces, clusters);

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
    return result;
}

RUNNEL_NAMESPACE_END
