#include "load/collector.hpp"

#include "geometry/line_pieces.hpp"

#include <algorithm>
#include <tuple>

RUNNEL_NAMESPACE_BEGIN

Collector::Collector(const Plan& plan, const FramedLevel& level, const Sharing& sharing, double noise)
    : noise_(noise), decks_(level.decks.size()), cases_(plan.cases.size()) {
    axes_.reserve(sharing.carrier_count());
    const auto push_line = [this](Point from, Point to) {
        const double length = distance(from, to);
        axes_.push_back({from, length > 0 ? (1 / length) * (to - from) : Point{}});
    };
    for (const FramedMember& member : level.members) {
        push_line(member.from, member.to);
    }
    for (const Wall& wall : plan.walls) {
        push_line(wall.from, wall.to);
    }
    for (const Column& column : plan.columns) {
        axes_.push_back({column.at, {}});
    }
    applied_.resize((decks_ + 1) * cases_);
    shared_.resize((decks_ + 1) * cases_);
    moved_.resize((decks_ + 1) * cases_);
}

Point Collector::at(std::uint32_t carrier, double station) const {
    return axes_[carrier].from + station * axes_[carrier].direction;
}

void Collector::put_line(std::uint32_t carrier, std::uint32_t deck, const CarrierLine& line, double error) {
    if (line.load_case == none) {
        return; // an error already, which read_plan and check_plan have told
    }
    const double force = line.piece.total();
    const Point moment =
        force * at(carrier, line.piece.from) + line.piece.first_moment() * axes_[carrier].direction;
    shared_[row(deck, line.load_case)].add(force, moment, magnitude_of(line.piece));
    lines_.emplace_back(carrier, line);
    if (error > 0) {
        curve_errors_.push_back(
            {carrier, line.load_case, line.source, line.piece.from, line.piece.to, error});
    }
}

void Collector::put_point(std::uint32_t carrier, std::uint32_t deck, const CarrierPoint& point) {
    if (point.load_case == none) {
        return;
    }
    shared_[row(deck, point.load_case)].add(point.p, point.p * at(carrier, point.station), std::abs(point.p));
    points_.emplace_back(carrier, point);
}

void Collector::applied(std::uint32_t deck, std::uint32_t load_case, double force, Point moment,
                        double magnitude) {
    if (load_case == none) {
        return;
    }
    applied_[row(deck, load_case)].add(force, moment, magnitude);
}

void Collector::note_moved(std::uint32_t deck, std::uint32_t load_case, double moment) {
    if (load_case != none) {
        moved_[row(deck, load_case)] += moment;
    }
}

double magnitude_of(const LinePiece& piece) {
    const double whole = piece.total();
    const double start = piece.c[0];
    const double end = piece.at(piece.to);
    const bool linear = piece.c[2] == 0 && piece.c[3] == 0 && piece.c[4] == 0;
    if (!linear || start * end >= 0) {
        return std::abs(whole);
    }
    const double length = piece.to - piece.from;
    const double zero = length * start / (start - end);
    return (std::abs(start) * zero + std::abs(end) * (length - zero)) / 2;
}

double Collector::largest_curve_error(std::vector<CurveError>& errors) {
    std::sort(errors.begin(), errors.end(),
              [](const CurveError& l, const CurveError& r) { return l.key() < r.key(); });
    double largest = 0;
    std::vector<std::pair<double, double>> steps; // station, what the sum grows by there
    for (std::size_t i = 0; i < errors.size();) {
        steps.clear();
        const auto key = errors[i].key();
        for (; i < errors.size() && errors[i].key() == key; ++i) {
            steps.emplace_back(errors[i].from, errors[i].error);
            steps.emplace_back(errors[i].to, -errors[i].error);
        }
        std::sort(steps.begin(), steps.end());
        double sum = 0;
        for (const auto& [station, step] : steps) {
            sum += step;
            largest = std::max(largest, sum);
        }
    }
    return largest;
}

LevelLoads Collector::finish() {
    LevelLoads loads;
    const std::size_t carriers = axes_.size();
    const auto key = [](const CarrierLine& l) {
        return std::tuple(l.load_case, static_cast<int>(l.source.kind), l.source.index);
    };

    auto grouped = Grouped<CarrierLine>::from_pairs(carriers, std::move(lines_));
    loads.lines.reserve(carriers, grouped.items().size());
    std::vector<LinePiece> run;
    double changed = 0; // kN/m, where pieces are joined
    for (std::size_t c = 0; c < carriers; ++c) {
        const std::span<CarrierLine> own = grouped[c];
        std::stable_sort(own.begin(), own.end(),
                         [&](const CarrierLine& l, const CarrierLine& r) { return key(l) < key(r); });
        for (std::size_t i = 0; i < own.size();) {
            std::size_t end = i + 1;
            while (end < own.size() && key(own[end]) == key(own[i])) {
                ++end;
            }
            if (end == i + 1) {
                loads.lines.push(own[i]);
            } else {
                run.clear();
                for (std::size_t k = i; k < end; ++k) {
                    run.push_back(own[k].piece);
                }
                for (const LinePiece& piece : merged(std::move(run), noise_, &changed)) {
                    loads.lines.push({own[i].load_case, own[i].source, piece});
                }
                run = {};
            }
            i = end;
        }
        loads.lines.end_group();
    }

    auto points = Grouped<CarrierPoint>::from_pairs(carriers, std::move(points_));
    loads.points.reserve(carriers, points.items().size());
    const auto point_key = [](const CarrierPoint& p) {
        return std::tuple(p.load_case, static_cast<int>(p.source.kind), p.source.index);
    };
    for (std::size_t c = 0; c < carriers; ++c) {
        const std::span<CarrierPoint> own = points[c];
        std::stable_sort(own.begin(), own.end(), [&](const CarrierPoint& l, const CarrierPoint& r) {
            return std::pair(point_key(l), l.station) < std::pair(point_key(r), r.station);
        });
        // What one source brings to one place from the bays on both sides is one load.
        for (std::size_t i = 0; i < own.size();) {
            CarrierPoint sum = own[i++];
            for (; i < own.size() && point_key(own[i]) == point_key(sum) &&
                   own[i].station - sum.station <= noise_;
                 ++i) {
                sum.p += own[i].p;
            }
            loads.points.push(sum);
        }
        loads.points.end_group();
    }

    for (std::uint32_t d = 0; d <= decks_; ++d) {
        for (std::uint32_t c = 0; c < cases_; ++c) {
            const std::size_t i = d * cases_ + c;
            if (applied_[i].any() || shared_[i].any()) {
                loads.balance.push_back(
                    {d == decks_ ? none : d, c, applied_[i].sum(), shared_[i].sum(), moved_[i]});
            }
        }
    }
    const double curve_error = largest_curve_error(curve_errors_);
    loads.curve_error = curve_error > 0 ? curve_error + changed : 0;
    loads.problems = std::move(problems);
    return loads;
}

RUNNEL_NAMESPACE_END
