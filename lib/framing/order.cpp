#include "framing/order.hpp"

#include "framing/place.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

class PathOrder {
public:
    explicit PathOrder(LevelDraft& draft)
        : draft_(draft), members_(static_cast<std::uint32_t>(draft.level.members.size())),
          waiting_for_(members_, 0), done_(members_, 0) {}

    void run() {
        count_resting();
        std::vector<std::uint32_t> order;
        order.reserve(members_);
        for (std::uint32_t m = 0; m < members_; ++m) {
            if (waiting_for_[m] == 0) {
                order.push_back(m);
            }
        }
        // The list itself is the queue.
        for (std::size_t next = 0; next < order.size(); ++next) {
            done_[order[next]] = 1;
            for (const Bearing& bearing : draft_.level.bearings[order[next]]) {
                if (bearing.on.kind == CarrierKind::member && --waiting_for_[bearing.on.index] == 0) {
                    order.push_back(bearing.on.index);
                }
            }
        }
        if (order.size() < members_) {
            report_loops();
            for (std::uint32_t m = 0; m < members_; ++m) {
                if (!done_[m]) {
                    order.push_back(m);
                }
            }
        }
        draft_.level.order.reserve(members_, members_);
        for (const std::uint32_t m : order) {
            draft_.level.order.push(m);
            draft_.level.order.end_group();
        }
    }

private:
    void count_resting() {
        for (const Bearing& bearing : draft_.level.bearings.items()) {
            if (bearing.on.kind == CarrierKind::member) {
                ++waiting_for_[bearing.on.index];
            }
        }
    }

    /// What is left over is in a loop, or carries something that is. So every one of them carries another
    /// that is left over: going up from one to the next leads round a loop.
    void report_loops() {
        const std::vector<std::uint32_t> resting = one_resting_on_each();
        std::vector<std::uint32_t> walk_of(members_, 0);
        std::vector<std::uint32_t> loop;
        std::uint32_t walk = 0;
        for (const std::uint32_t start : left_over_by_id()) {
            ++walk;
            std::uint32_t m = start;
            for (; walk_of[m] == 0; m = resting[m]) {
                walk_of[m] = walk;
            }
            if (walk_of[m] != walk) {
                continue; // a loop that has been reported
            }
            loop.clear();
            std::uint32_t next = m;
            do {
                loop.push_back(next);
                next = resting[next];
            } while (next != m);
            std::reverse(loop.begin(), loop.end());
            std::rotate(loop.begin(),
                        std::min_element(loop.begin(), loop.end(),
                                         [&](std::uint32_t a, std::uint32_t b) { return id(a) < id(b); }),
                        loop.end());
            report(loop);
        }
    }

    [[nodiscard]] const std::string& id(std::uint32_t m) const { return draft_.level.members[m].id; }

    /// By id, so that the loops that are named do not depend on the order of the list.
    [[nodiscard]] std::vector<std::uint32_t> left_over_by_id() const {
        std::vector<std::uint32_t> members;
        for (std::uint32_t m = 0; m < members_; ++m) {
            if (!done_[m]) {
                members.push_back(m);
            }
        }
        std::sort(members.begin(), members.end(),
                  [&](std::uint32_t a, std::uint32_t b) { return id(a) < id(b); });
        return members;
    }

    [[nodiscard]] std::vector<std::uint32_t> one_resting_on_each() const {
        std::vector<std::uint32_t> resting(members_, none);
        for (const std::uint32_t m : left_over_by_id()) {
            for (const Bearing& bearing : draft_.level.bearings[m]) {
                if (bearing.on.kind == CarrierKind::member && resting[bearing.on.index] == none) {
                    resting[bearing.on.index] = m;
                }
            }
        }
        return resting;
    }

    void report(const std::vector<std::uint32_t>& loop) {
        draft_.problems.add(ProblemCode::load_path_loop, [&] {
            std::vector<std::string> ids;
            std::string text;
            for (const std::uint32_t m : loop) {
                ids.push_back(label_of(draft_, m));
                if (ids.size() <= ids_in_a_sentence) {
                    text += ids.back() + " bears on ";
                }
            }
            if (ids.size() > ids_in_a_sentence) {
                text += std::to_string(ids.size() - ids_in_a_sentence) + " more, the last of them on ";
            }
            text += ids.front();
            const auto bearings = draft_.level.bearings[loop.front()];
            const auto first = std::find_if(bearings.begin(), bearings.end(), [&](const Bearing& b) {
                return b.on == Carrier{CarrierKind::member, loop[1 % loop.size()]};
            });
            const Point at = first == bearings.end() ? draft_.level.members[loop.front()].from : first->at;
            return member_problem(draft_, ProblemCode::load_path_loop, loop.front(),
                                  "The load path runs in a loop: " + text + '.',
                                  "Carry one of them elsewhere, or change a role or a `bears_on`.",
                                  std::move(ids), at);
        });
    }

    LevelDraft& draft_;
    std::uint32_t members_;
    std::vector<std::uint32_t> waiting_for_;
    std::vector<std::uint8_t> done_;
};

} // namespace

void order_load_path(LevelDraft& draft) {
    PathOrder(draft).run();
}

RUNNEL_NAMESPACE_END
