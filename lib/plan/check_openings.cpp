#include "plan/check_levels.hpp"

#include "geometry/box_tree.hpp"
#include "plan/problems.hpp"
#include "plan/ring_checks.hpp"

#include <optional>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

struct Opening {
    std::size_t index;
    Ring ring;
};

/// Each opening with the first one before it that it shares area with.
void check_overlaps(CheckContext& context, const std::vector<Opening>& openings, const Subject& subject) {
    if (openings.size() < 2) {
        return;
    }
    std::vector<Box> boxes;
    for (const Opening& opening : openings) {
        // Less than `snap` is no overlap: neighbours that only touch are not even looked at.
        boxes.push_back(box_of(opening.ring).grown(-context.snap / 2));
    }
    std::vector<std::optional<RingQuery>> queries(openings.size());
    const auto query = [&](std::size_t i) -> const RingQuery& {
        if (!queries[i]) {
            queries[i].emplace(openings[i].ring, context.snap);
        }
        return *queries[i];
    };
    const BoxTree tree(boxes);
    std::vector<std::uint32_t> near;
    constexpr std::size_t most = 100; // of one outline: the rest is the same mistake
    std::size_t told = 0;
    for (std::uint32_t i = 1; i < openings.size() && told < most; ++i) {
        tree.find(boxes[i], near);
        for (const std::uint32_t k : near) {
            if (k >= i) {
                break;
            }
            if (const auto p = shared_point(query(i), openings[i].ring, query(k), openings[k].ring)) {
                ++told;
                context
                    .report(subject, ProblemCode::openings_overlap,
                            "/openings/" + std::to_string(openings[i].index),
                            "Openings " + std::to_string(openings[k].index) + " and " +
                                std::to_string(openings[i].index) + " of " + subject.name() +
                                " share area around " + point_text(*p, context.plan.units) +
                                (told == most ? "; no more of its overlaps are listed." : "."),
                            "Draw them as one opening.")
                    .point = *p;
                break;
            }
        }
    }
}

} // namespace

void check_openings(CheckContext& context, const std::vector<Ring>& openings, const Ring& outline,
                    const Subject& subject, ProblemCode outside) {
    std::optional<RingQuery> query;
    if (!outline.empty()) {
        query.emplace(outline, context.snap);
    }
    std::vector<Opening> good;
    for (std::size_t i = 0; i < openings.size(); ++i) {
        const std::string inside = "/openings/" + std::to_string(i);
        Ring ring = context.good_ring(openings[i], subject, inside);
        if (ring.empty()) {
            continue;
        }
        if (const auto p = query ? query->point_beyond(ring, Side::outside) : std::nullopt) {
            context
                .report(subject, outside, inside,
                        "Opening " + std::to_string(i) + " of " + subject.name() +
                            " reaches outside its outline at " + point_text(*p, context.plan.units) +
                            ", by more than `snap`, " + context.lengths(context.snap) + '.',
                        "Let it end at the outline, or draw the outline around it.")
                .point = *p;
        }
        good.push_back({i, std::move(ring)});
    }
    check_overlaps(context, good, subject);
}

RUNNEL_NAMESPACE_END
