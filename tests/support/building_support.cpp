#include "support/building_support.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>
#include <string>

using namespace runnel;

namespace support {

namespace {

/// Whole twentieths of a metre: points then fall on each other or lie apart, and `snap` has nothing to
/// choose, whose choice goes by the order of the lists.
double round_to_twentieths(double value) {
    return std::round(20 * value) / 20;
}

class Builder {
public:
    Builder(std::uint64_t seed, const Placing& placing) : random_(seed), placing_(placing) {}

    Plan build() {
        describe();
        lay_out();
        for (std::size_t s = 0; s < storeys_; ++s) {
            add_storey(s);
        }
        add_supports();
        if (placing_.reversed) {
            reverse();
        }
        return std::move(plan_);
    }

private:
    [[nodiscard]] Point at(double x, double y) const {
        const double a = placing_.degrees * std::numbers::pi / 180;
        const double c = std::cos(a);
        const double s = std::sin(a);
        return {placing_.shift.x + x * c - y * s, placing_.shift.y + x * s + y * c};
    }
    [[nodiscard]] Ring rectangle(double x0, double y0, double x1, double y1) const {
        return {at(x0, y0), at(x1, y0), at(x1, y1), at(x0, y1)};
    }

    void describe() {
        plan_.title = "A building drawn by lot";
        plan_.cases = {{"g", CaseKind::dead, false, false, {}, {}, {}},
                       {"q", CaseKind::live, true, true, {}, {}, {}},
                       {"s", CaseKind::snow, false, false, {}, {}, {}}};
        Section timber;
        timber.id = "timber";
        timber.self_weight = 0.12;
        Section steel;
        steel.id = "steel";
        steel.E = 210e6;
        steel.I = 1.2e-4;
        steel.A = 0.0084;
        steel.density = 78.5;
        plan_.sections = {timber, steel};
    }

    void lay_out() {
        const int nx = random_.whole(1, 4);
        const int ny = random_.whole(1, 3);
        xs_.push_back(0);
        for (int i = 0; i < nx; ++i) {
            xs_.push_back(xs_.back() + round_to_twentieths(random_.between(3, 8)));
        }
        ys_.push_back(0);
        for (int i = 0; i < ny; ++i) {
            ys_.push_back(ys_.back() + round_to_twentieths(random_.between(3, 7)));
        }
        storeys_ = static_cast<std::size_t>(random_.whole(1, 4));
        wall_ = random_.chance(0.35);
        overhang_ = random_.chance(0.4) ? random_.between(0.6, 1.6) : 0;
        setback_ = storeys_ > 1 && random_.chance(0.5);
        through_ = random_.chance(0.5);
        for (std::size_t s = 0; s < storeys_; ++s) {
            Level level;
            level.id = "L" + std::to_string(s + 1);
            level.elevation = 3.5 * static_cast<double>(s + 1);
            level.origin.level = static_cast<std::uint32_t>(s);
            plan_.levels.push_back(level);
        }
    }

    void member(Level& level, const std::string& id, Role role, Point from, Point to) {
        Member m;
        m.id = id;
        m.role = role;
        m.from = from;
        m.to = to;
        m.section = role == Role::joist ? "timber" : "steel";
        m.origin.level = level.origin.level;
        m.origin.index = static_cast<std::uint32_t>(level.members.size());
        level.members.push_back(m);
    }

    /// Right end of the floor: the overhang goes past the last row of columns.
    [[nodiscard]] double right() const { return xs_.back() + overhang_; }

    void add_storey(std::size_t s) {
        Level& level = plan_.levels[s];
        add_girders(level);
        add_beams(level);
        add_bays(level);
        add_loads(level, s);
    }

    /// Girders along x on every row: bay by bay, or through all columns with a hinge now and then.
    void add_girders(Level& level) {
        for (std::size_t j = 0; j < ys_.size(); ++j) {
            const std::string row = "G" + std::to_string(j);
            if (through_ || overhang_ > 0) {
                member(level, row, Role::girder, at(0, ys_[j]), at(right(), ys_[j]));
                if (xs_.size() > 3 && random_.chance(0.5)) {
                    level.members.back().hinges.push_back(xs_[1] + 0.2 * (xs_[2] - xs_[1]));
                } else if (random_.chance(0.3)) {
                    level.members.back().cut = overhang_ == 0;
                }
                continue;
            }
            for (std::size_t i = 0; i + 1 < xs_.size(); ++i) {
                member(level, row + "." + std::to_string(i), Role::girder, at(xs_[i], ys_[j]),
                       at(xs_[i + 1], ys_[j]));
            }
        }
    }

    /// Beams along y: on the columns' rows, at the tip of the overhang.
    void add_beams(Level& level) {
        for (std::size_t i = wall_ ? 1 : 0; i < xs_.size(); ++i) {
            for (std::size_t j = 0; j + 1 < ys_.size(); ++j) {
                member(level, "B" + std::to_string(i) + "." + std::to_string(j), Role::beam,
                       at(xs_[i], ys_[j]), at(xs_[i], ys_[j + 1]));
            }
        }
        if (overhang_ > 0) {
            for (std::size_t j = 0; j + 1 < ys_.size(); ++j) {
                member(level, "T" + std::to_string(j), Role::beam, at(right(), ys_[j]),
                       at(right(), ys_[j + 1]));
            }
        }
    }

    void add_bays(Level& level) {
        for (std::size_t j = 0; j + 1 < ys_.size(); ++j) {
            for (std::size_t i = 0; i + 1 < xs_.size(); ++i) {
                add_bay(level, "D" + std::to_string(i) + "." + std::to_string(j), xs_[i], ys_[j], xs_[i + 1],
                        ys_[j + 1]);
            }
            if (overhang_ > 0) {
                deck(level, "DT" + std::to_string(j), rectangle(xs_.back(), ys_[j], right(), ys_[j + 1]), 0,
                     {});
            }
        }
    }

    void deck(Level& level, const std::string& id, Ring outline, double direction,
              std::vector<Ring> openings) {
        Deck d;
        d.id = id;
        d.outline = std::move(outline);
        d.openings = std::move(openings);
        d.direction = direction + placing_.degrees;
        d.q = 0.35;
        d.origin.level = level.origin.level;
        d.origin.index = static_cast<std::uint32_t>(level.decks.size());
        level.decks.push_back(d);
    }

    /// A bay: joists along y that carry strips along x, or none and strips along y from girder to girder; or
    /// skew joists.
    void add_bay(Level& level, const std::string& id, double x0, double y0, double x1, double y1) {
        const double wide = x1 - x0;
        const double deep = y1 - y0;
        const int kind = random_.whole(0, 3);
        std::vector<Ring> openings;
        if (random_.chance(0.3)) {
            const std::array<double, 4> o{
                round_to_twentieths(x0 + 0.3 * wide), round_to_twentieths(y0 + 0.3 * deep),
                round_to_twentieths(x0 + 0.6 * wide), round_to_twentieths(y0 + 0.7 * deep)};
            openings.push_back(rectangle(o[0], o[1], o[2], o[3]));
            openings_.push_back(o);
        }
        if (kind == 0) {
            deck(level, id, rectangle(x0, y0, x1, y1), 90, openings);
            return;
        }
        deck(level, id, rectangle(x0, y0, x1, y1), random_.chance(0.2) ? random_.between(-20, 20) : 0,
             openings);
        if (kind == 1) {
            JoistField field;
            field.id = "J" + id;
            field.outline = rectangle(x0, y0, x1, y1);
            field.direction = 90 + placing_.degrees;
            field.spacing = round_to_twentieths(random_.between(0.4, 1.4));
            field.section = "timber";
            field.origin.level = level.origin.level;
            field.origin.index = static_cast<std::uint32_t>(level.joist_fields.size());
            level.joist_fields.push_back(field);
            return;
        }
        const int n = random_.whole(1, 4);
        for (int k = 1; k <= n; ++k) {
            const double x = round_to_twentieths(x0 + wide * k / (n + 1));
            const double lean =
                kind == 3 ? round_to_twentieths(random_.between(-0.3, 0.3) * wide / (n + 1)) : 0;
            member(level, "S" + id + "." + std::to_string(k), Role::joist, at(x, y0), at(x + lean, y1));
        }
    }

    [[nodiscard]] bool in_opening(double x, double y) const {
        return std::any_of(openings_.begin(), openings_.end(), [&](const std::array<double, 4>& o) {
            return x > o[0] - 0.1 && x < o[2] + 0.1 && y > o[1] - 0.1 && y < o[3] + 0.1;
        });
    }

    void add_loads(Level& level, std::size_t s) {
        const auto area = [&](const std::string& load_case, double q) {
            AreaLoad load;
            load.case_id = load_case;
            load.q = q;
            load.origin.level = level.origin.level;
            load.origin.index = static_cast<std::uint32_t>(level.area_loads.size());
            level.area_loads.push_back(load);
        };
        area("g", random_.between(0.5, 3));
        area("q", random_.between(1.5, 5));
        if (s + 1 == storeys_) {
            area("s", 0.8);
        }
        for (int i = random_.whole(0, 3); i > 0; --i) {
            area(random_.chance(0.5) ? "q" : "g", random_.between(-1, 6));
            const double x = random_.between(-1, xs_.back());
            const double y = random_.between(-1, ys_.back());
            level.area_loads.back().outline =
                rectangle(x, y, x + random_.between(0.5, 6), y + random_.between(0.5, 6));
            level.area_loads.back().replaces = random_.chance(0.3);
            if (i % 2 == 0) { // a ring of load
                const Ring& outline = level.area_loads.back().outline;
                Ring opening;
                for (std::size_t k = 0; k < outline.size(); ++k) {
                    const Point p = outline[k];
                    const Point q = outline[(k + 2) % outline.size()];
                    opening.push_back({0.7 * p.x + 0.3 * q.x, 0.7 * p.y + 0.3 * q.y});
                }
                level.area_loads.back().openings = {std::move(opening)};
            }
        }
        for (int i = random_.whole(0, 3); i > 0; --i) {
            LineLoad load;
            load.case_id = "g";
            load.w_from = random_.between(0, 5);
            load.w_to = random_.between(0, 5);
            const double y = random_.chance(0.3) ? ys_[0] : random_.between(0.05, ys_.back() - 0.05);
            load.from = at(random_.between(0, xs_.back() / 2), y);
            load.to = at(random_.between(xs_.back() / 2, xs_.back()), y);
            if (!openings_.empty()) { // along the first row, where no opening is
                load.from = at(0.1, ys_[0] + 0.05);
                load.to = at(xs_.back(), ys_[0] + 0.2);
            }
            load.origin.level = level.origin.level;
            load.origin.index = static_cast<std::uint32_t>(level.line_loads.size());
            level.line_loads.push_back(load);
        }
        for (int i = random_.whole(0, 4); i > 0; --i) {
            const double x = random_.between(0, xs_.back());
            const double y = random_.between(0, ys_.back());
            if (in_opening(x, y)) {
                continue;
            }
            PointLoad load;
            load.case_id = "q";
            load.p = random_.between(-3, 10);
            load.at = at(x, y);
            load.origin.level = level.origin.level;
            load.origin.index = static_cast<std::uint32_t>(level.point_loads.size());
            level.point_loads.push_back(load);
        }
        openings_.clear();
    }

    void column(const std::string& id, double x, double y, const std::string& base, const std::string& top) {
        Column c;
        c.id = id;
        c.at = at(x, y);
        c.base = base;
        c.top = top;
        c.self_weight = 0.6;
        c.origin.index = static_cast<std::uint32_t>(plan_.columns.size());
        plan_.columns.push_back(c);
    }

    /// Columns from the ground, in one length or storey by storey; a setback's columns stand on girders
    /// instead.
    void add_supports() {
        const std::string top = plan_.levels.back().id;
        for (std::size_t i = wall_ ? 1 : 0; i < xs_.size(); ++i) {
            for (std::size_t j = 0; j < ys_.size(); ++j) {
                const std::string id = "C" + std::to_string(i) + std::to_string(j);
                if (random_.chance(0.4) && storeys_ > 1) {
                    column(id + "a", xs_[i], ys_[j], "ground", "L1");
                    column(id + "b", xs_[i], ys_[j], "L1", top);
                } else {
                    column(id, xs_[i], ys_[j], "ground", top);
                }
            }
        }
        if (wall_) {
            Wall w;
            w.id = "W";
            w.from = at(0, 0);
            w.to = at(0, ys_.back());
            w.top = top;
            w.self_weight = 4.5;
            w.origin.index = 0;
            plan_.walls.push_back(w);
        }
        if (setback_) {
            // A post on the first row's girder that carries a joist-like beam of the top storey at its
            // middle.
            const double x = 0.5 * (xs_[0] + xs_[1]);
            column("P", x, ys_[0], plan_.levels[storeys_ - 2].id, top);
        }
    }

    void reverse() {
        std::reverse(plan_.columns.begin(), plan_.columns.end());
        for (Level& level : plan_.levels) {
            std::reverse(level.members.begin(), level.members.end());
            std::reverse(level.decks.begin(), level.decks.end());
            std::reverse(level.joist_fields.begin(), level.joist_fields.end());
        }
    }

    Random random_;
    Placing placing_;
    Plan plan_;
    std::vector<double> xs_, ys_;
    std::size_t storeys_ = 1;
    bool wall_ = false;
    bool setback_ = false;
    bool through_ = false;
    double overhang_ = 0;
    std::vector<std::array<double, 4>> openings_; ///< of the storey being drawn
};

/// A number that goes with a name, the same on every machine (FNV-1a).
std::uint64_t number_of(const std::string& name) {
    std::uint64_t hash = 14695981039346656037ULL;
    for (const char c : name) {
        hash = (hash ^ static_cast<unsigned char>(c)) * 1099511628211ULL;
    }
    return hash;
}

/// Whether a continuous strip over the deck's joists has spans of like length: strips along the bay's sides,
/// no field with its odd last spacing.
bool is_regular(const Level& level, const Deck& deck, double turned) {
    const double along = std::abs(std::remainder(*deck.direction - turned, 90.0));
    const bool field = std::any_of(level.joist_fields.begin(), level.joist_fields.end(),
                                   [&](const JoistField& f) { return f.id == "J" + deck.id; });
    return along < 1e-9 && !field;
}

void draw_rule(const Level& level, Deck& deck, Random& random, double turned) {
    const double lot = random.fraction();
    if (lot < 0.3) {
        deck.span = SpanKind::two_way;
        deck.corner_angles = random.chance(0.4) ? CornerAngles::by_fixity : CornerAngles::equal;
    } else if (lot < 0.45) {
        deck.span = SpanKind::columns;
    } else if (lot < 0.65 && deck.openings.empty()) {
        deck.share = Share::lever;
    } else if (lot < 0.85 && deck.openings.empty() && is_regular(level, deck, turned)) {
        deck.share = Share::continuous;
    }
    if (deck.span != SpanKind::one_way) {
        deck.direction.reset();
    }
}

} // namespace

void mix_rules(Plan& plan, std::uint64_t seed, const Placing& placing) {
    const double a = placing.degrees * std::numbers::pi / 180;
    const auto at = [&](double x, double y) {
        return Point{placing.shift.x + x * std::cos(a) - y * std::sin(a),
                     placing.shift.y + x * std::sin(a) + y * std::cos(a)};
    };
    for (Level& level : plan.levels) {
        for (Deck& deck : level.decks) {
            Random random(seed ^ number_of(level.id + "/" + deck.id));
            draw_rule(level, deck, random, placing.degrees);
        }
        Random random(seed ^ number_of(level.id));
        AreaLoad drift;
        drift.case_id = random.chance(0.5) ? "s" : "g";
        drift.plane = PlaneOfLoad{{at(0, 0), at(10, 0), at(0, 10)},
                                  {random.between(1, 3), random.between(1, 4), random.between(1, 4)}};
        if (random.chance(0.5)) {
            const double x = random.between(-1, 6);
            const double y = random.between(-1, 6);
            drift.outline = {at(x, y), at(x + 4, y - 0.5), at(x + 2, y + 1), at(x + 3, y + 5)};
        }
        drift.origin.level = level.origin.level;
        drift.origin.index = static_cast<std::uint32_t>(level.area_loads.size());
        level.area_loads.push_back(drift);
    }
}

namespace {

template <class T>
void drop_one(std::vector<T>& list, Random& random) {
    if (!list.empty()) {
        list.erase(list.begin() + random.whole(0, static_cast<int>(list.size()) - 1));
    }
}

} // namespace

void spoil(Plan& plan, Random& random) {
    Level& level =
        plan.levels[static_cast<std::size_t>(random.whole(0, static_cast<int>(plan.levels.size()) - 1))];
    switch (random.whole(0, 13)) {
    case 0:
        drop_one(plan.columns, random);
        break;
    case 1:
        drop_one(level.members, random);
        break;
    case 2:
        drop_one(level.decks, random);
        break;
    case 3: {
        const double size = random.chance(0.5) ? 0.02 : 2;
        for_each_point(plan, [&](Point& p) {
            if (random.chance(0.05)) {
                p = {p.x + random.between(-size, size), p.y + random.between(-size, size)};
            }
        });
        break;
    }
    case 4:
        if (!level.members.empty()) { // drawn twice
            level.members.push_back(level.members[static_cast<std::size_t>(
                random.whole(0, static_cast<int>(level.members.size()) - 1))]);
            level.members.back().id += "twice";
        }
        break;
    case 5:
        for (Member& member : level.members) {
            member.role = static_cast<Role>(random.whole(0, 2));
        }
        break;
    case 6:
        for (Member& member : level.members) {
            if (random.chance(0.2)) {
                member.bears_on.push_back(level
                                              .members[static_cast<std::size_t>(random.whole(
                                                  0, static_cast<int>(level.members.size()) - 1))]
                                              .id);
            }
        }
        break;
    case 7:
        for (Deck& deck : level.decks) {
            deck.direction = random.between(-720, 720);
        }
        break;
    case 8:
        for (Member& member : level.members) {
            member.cut = random.chance(0.3);
            member.fixed_from = random.chance(0.1);
            if (random.chance(0.2)) {
                member.hinges.push_back(random.between(0.1, 2.9));
            }
        }
        break;
    case 9:
        plan.settings.snap = random.chance(0.5) ? 1e-6 : 0.3;
        break;
    case 10:
        for (Deck& deck : level.decks) {
            if (!deck.outline.empty() && random.chance(0.3)) {
                deck.outline.insert(deck.outline.begin() + 1, deck.outline.front());
            }
        }
        break;
    case 11:
        for (Deck& deck : level.decks) {
            deck.span = static_cast<SpanKind>(random.whole(0, 2));
            deck.share = static_cast<Share>(random.whole(0, 2));
            deck.corner_angles = static_cast<CornerAngles>(random.whole(0, 1));
            deck.direction = random.between(-90, 90);
        }
        break;
    case 12:
        for (AreaLoad& load : level.area_loads) {
            load.plane =
                PlaneOfLoad{{Point{0, 0}, Point{random.between(1, 9), 0}, Point{0, random.between(1, 9)}},
                            {random.between(-2, 5), random.between(-2, 5), random.between(-2, 5)}};
        }
        break;
    default:
        for (AreaLoad& load : level.area_loads) {
            load.outline =
                random.star({random.between(0, 10), random.between(0, 10)}, 0.5, 8, random.whole(3, 30));
            load.replaces = random.chance(0.5);
            for (int i = random.whole(0, 2); i > 0; --i) { // some reach outside, some overlap
                load.openings.push_back(
                    random.star({random.between(0, 10), random.between(0, 10)}, 0.1, 2, random.whole(3, 12)));
            }
        }
    }
}

Plan random_building(std::uint64_t seed, const Placing& placing) {
    return Builder(seed, placing).build();
}

} // namespace support
