#include "plan/json_events.hpp"

#include <runnel/plan.hpp>
#include <runnel/problem.hpp>

#include <algorithm>
#include <charconv>
#include <map>
#include <optional>
#include <string>
#include <utility>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// The pointers that are looked for, as a tree of their steps, so that the walk compares only where it may
/// meet one of them.
class WantedTree {
public:
    static constexpr std::uint32_t nothing = 0xffffffff;

    WantedTree() : steps_(1) {}

    std::uint32_t add(std::string_view pointer) {
        std::uint32_t node = 0;
        while (!pointer.empty()) {
            node = step(node, take_token(pointer));
        }
        return node;
    }
    [[nodiscard]] std::uint32_t child(std::uint32_t node, std::string_view token) const {
        if (node == nothing) {
            return nothing;
        }
        const auto it = steps_[node].children.find(token);
        return it == steps_[node].children.end() ? nothing : it->second;
    }
    [[nodiscard]] bool has_children(std::uint32_t node) const {
        return node != nothing && !steps_[node].children.empty();
    }
    void found(std::uint32_t node, std::uint32_t at) {
        if (node != nothing && !steps_[node].at) {
            steps_[node].at = at;
        }
    }
    /// Of the node, or else of the nearest thing around it that is there.
    [[nodiscard]] std::optional<std::uint32_t> place_of(std::uint32_t node) const {
        while (!steps_[node].at && node != 0) {
            node = steps_[node].up;
        }
        return steps_[node].at;
    }

private:
    struct Step {
        std::map<std::string, std::uint32_t, std::less<>> children;
        std::uint32_t up = 0;
        std::optional<std::uint32_t> at;
    };

    static std::string take_token(std::string_view& pointer) {
        pointer.remove_prefix(1);
        const std::size_t end = std::min(pointer.find('/'), pointer.size());
        std::string token;
        for (std::size_t i = 0; i < end; ++i) {
            const bool escaped = pointer[i] == '~' && i + 1 < end;
            token += escaped ? (pointer[i + 1] == '1' ? '/' : '~') : pointer[i];
            i += escaped ? 1 : 0;
        }
        pointer.remove_prefix(end);
        return token;
    }
    std::uint32_t step(std::uint32_t node, std::string token) {
        const auto next = static_cast<std::uint32_t>(steps_.size());
        const auto [it, is_new] = steps_[node].children.emplace(std::move(token), next);
        const std::uint32_t result = it->second;
        if (is_new) {
            steps_.emplace_back();
            steps_.back().up = node;
        }
        return result;
    }

    std::vector<Step> steps_;
};

class Locator final : public JsonReceiver {
public:
    explicit Locator(WantedTree& wanted) : wanted_(wanted) {}

    bool scalar(JsonKind /*kind*/, double /*number*/, std::string_view /*text*/, std::uint32_t at) override {
        wanted_.found(next_value(), at);
        return true;
    }
    bool key(std::string_view name, std::uint32_t /*at*/) override {
        Level& level = levels_.back();
        level.child = wanted_.child(level.node, name);
        return true;
    }
    bool open(JsonKind kind, std::uint32_t at) override {
        const std::uint32_t node = levels_.empty() ? 0 : next_value();
        wanted_.found(node, at);
        levels_.push_back({node, WantedTree::nothing, 0, kind == JsonKind::array});
        return true;
    }
    bool close() override {
        levels_.pop_back();
        return true;
    }

private:
    struct Level {
        std::uint32_t node;
        std::uint32_t child; ///< of the key last read
        std::uint32_t index;
        bool is_list;
    };

    std::uint32_t next_value() {
        if (levels_.empty()) {
            return 0;
        }
        Level& level = levels_.back();
        if (!level.is_list) {
            return level.child;
        }
        const std::uint32_t index = level.index++;
        if (!wanted_.has_children(level.node)) {
            return WantedTree::nothing;
        }
        constexpr std::size_t digits = 10;
        std::array<char, digits> text;
        const auto [end, error] = std::to_chars(text.data(), text.data() + text.size(), index);
        return wanted_.child(level.node, {text.data(), static_cast<std::size_t>(end - text.data())});
    }

    WantedTree& wanted_;
    std::vector<Level> levels_;
};

} // namespace

void locate_problems(std::string_view text, std::span<Problem> problems) {
    WantedTree wanted;
    std::vector<std::pair<std::uint32_t, std::size_t>> asked; // step of the tree, problem
    for (std::size_t i = 0; i < problems.size(); ++i) {
        if (problems[i].line == 0 && !problems[i].pointer.empty() && problems[i].pointer.front() == '/') {
            asked.emplace_back(wanted.add(problems[i].pointer), i);
        }
    }
    if (asked.empty()) {
        return;
    }
    Locator locator(wanted);
    (void)walk_json(text, Limits{}.nesting, locator);

    std::vector<std::pair<std::uint32_t, std::size_t>> places; // offset, problem
    for (const auto& [step, problem] : asked) {
        if (const std::optional<std::uint32_t> at = wanted.place_of(step)) {
            places.emplace_back(*at, problem);
        }
    }
    std::sort(places.begin(), places.end());
    LineCounter lines(text);
    for (const auto& [at, problem] : places) {
        const LineCounter::Place place = lines.place_of(at);
        problems[problem].line = place.line;
        problems[problem].column = place.column;
    }
}

RUNNEL_NAMESPACE_END
