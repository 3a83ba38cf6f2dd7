#pragma once

#include <runnel/framing.hpp>

#include <string>
#include <string_view>
#include <unordered_map>

RUNNEL_NAMESPACE_BEGIN

/// How problems name a member: by its id, or as LEVEL/ID where several levels have one of that id. Looked up
/// only once somebody asks, since most takedowns have nothing to say. The framing must outlive it.
class MemberNames {
public:
    explicit MemberNames(const Framing& framing) : framing_(framing) {}

    [[nodiscard]] std::string of(std::size_t level, std::size_t member) {
        const std::string& id = framing_.levels[level].members[member].id;
        if (framing_.levels.size() > 1 && levels_with_.empty()) {
            for (const FramedLevel& framed : framing_.levels) {
                for (const FramedMember& other : framed.members) {
                    ++levels_with_[other.id];
                }
            }
        }
        const auto found = levels_with_.find(id);
        const bool several = found != levels_with_.end() && found->second > 1;
        return several ? framing_.levels[level].id + '/' + id : id;
    }

private:
    const Framing& framing_;
    std::unordered_map<std::string_view, std::size_t> levels_with_;
};

RUNNEL_NAMESPACE_END
