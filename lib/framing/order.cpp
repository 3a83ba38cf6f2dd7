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

    /// Follows bearings from each member left over, back to one already met on this walk. Members behind a
    /// loop are left over too; every way down from them that is not done leads into one.
    void report_loops() {
        std::vector<std::uint32_t> walk_of(members_, 0);
        std::vector<std::uint32_t> loop;
        std::uint32_t walk = 0;
        for (std::uint32_t start = 0; start < members_; ++start) {
            std::uint32_t m = start;
            ++walk;
            while (m != none && !done_[m] && walk_of[m] == 0) {
                walk_of[m] = walk;
                m = carrier_in_loop(m);
            }
            if (m == none || done_[m] || walk_of[m] != walk) {
                continue;
            }
            loop.clear();
            std::uint32_t next = m;
            do {
                loop.push_back(next);
                next = carrier_in_loop(next);
            } while (next != m);
            report(loop);
        }
    }

    [[nodiscard]] std::uint32_t carrier_in_loop(std::uint32_t m) const {
        for (const Bearing& bearing : draft_.level.bearings[m]) {
            if (bearing.on.kind == CarrierKind::member && !done_[bearing.on.index]) {
                return bearing.on.index;
            }
        }
        return none;
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
