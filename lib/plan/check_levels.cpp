#include "plan/check_levels.hpp"

#include "geometry/basic.hpp"
#include "plan/problems.hpp"
#include "plan/words.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t none_above = CheckContext::no_level;

Subject level_subject(const CheckContext& context, std::size_t i) {
    return CheckContext::subject(context.plan.levels[i], "levels", "level", i);
}

void check_level_ids(CheckContext& context) {
    for (std::size_t i = 0; i < context.plan.levels.size(); ++i) {
        const Subject subject = level_subject(context, i);
        if (!context.good_id(subject)) {
            continue;
        }
        if (context.plan.levels[i].id == "ground") {
            context.report(subject, ProblemCode::duplicate_id, "/id",
                           "The id ground is taken: it stands for the ground under the building.",
                           "Give the level another id.");
        } else if (const Level* first = context.levels.insert(i)) {
            context.taken(subject, first->origin, "level");
        }
    }
}

void check_elevations(CheckContext& context) {
    const std::vector<Level>& levels = context.plan.levels;
    std::vector<std::size_t> rising;
    for (std::size_t i = 0; i < levels.size(); ++i) {
        if (context.good_number(levels[i].elevation, level_subject(context, i), "/elevation",
                                dimension::length)) {
            rising.push_back(i);
        }
    }
    std::stable_sort(rising.begin(), rising.end(),
                     [&](std::size_t l, std::size_t r) { return levels[l].elevation < levels[r].elevation; });
    for (std::size_t k = 1; k < rising.size(); ++k) {
        const auto [first, second] = std::minmax(rising[k - 1], rising[k]);
        if (levels[rising[k]].elevation - levels[rising[k - 1]].elevation <= context.snap) {
            const Subject subject = level_subject(context, second);
            Problem& problem =
                context.report(subject, ProblemCode::elevation_taken, "/elevation",
                               subject.name() + " is at " + context.lengths(levels[second].elevation) +
                                   ", where " + level_subject(context, first).name() +
                                   " is already (within `snap`, " + context.lengths(context.snap) + ").");
            problem.ids.push_back(levels[first].id);
        }
    }
}

void check_like(CheckContext& context) {
    const std::vector<Level>& levels = context.plan.levels;
    for (std::size_t i = 0; i < levels.size(); ++i) {
        if (!levels[i].like.empty()) {
            const Level* like = context.refer(levels[i].like, context.levels, "level", context.doubts.levels,
                                              level_subject(context, i), "/like");
            context.like[i] = like == nullptr ? CheckContext::no_level
                                              : static_cast<std::uint32_t>(context.levels.index_of(like));
        }
    }
    // A level repeats one other at most, so a loop is found by following; each level is followed once.
    std::vector<std::size_t> walk_of(levels.size(), none_above);
    for (std::size_t start = 0; start < levels.size(); ++start) {
        std::size_t at = start;
        while (at != none_above && walk_of[at] == none_above) {
            walk_of[at] = start;
            at = context.like[at];
        }
        if (at == none_above || walk_of[at] != start) {
            continue;
        }
        std::string loop = levels[at].id;
        std::vector<std::string> ids;
        for (std::size_t next = context.like[at]; next != at; next = context.like[next]) {
            loop += ", " + levels[next].id;
            ids.push_back(levels[next].id);
        }
        Problem& problem =
            context.report(level_subject(context, at), ProblemCode::like_loop, "/like",
                           "Levels repeat each other in a loop: " + loop + ", " + levels[at].id + '.',
                           "One of them must list what stands on it.");
        problem.ids.insert(problem.ids.end(), ids.begin(), ids.end());
        context.like[at] = CheckContext::no_level; // what follows may walk up in peace
    }
}

} // namespace

void check_level_list(CheckContext& context) {
    check_level_ids(context);
    check_elevations(context);
    check_like(context);
}

LevelIndex::LevelIndex(CheckContext& context) : context_(context) {
    for (const Level& level : context.plan.levels) {
        ids.push_back({IdIndex<Member>(level.members), IdIndex<JoistField>(level.joist_fields),
                       IdIndex<Deck>(level.decks)});
    }
}

template <class Found>
auto LevelIndex::through_like(std::size_t level, Found found) const -> decltype(found(ids[0])) {
    while (level != none_above) {
        if (auto item = found(ids[level])) {
            return item;
        }
        level = context_.like[level];
    }
    return {};
}

const Member* LevelIndex::member(std::size_t level, std::string_view id) const {
    return through_like(level, [&](const Ids& here) { return here.members.find(id); });
}

const Deck* LevelIndex::deck(std::size_t level, std::string_view id) const {
    return through_like(level, [&](const Ids& here) { return here.decks.find(id); });
}

bool LevelIndex::is_joist(std::size_t level, std::string_view id) const {
    for (std::size_t dot = id.find('.'); dot != std::string_view::npos; dot = id.find('.', dot + 1)) {
        std::string_view number = id.substr(dot + 1);
        const std::size_t piece = number.find('.');
        const auto digits = [](std::string_view text) {
            return !text.empty() && text.front() != '0' &&
                   text.find_first_not_of("0123456789") == std::string_view::npos;
        };
        if (piece != std::string_view::npos && !digits(number.substr(piece + 1))) {
            continue;
        }
        number = number.substr(0, piece);
        const JoistField* field =
            through_like(level, [&](const Ids& here) { return here.fields.find(id.substr(0, dot)); });
        if (field == nullptr || !digits(number)) {
            continue;
        }
        double value = 0;
        for (const char c : number) {
            value = value * 10 + (c - '0');
        }
        const double joists = joists_of(*field);
        if (!(value > joists)) { // also where the field's own faults leave its number open
            return true;
        }
    }
    return false;
}

std::optional<std::string_view> LevelIndex::local_id(std::size_t level, std::string_view id) const {
    const std::size_t slash = id.find('/');
    if (slash == std::string_view::npos) {
        return id;
    }
    return id.substr(0, slash) == context_.plan.levels[level].id ? std::optional(id.substr(slash + 1))
                                                                 : std::nullopt;
}

namespace {

/// Ids within a level; a member's also against the columns and walls that are bearings where it stands.
void check_level_item_ids(CheckContext& context, LevelIndex& index) {
    const std::vector<Level>& levels = context.plan.levels;
    std::vector<std::vector<std::uint32_t>> repeated_by(levels.size());
    for (std::uint32_t i = 0; i < levels.size(); ++i) {
        if (context.like[i] != CheckContext::no_level) {
            repeated_by[context.like[i]].push_back(i);
        }
    }
    const auto clashes = [&](std::uint32_t level, const auto& support) {
        std::vector<std::uint32_t> stands_on{level};
        for (std::size_t k = 0; k < stands_on.size(); ++k) {
            const double elevation = levels[stands_on[k]].elevation;
            if (context.bears_at(support, elevation)) {
                return true;
            }
            const auto& more = repeated_by[stands_on[k]];
            stands_on.insert(stands_on.end(), more.begin(), more.end());
        }
        return false;
    };
    const auto enter = [&](auto& ids, const auto& items, std::string_view list, std::string_view noun,
                           std::uint32_t level) {
        for (std::size_t i = 0; i < items.size(); ++i) {
            const Subject subject = CheckContext::subject(items[i], list, noun, i, level);
            if (!context.good_id(subject)) {
                continue;
            }
            if (const auto* first = ids.insert(i)) {
                context.taken(subject, first->origin, noun);
            }
        }
    };
    for (std::uint32_t l = 0; l < levels.size(); ++l) {
        enter(index.ids[l].members, levels[l].members, "members", "member", l);
        enter(index.ids[l].fields, levels[l].joist_fields, "joist_fields", "joist field", l);
        enter(index.ids[l].decks, levels[l].decks, "decks", "deck", l);
        for (std::size_t i = 0; i < levels[l].members.size(); ++i) {
            const Member& member = levels[l].members[i];
            const Subject subject = CheckContext::subject(member, "members", "member", i, l);
            const Column* column = context.columns.find(member.id);
            const Wall* wall = context.walls.find(member.id);
            if (column != nullptr && clashes(l, *column)) {
                context.taken(subject, column->origin, "column");
            } else if (wall != nullptr && clashes(l, *wall)) {
                context.taken(subject, wall->origin, "wall");
            }
        }
    }
}

} // namespace

void check_levels(CheckContext& context) {
    LevelIndex index(context);
    check_level_item_ids(context, index);
    for (std::size_t level = 0; level < context.plan.levels.size(); ++level) {
        check_members(context, index, level);
        check_joist_fields(context, level);
        check_decks(context, level);
        check_loads(context, index, level);
    }
    check_later_references(context, index);
}

double joists_of(const JoistField& field) {
    if (field.outline.empty() || !(field.spacing > 0) || !std::isfinite(field.direction)) {
        return std::numeric_limits<double>::quiet_NaN();
    }
    const double angle = field.direction * std::numbers::pi / 180;
    const Point normal{-std::sin(angle), std::cos(angle)};
    double low = std::numeric_limits<double>::infinity();
    double high = -low;
    for (const Point& p : field.outline) {
        low = std::min(low, dot(p, normal));
        high = std::max(high, dot(p, normal));
    }
    constexpr double first_and_edge = 2;
    return std::floor((high - low) / field.spacing) + first_and_edge;
}

void check_amounts(CheckContext& context) {
    const std::vector<Level>& levels = context.plan.levels;
    const auto limit = static_cast<double>(context.limits.members);
    const std::string limit_text = std::to_string(context.limits.members);
    if (levels.size() > context.limits.levels) {
        context.report({{}, "", "plan", {}}, ProblemCode::too_much, "/levels",
                       "The plan has " + std::to_string(levels.size()) + " levels; the limit is " +
                           std::to_string(context.limits.levels) + '.');
        return;
    }
    std::vector<double> own(levels.size());
    bool told = false;
    for (std::size_t l = 0; l < levels.size(); ++l) {
        own[l] = static_cast<double>(levels[l].members.size());
        for (std::size_t i = 0; i < levels[l].joist_fields.size(); ++i) {
            const JoistField& field = levels[l].joist_fields[i];
            const double joists = joists_of(field);
            if (joists > limit) {
                const Subject subject = CheckContext::subject(field, "joist_fields", "joist field", i,
                                                              static_cast<std::uint32_t>(l));
                context.report(subject, ProblemCode::too_much, "/spacing",
                               subject.name() + " asks for " + text_of(joists) + " joists at a spacing of " +
                                   context.lengths(field.spacing) + "; the limit is " + limit_text +
                                   " members in the whole plan.");
                told = true;
            }
            own[l] += std::isfinite(joists) ? joists : 0;
        }
    }
    double all = 0;
    for (std::size_t l = 0; l < levels.size(); ++l) {
        for (std::size_t at = l; at != none_above; at = context.like[at]) {
            all += own[at];
        }
    }
    if (all > limit && !told) {
        context.report({{}, "", "plan", {}}, ProblemCode::too_much, "/levels",
                       "With joists and repeated levels the plan asks for " + text_of(all) +
                           " members; the limit is " + limit_text + '.');
    }
}

RUNNEL_NAMESPACE_END
