#include "report/names.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {

template <class Things, class Levels>
void enter(const Things& things, std::uint32_t level, Levels& levels) {
    for (const auto& thing : things) {
        const auto [place, is_new] = levels.emplace(thing.id, level);
        if (!is_new && place->second != level) {
            place->second = none;
        }
    }
}

} // namespace

Names::Names(const Plan& plan, const Framing& framing) : plan_(plan), framing_(framing) {
    for (std::uint32_t l = 0; l < framing.levels.size(); ++l) {
        enter(framing.levels[l].members, l, members_);
        enter(framing.levels[l].decks, l, decks_);
    }
}

std::string_view Names::carrier(std::uint32_t level, Carrier carrier) const {
    switch (carrier.kind) {
    case CarrierKind::member:
        return framing_.levels[level].members[carrier.index].id;
    case CarrierKind::column:
        return plan_.columns[carrier.index].id;
    case CarrierKind::wall:
        return plan_.walls[carrier.index].id;
    }
    return {};
}

std::string Names::carrier_anywhere(std::uint32_t level, Carrier carrier) const {
    const std::string_view id = this->carrier(level, carrier);
    return carrier.kind == CarrierKind::member ? qualified(members_, level, id) : std::string(id);
}

std::string Names::source(std::uint32_t level, Source source) const {
    switch (source.kind) {
    case SourceKind::deck:
        return framing_.levels[level].decks[source.index].id;
    case SourceKind::own_weight:
        return "own_weight";
    case SourceKind::line_load:
        return "line_loads[" + std::to_string(source.index) + ']';
    case SourceKind::point_load:
        return "point_loads[" + std::to_string(source.index) + ']';
    case SourceKind::member:
        return std::string(carrier(level, {CarrierKind::member, source.index}));
    case SourceKind::column:
        return std::string(carrier(level, {CarrierKind::column, source.index}));
    case SourceKind::wall:
        return std::string(carrier(level, {CarrierKind::wall, source.index}));
    }
    return {};
}

std::string Names::source_anywhere(std::uint32_t level, Source source) const {
    if (source.kind == SourceKind::member) {
        return carrier_anywhere(level, {CarrierKind::member, source.index});
    }
    std::string name = this->source(level, source);
    return source.kind == SourceKind::deck ? qualified(decks_, level, name) : name;
}

std::string_view Names::kind(CarrierKind kind) {
    switch (kind) {
    case CarrierKind::member:
        return "member";
    case CarrierKind::column:
        return "column";
    case CarrierKind::wall:
        return "wall";
    }
    return {};
}

std::string Names::qualified(const Levels& levels, std::uint32_t level, std::string_view id) const {
    const auto found = levels.find(id);
    const bool on_several = found != levels.end() && found->second == none;
    return on_several ? framing_.levels[level].id + '/' + std::string(id) : std::string(id);
}

RUNNEL_NAMESPACE_END
