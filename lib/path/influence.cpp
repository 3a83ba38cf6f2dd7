#include "path/influence.hpp"

#include <algorithm>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// The part of a piece beside one stretch of a member, in fractions of the piece.
struct Patch {
    std::uint32_t piece = none;
    double from = 0, to = 1;
};

/// Members in stretches: from the `from` end to the first bearing, from bearing to bearing, from the last to
/// the `to` end. Stretches count through the level; bearing b of a member lies between its stretches b and
/// b + 1.
class Stretches {
public:
    explicit Stretches(const FramedLevel& framed) : framed_(framed) {}

    [[nodiscard]] std::size_t count() const {
        return framed_.members.size() + framed_.bearings.items().size();
    }
    [[nodiscard]] std::uint32_t first(std::uint32_t member) const {
        return static_cast<std::uint32_t>(framed_.bearings.first(member) + member);
    }
    [[nodiscard]] std::uint32_t of(std::uint32_t member) const {
        return static_cast<std::uint32_t>(framed_.bearings[member].size() + 1);
    }
    [[nodiscard]] double start(std::uint32_t member, std::uint32_t stretch) const {
        return stretch == 0 ? 0 : framed_.bearings[member][stretch - 1].station;
    }
    [[nodiscard]] double end(std::uint32_t member, std::uint32_t stretch) const {
        return stretch + 1 == of(member) ? framed_.members[member].length
                                         : framed_.bearings[member][stretch].station;
    }
    /// The stretch of a member that ends at or after a station: what lies there, or the one before it.
    [[nodiscard]] std::uint32_t at(std::uint32_t member, double station) const {
        const std::span<const Bearing> bearings = framed_.bearings[member];
        const auto next =
            std::lower_bound(bearings.begin(), bearings.end(), station,
                             [](const Bearing& bearing, double s) { return bearing.station < s; });
        return static_cast<std::uint32_t>(next - bearings.begin());
    }

private:
    const FramedLevel& framed_;
};

/// What stands by each stretch and over each bearing of the level's members.
struct Floor {
    Grouped<Patch> patches;        ///< by stretch
    Grouped<std::uint32_t> inside; ///< by stretch: bearings of other members that land within it
    Grouped<std::uint32_t> over;   ///< by bearing: those that land right over it
};

/// Lays a piece that counts whole beside every stretch that it shares more than `snap` with, and beside the
/// one that it shares most with; where it goes to one point, beside those that meet there.
void lay_whole(const Stretches& stretches, std::uint32_t member, const Beside& beside, double snap,
               std::vector<std::pair<std::uint32_t, Patch>>& patches) {
    const double low = std::min(beside.station_from, beside.station_to);
    const double high = std::max(beside.station_from, beside.station_to);
    const bool at_point = high - low <= snap;
    const std::uint32_t first = stretches.at(member, low);
    const auto shared = [&](std::uint32_t s) {
        return std::min(high, stretches.end(member, s)) - std::max(low, stretches.start(member, s));
    };
    std::uint32_t most = first;
    for (std::uint32_t s = first; s < stretches.of(member) && stretches.start(member, s) <= high; ++s) {
        most = shared(s) > shared(most) ? s : most;
    }
    for (std::uint32_t s = first; s < stretches.of(member) && stretches.start(member, s) <= high; ++s) {
        if (at_point || s == most || shared(s) > snap) {
            patches.push_back({stretches.first(member) + s, {beside.piece, 0, 1}});
        }
    }
}

void lay_by_stretches(const Stretches& stretches, std::uint32_t member, const Beside& beside, double noise,
                      std::vector<std::pair<std::uint32_t, Patch>>& patches) {
    const double low = std::min(beside.station_from, beside.station_to);
    const double high = std::max(beside.station_from, beside.station_to);
    const bool at_point = high - low <= noise;
    const double length = beside.station_to - beside.station_from;
    const auto fraction = [&](double station) {
        return std::clamp((station - beside.station_from) / length, 0.0, 1.0);
    };
    for (std::uint32_t s = stretches.at(member, low); s < stretches.of(member); ++s) {
        const double from = std::max(low, stretches.start(member, s));
        const double to = std::min(high, stretches.end(member, s));
        if (from > high) {
            return;
        }
        if (at_point) {
            patches.push_back({stretches.first(member) + s, {beside.piece, 0, 1}});
        } else if (to - from > noise) {
            const double x = fraction(from);
            const double y = fraction(to);
            patches.push_back({stretches.first(member) + s, {beside.piece, std::min(x, y), std::max(x, y)}});
        }
    }
}

Floor lay_out(const FramedLevel& framed, const LevelPath& path, const FloorPieces& pieces,
              const Stretches& stretches, Tolerance tolerance) {
    std::vector<std::pair<std::uint32_t, Patch>> patches;
    std::vector<std::pair<std::uint32_t, std::uint32_t>> inside;
    std::vector<std::pair<std::uint32_t, std::uint32_t>> over;
    const std::span<const Bearing> bearings = framed.bearings.items();
    for (std::uint32_t m = 0; m < framed.members.size(); ++m) {
        for (const Beside& beside : pieces.beside[m]) {
            if (beside.whole) {
                lay_whole(stretches, m, beside, tolerance.snap, patches);
            } else {
                lay_by_stretches(stretches, m, beside, tolerance.noise, patches);
            }
        }
        const std::span<const Bearing> own = framed.bearings[m];
        const auto first = static_cast<std::uint32_t>(framed.bearings.first(m));
        for (const std::uint32_t b : path.landings[m]) {
            const double station = bearings[b].on_station;
            const std::uint32_t stretch = stretches.at(m, station);
            if (stretch < own.size() && own[stretch].station - station <= tolerance.snap) {
                over.emplace_back(first + stretch, b);
            } else if (stretch > 0 && station - own[stretch - 1].station <= tolerance.snap) {
                over.emplace_back(first + stretch - 1, b);
            } else {
                inside.emplace_back(stretches.first(m) + stretch, b);
            }
        }
    }
    Floor floor;
    floor.patches = Grouped<Patch>::from_pairs(stretches.count(), std::move(patches));
    floor.inside = Grouped<std::uint32_t>::from_pairs(stretches.count(), std::move(inside));
    floor.over = Grouped<std::uint32_t>::from_pairs(bearings.size(), std::move(over));
    return floor;
}

/// Gathers the floor that one carrier after the other feels. Each stretch and bearing is gone through once a
/// carrier, on however many ways it is reached.
class Gatherer {
public:
    Gatherer(const Stretches& stretches, const Floor& floor, const LevelPath& path, const FloorPieces& pieces,
             const FramedLevel& framed)
        : stretches_(stretches), floor_(floor), path_(path), pieces_(pieces), framed_(framed),
          stretch_seen_(stretches.count()), bearing_seen_(framed.bearings.items().size()),
          piece_seen_(pieces.areas.size()) {}

    [[nodiscard]] double of_member(std::uint32_t member) {
        begin();
        for (std::uint32_t s = 0; s < stretches_.of(member); ++s) {
            go_through_stretch(stretches_.first(member) + s);
        }
        const auto first = static_cast<std::uint32_t>(framed_.bearings.first(member));
        for (std::uint32_t b = 0; b < framed_.bearings[member].size(); ++b) {
            await(floor_.over[first + b]);
        }
        return end();
    }

    [[nodiscard]] double of_support(std::uint32_t carrier) {
        begin();
        for (const Beside& beside : pieces_.beside[carrier]) {
            take({beside.piece, 0, 1});
        }
        await(path_.landings[carrier]);
        return end();
    }

private:
    void begin() {
        ++carrier_;
        area_ = {};
    }

    double end() {
        while (!waiting_.empty()) {
            const std::uint32_t bearing = waiting_.back();
            waiting_.pop_back();
            const std::uint32_t before = bearing + path_.member_of[bearing]; // stretches count so
            go_through_stretch(before);
            go_through_stretch(before + 1);
            await(floor_.over[bearing]);
        }
        add_parts();
        add_within();
        return area_.value();
    }

    void await(std::span<const std::uint32_t> bearings) {
        for (const std::uint32_t b : bearings) {
            if (std::exchange(bearing_seen_[b], carrier_) != carrier_) {
                waiting_.push_back(b);
            }
        }
    }

    void go_through_stretch(std::uint32_t stretch) {
        if (std::exchange(stretch_seen_[stretch], carrier_) == carrier_) {
            return;
        }
        for (const Patch& patch : floor_.patches[stretch]) {
            take(patch);
        }
        await(floor_.inside[stretch]);
    }

    void take(const Patch& patch) {
        const bool whole = patch.from <= 0 && patch.to >= 1;
        if (!whole) {
            parts_.push_back(patch);
        } else if (std::exchange(piece_seen_[patch.piece], carrier_) != carrier_) {
            if (pieces_.within[patch.piece] == none) {
                area_.add(pieces_.areas[patch.piece]);
            } else {
                within_.push_back(patch.piece);
            }
        }
    }

    /// Of pieces within others; where those are there they add nothing.
    void add_within() {
        for (const std::uint32_t piece : within_) {
            if (piece_seen_[pieces_.within[piece]] != carrier_) {
                area_.add(pieces_.areas[piece]);
            }
        }
        within_.clear();
    }

    /// Parts of the same piece are united; of a piece that is there as a whole they add nothing.
    void add_parts() {
        std::sort(parts_.begin(), parts_.end(), [](const Patch& l, const Patch& r) {
            return std::pair(l.piece, l.from) < std::pair(r.piece, r.from);
        });
        for (std::size_t i = 0; i < parts_.size();) {
            Patch united = parts_[i];
            for (++i; i < parts_.size() && parts_[i].piece == united.piece && parts_[i].from <= united.to;
                 ++i) {
                united.to = std::max(united.to, parts_[i].to);
            }
            if (piece_seen_[united.piece] != carrier_) {
                area_.add(pieces_.area_between(united.piece, united.from, united.to));
            }
        }
        parts_.clear();
    }

    const Stretches& stretches_;
    const Floor& floor_;
    const LevelPath& path_;
    const FloorPieces& pieces_;
    const FramedLevel& framed_;
    std::uint32_t carrier_ = 0;               ///< how many carriers have been begun
    std::vector<std::uint32_t> stretch_seen_; ///< by the carrier that was begun then
    std::vector<std::uint32_t> bearing_seen_;
    std::vector<std::uint32_t> piece_seen_;
    std::vector<std::uint32_t> waiting_; ///< bearings that land on what has been gone through
    std::vector<Patch> parts_;
    std::vector<std::uint32_t> within_; ///< pieces within others
    Sum area_;
};

} // namespace

std::vector<double> influence_areas(const FramedLevel& framed, const Sharing& sharing, const LevelPath& path,
                                    const FloorPieces& pieces, Tolerance tolerance) {
    const Stretches stretches(framed);
    const Floor floor = lay_out(framed, path, pieces, stretches, tolerance);
    Gatherer gatherer(stretches, floor, path, pieces, framed);
    std::vector<double> areas(sharing.carrier_count());
    for (std::uint32_t m = 0; m < sharing.members; ++m) {
        areas[m] = gatherer.of_member(m);
    }
    const auto give = [&](std::uint32_t number) { areas[number] = gatherer.of_support(number); };
    for (const std::uint32_t wall : framed.walls) {
        give(sharing.number_of({CarrierKind::wall, wall}));
    }
    for (const std::uint32_t column : framed.columns) {
        give(sharing.number_of({CarrierKind::column, column}));
    }
    return areas;
}

RUNNEL_NAMESPACE_END
