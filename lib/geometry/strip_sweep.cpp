#include "geometry/strip_sweep.hpp"

#include "geometry/basic.hpp"
#include "geometry/crossings.hpp"

#include <algorithm>
#include <limits>
#include <memory_resource>
#include <numeric>
#include <set>

// Design. The status holds the edges that the current level cuts, ordered along it. The gap between two
// neighbours stays open until one of them changes, so n edges make O(n) gaps. Levels that differ by rounding
// alone are made one level first; ends come before starts. Side tests allow for noise and then look at the
// other end; edges leave by handle. Depths are kept as sums over the neighbours to the left, so that openings
// may touch or cross the outline, and areas telescope: a pair in the wrong order shows as a negative width
// and never as lost area. Rejected: exact predicates on the turned coordinates without joining levels (a
// level edge of slope 1e-16 parts starts that belong together); a two-level list as status (exponent 1.5 at a
// million edges active at once).

RUNNEL_NAMESPACE_BEGIN

namespace {

double along_at(const SweepEdge& e, double across) {
    if (across <= e.a.y) {
        return e.a.x;
    }
    if (across >= e.b.y) {
        return e.b.x;
    }
    const double t = (across - e.a.y) / (e.b.y - e.a.y);
    return (1 - t) * e.a.x + t * e.b.x;
}

/// Where two edges lie on each other: first the border into the deck, then marks, then the border out of it,
/// so that a carrier along an edge of the deck is inside.
int rank_on_one_line(const SweepEdge& e) {
    if (e.mark != Gap::edge) {
        return 1;
    }
    return e.outline_step - e.opening_step > 0 ? 0 : 2;
}

/// Left-to-right order of edges that a level cuts both; one of the two starts at that level.
struct ToTheLeft {
    const std::vector<SweepEdge>* edges;
    double noise;

    bool operator()(std::uint32_t l, std::uint32_t r) const {
        if (l == r) {
            return false;
        }
        const SweepEdge& left = (*edges)[l];
        const SweepEdge& right = (*edges)[r];
        const int side = left.a.y >= right.a.y ? side_of(left, right) : -side_of(right, left);
        if (side != 0) {
            return side > 0;
        }
        const int left_rank = rank_on_one_line(left);
        const int right_rank = rank_on_one_line(right);
        return left_rank != right_rank ? left_rank < right_rank : l < r;
    }

    /// 1: `later`, which starts on the level, lies left of `e`; -1: right of it; 0: on one line.
    [[nodiscard]] int side_of(const SweepEdge& later, const SweepEdge& e) const {
        if (later.a.y == e.a.y && std::abs(later.a.x - e.a.x) > noise) {
            return later.a.x < e.a.x ? 1 : -1;
        }
        if (const int side = sign(left_of(e, later.a)); side != 0) {
            return side;
        }
        return later.b.y <= e.b.y ? sign(left_of(e, later.b)) : -sign(left_of(later, e.b));
    }

    [[nodiscard]] int sign(double distance) const {
        return distance > noise ? 1 : distance < -noise ? -1 : 0;
    }
};

/// Makes levels that differ by noise one; a boundary vertex's level wins.
class Levels {
public:
    explicit Levels(double noise) : noise_(noise) {}

    void reserve(std::size_t count) { values_.reserve(count); }
    void add(double across, bool boundary) { values_.push_back({across, boundary}); }

    void join() {
        std::sort(values_.begin(), values_.end(),
                  [](const Value& l, const Value& r) { return l.across < r.across; });
        for (std::size_t i = 0; i < values_.size();) {
            std::size_t end = i + 1;
            std::size_t winner = i;
            while (end < values_.size() && values_[end].across - values_[end - 1].across <= noise_) {
                if (values_[end].boundary && !values_[winner].boundary) {
                    winner = end;
                }
                ++end;
            }
            starts_.push_back(values_[i].across);
            joined_.push_back(values_[winner].across);
            i = end;
        }
        values_.clear();
    }

    [[nodiscard]] double of(double across) const {
        return joined_[static_cast<std::size_t>(std::upper_bound(starts_.begin(), starts_.end(), across) -
                                                starts_.begin() - 1)];
    }

private:
    struct Value {
        double across;
        bool boundary;
    };
    double noise_;
    std::vector<Value> values_;
    std::vector<double> starts_; ///< lowest member of each group
    std::vector<double> joined_;
};

class Sweep {
public:
    Sweep(std::span<const Point> outline, std::span<const Ring> openings, std::span<const Mark> marks,
          double noise)
        : noise_(noise) {
        edges_.reserve(outline.size() + marks.size() + 8 * openings.size());
        add_ring(outline, 1, 0);
        for (const Ring& opening : openings) {
            add_ring(opening, 0, 1);
        }
        add_marks(marks);
    }

    StripSweep run(std::span<const Mark> marks) {
        record_marks(marks, join_levels());
        if (split_at_crossings(edges_, noise_)) {
            join_levels();
        }
        sweep();
        return std::move(result_);
    }

private:
    void add_ring(std::span<const Point> ring, int outline_step, int opening_step) {
        const int turn =
            signed_area(ring) >= 0 ? 1 : -1; // counter-clockwise: what falls is on the left of the area
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Point a = ring[i];
            const Point b = ring[(i + 1) % ring.size()];
            const bool falls = b.y < a.y;
            const int sign = (falls ? 1 : -1) * turn;
            SweepEdge edge{falls ? b : a, falls ? a : b};
            edge.outline_step = static_cast<std::int8_t>(sign * outline_step);
            edge.opening_step = static_cast<std::int8_t>(sign * opening_step);
            edges_.push_back(edge);
        }
    }

    void add_marks(std::span<const Mark> marks) {
        for (std::size_t i = 0; i < marks.size(); ++i) {
            const bool falls = marks[i].b.y < marks[i].a.y;
            SweepEdge edge{falls ? marks[i].b : marks[i].a, falls ? marks[i].a : marks[i].b};
            edge.mark = static_cast<std::uint32_t>(i);
            edges_.push_back(edge);
        }
    }

    Levels join_levels() {
        Levels levels(noise_);
        levels.reserve(2 * edges_.size());
        for (const SweepEdge& e : edges_) {
            levels.add(e.a.y, e.mark == Gap::edge);
            levels.add(e.b.y, e.mark == Gap::edge);
        }
        levels.join();
        for (SweepEdge& e : edges_) {
            e.a.y = levels.of(e.a.y);
            e.b.y = levels.of(e.b.y);
        }
        std::erase_if(edges_, [](const SweepEdge& e) { return e.a.y == e.b.y; });
        return levels;
    }

    void record_marks(std::span<const Mark> marks, const Levels& levels) {
        result_.mark_across.reserve(marks.size());
        for (const Mark& m : marks) {
            result_.mark_across.emplace_back(levels.of(m.a.y), levels.of(m.b.y));
        }
    }

    using Status = std::pmr::set<std::uint32_t, ToTheLeft>;

    void sweep() {
        const std::size_t n = edges_.size();
        std::vector<std::uint32_t> by_start(n);
        std::iota(by_start.begin(), by_start.end(), 0U);
        std::vector<std::uint32_t> by_end = by_start;
        std::sort(by_start.begin(), by_start.end(), [this](std::uint32_t l, std::uint32_t r) {
            const Point a = edges_[l].a;
            const Point b = edges_[r].a;
            return a.y != b.y ? a.y < b.y : a.x != b.x ? a.x < b.x : l < r;
        });
        std::sort(by_end.begin(), by_end.end(), [this](std::uint32_t l, std::uint32_t r) {
            const Point a = edges_[l].b;
            const Point b = edges_[r].b;
            return a.y != b.y ? a.y < b.y : a.x != b.x ? a.x < b.x : l < r;
        });

        std::pmr::unsynchronized_pool_resource pool;
        Status status(ToTheLeft{&edges_, noise_}, &pool);
        handle_.assign(n, status.end());
        open_.assign(n, 0.0);
        depth_.assign(n, unset);
        result_.gaps.reserve(n + 16);

        std::size_t start = 0;
        std::size_t end = 0;
        while (end < n) {
            double level = edges_[by_end[end]].b.y;
            if (start < n) {
                level = std::min(level, edges_[by_start[start]].a.y);
            }
            touched_.clear();
            for (; end < n && edges_[by_end[end]].b.y == level; ++end) {
                take_out(status, by_end[end], level);
            }
            auto hint = status.end();
            for (; start < n && edges_[by_start[start]].a.y == level; ++start) {
                hint = std::next(put_in(status, by_start[start], hint, level));
            }
            settle_depths(status, level);
        }
    }

    void take_out(Status& status, std::uint32_t id, double level) {
        const auto it = handle_[id];
        const auto next = std::next(it);
        close_gap(status, it, level);
        if (it != status.begin()) {
            close_gap(status, std::prev(it), level);
        }
        if (next != status.end()) {
            touched_.push_back(*next);
        }
        status.erase(it);
        handle_[id] = status.end();
        depth_[id] = unset;
    }

    Status::iterator put_in(Status& status, std::uint32_t id, Status::iterator hint, double level) {
        const auto it = status.emplace_hint(hint, id);
        handle_[id] = it;
        open_[id] = level;
        depth_[id] = unset;
        if (it != status.begin()) {
            const auto before = std::prev(it);
            if (const auto after = std::next(it); after != status.end()) {
                emit(*before, *after, level);
            }
            open_[*before] = level;
        }
        touched_.push_back(id);
        return it;
    }

    void close_gap(Status& status, Status::iterator it, double level) {
        if (const auto next = std::next(it); next != status.end()) {
            emit(*it, *next, level);
        }
        open_[*it] = level;
    }

    /// Works out how deep in outline and openings the gaps right of the touched edges are, and of those
    /// behind them as far as that changes; a gap whose depth changes here is closed with its old depth first.
    void settle_depths(Status& status, double level) {
        for (const std::uint32_t id : touched_) {
            for (auto it = handle_[id]; it != status.end(); ++it) {
                Depth depth = it == status.begin() ? Depth{} : depth_[*std::prev(it)];
                if (depth == unset) {
                    break; // its left neighbour was touched as well and comes past here itself
                }
                depth.outline += edges_[*it].outline_step;
                depth.opening += edges_[*it].opening_step;
                if (depth == depth_[*it]) {
                    break;
                }
                close_gap(status, it, level);
                depth_[*it] = depth;
            }
        }
    }

    void emit(std::uint32_t low, std::uint32_t high, double level) {
        const double from = open_[low];
        const Depth depth = depth_[low];
        if (!(level > from) || depth == unset || depth.outline <= 0 || depth.opening > 0) {
            return;
        }
        const SweepEdge& l = edges_[low];
        const SweepEdge& h = edges_[high];
        result_.gaps.push_back({from, level, along_at(l, from), along_at(l, level), along_at(h, from),
                                along_at(h, level), l.mark, h.mark});
    }

    struct Depth {
        int outline = 0;
        int opening = 0;
        friend bool operator==(const Depth&, const Depth&) = default;
    };
    static constexpr Depth unset{std::numeric_limits<int>::min(), 0};

    double noise_;
    std::vector<SweepEdge> edges_;
    std::vector<Status::iterator> handle_;
    std::vector<double> open_; ///< by edge: level at which the gap right of it opened
    std::vector<Depth> depth_; ///< by edge: of the gap right of it
    std::vector<std::uint32_t> touched_;
    StripSweep result_;
};

} // namespace

StripSweep sweep_strips(std::span<const Point> outline, std::span<const Ring> openings,
                        std::span<const Mark> marks, double noise) {
    return Sweep(outline, openings, marks, noise).run(marks);
}

RUNNEL_NAMESPACE_END
