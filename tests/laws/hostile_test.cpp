#include "support/building_support.hpp"

#include <runnel/takedown.hpp>

#include <doctest/doctest.h>

#include <algorithm>
#include <string>

using namespace runnel;
using support::Random;

namespace {

std::string texts_of(std::span<const Problem> problems) {
    std::string text;
    for (const Problem& problem : problems) {
        if (problem.severity == Severity::error) {
            text += std::string(kind_of(problem.code).name) + ": " + problem.message + "\n";
        }
    }
    return text;
}

template <class F>
void for_each_point(Plan& plan, F f) {
    for (Column& column : plan.columns) {
        f(column.at);
    }
    for (Level& level : plan.levels) {
        for (Member& member : level.members) {
            f(member.from);
            f(member.to);
        }
        for (Deck& deck : level.decks) {
            for (Point& p : deck.outline) {
                f(p);
            }
            for (Ring& opening : deck.openings) {
                for (Point& p : opening) {
                    f(p);
                }
            }
        }
    }
}

template <class T>
void drop_one(std::vector<T>& list, Random& random) {
    if (!list.empty()) {
        list.erase(list.begin() + random.whole(0, static_cast<int>(list.size()) - 1));
    }
}

/// Something that a tired hand does to a plan.
void spoil(Plan& plan, Random& random) {
    Level& level =
        plan.levels[static_cast<std::size_t>(random.whole(0, static_cast<int>(plan.levels.size()) - 1))];
    switch (random.whole(0, 11)) {
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
    default:
        for (AreaLoad& load : level.area_loads) {
            load.outline =
                random.star({random.between(0, 10), random.between(0, 10)}, 0.5, 8, random.whole(3, 30));
            load.replaces = random.chance(0.5);
        }
    }
}

/// Checks and takes down as the command line does; true when it came to an end without errors.
bool survives(const Plan& plan, std::string& errors) {
    const std::vector<Problem> problems = check_plan(plan);
    if (has_errors(problems)) {
        errors = texts_of(problems);
        return false;
    }
    const Takedown takedown = take_down(plan);
    errors = texts_of(takedown.problems);
    CHECK(takedown.complete == errors.empty());
    if (!takedown.complete) {
        return false;
    }
    const std::vector<Problem> broken = check_balance(takedown);
    CHECK_MESSAGE(broken.empty(), texts_of(broken));
    return true;
}

} // namespace

TEST_CASE("points drawn a little beside each other, within snap, change nothing that matters") {
    const std::uint64_t seed = support::seed_of_run(500);
    MESSAGE("seed " << seed);
    for (std::uint64_t i = 0; i < 150; ++i) {
        CAPTURE(i);
        Plan plan = support::random_building(seed + i);
        Random random(seed + i);
        const double reach = 0.25 * plan.settings.snap; // two of these in both directions stay within snap
        for_each_point(plan, [&](Point& p) {
            p = {p.x + random.between(-reach, reach), p.y + random.between(-reach, reach)};
        });
        std::string errors;
        CHECK_MESSAGE(survives(plan, errors), errors);
    }
}

TEST_CASE("spoilt plans are refused with a reason or carried to the ground, never half") {
    const std::uint64_t seed = support::seed_of_run(9000);
    MESSAGE("seed " << seed);
    int refused = 0;
    int carried = 0;
    for (std::uint64_t i = 0; i < 600; ++i) {
        CAPTURE(i);
        Plan plan = support::random_building(seed + i);
        Random random(seed + i);
        for (int k = random.whole(1, 3); k > 0; --k) {
            spoil(plan, random);
        }
        std::string errors;
        if (survives(plan, errors)) {
            ++carried;
        } else {
            ++refused;
        }
    }
    MESSAGE(refused << " refused, " << carried << " carried");
    CHECK(refused > 50);
    CHECK(carried > 50);
}
