#include "plan/plan_receiver.hpp"

#include "plan/look_ahead.hpp"
#include "plan/words.hpp"

#include <algorithm>
#include <span>
#include <utility>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::uint32_t bit(PlanKey key) {
    return std::uint32_t{1} << static_cast<std::uint32_t>(key);
}

} // namespace

PlanReceiver::PlanReceiver(ReadingContext& context, Plan& plan) : context_(context), plan_(plan) {
    plan_.defaults_used = {"snap", "ground_elevation", "share", "self_weight_case"};
}

void PlanReceiver::report_here(ProblemCode code, std::uint32_t at, std::string pointer, std::string message,
                               std::string hint) {
    Problem problem;
    problem.code = code;
    problem.severity = kind_of(code).severity;
    problem.message = std::move(message);
    problem.hint = std::move(hint);
    problem.pointer = std::move(pointer);
    if (in_level_ && !level_.id.empty() && level_.id != unread::id) {
        problem.ids.push_back(level_.id);
    }
    context_.log.add_at(at, std::move(problem));
}

std::string PlanReceiver::owner_here() const {
    if (!in_level_) {
        return "the plan";
    }
    return level_.id.empty() || level_.id == unread::id ? level_place_.element()
                                                        : "level " + shown(level_.id);
}

std::string_view PlanReceiver::noun_here() const {
    return in_level_ ? "level" : "plan";
}

bool PlanReceiver::scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) {
    if (skipping_) {
        skipping_ = skip_depth_ > 0;
        return true;
    }
    if (!capturing_ && !begin_value(kind, at)) {
        skipping_ = false;
        return true;
    }
    tree_.scalar(kind, number, text, at);
    if (tree_.whole()) {
        capture_done();
    }
    return !is_other_document_;
}

bool PlanReceiver::key(std::string_view name, std::uint32_t at) {
    if (skipping_) {
        return true;
    }
    if (capturing_) {
        tree_.key(name, at);
        return true;
    }
    const std::span<const KeyRow> rows = in_level_ ? keys_of_level() : keys_of_plan();
    const KeyRow* row = row_named(rows, name);
    const std::string where = owner_here();
    if (row == nullptr) {
        std::vector<std::string_view> known;
        for (const KeyRow& each : rows) {
            known.push_back(each.name);
        }
        report_here(ProblemCode::unknown_key, at, Place::of_key(place_here(), name).pointer(),
                    "A key `" + shown(name) + "` is unknown in " + where + '.',
                    hint_for(name, known, "Known are "));
        skipping_ = true;
        return true;
    }
    Keys& seen = in_level_ ? level_keys_ : plan_keys_;
    if ((seen & bit(row->key)) != 0) {
        report_here(ProblemCode::duplicate_key, at, Place::of_key(place_here(), name).pointer(),
                    '`' + std::string(name) + "` stands twice in " + where + "; the first counts.",
                    row->is_list ? "Put both lists into one." : "Leave one of them out.");
        skipping_ = true;
        return true;
    }
    seen |= bit(row->key);
    key_ = row->key;
    return true;
}

/// Decides what is done with a value that begins: true if it is to be captured.
bool PlanReceiver::begin_value(JsonKind kind, std::uint32_t at) {
    const bool is_object = kind == JsonKind::object;
    if (!in_plan_) {
        plan_at_ = at;
        if (is_object) {
            in_plan_ = true;
            return false;
        }
    } else if (in_list_) {
        if (!may_keep_item(at)) {
            skipping_ = true;
            return false;
        }
    } else if (in_levels_ && !in_level_) {
        level_place_ = Place::of_index(&levels_place_, level_count_++);
        if (level_count_ > context_.limits.levels) {
            if (level_count_ == context_.limits.levels + 1) {
                report_here(ProblemCode::too_much, at, level_place_.pointer(),
                            "The plan has more than " + std::to_string(context_.limits.levels) +
                                " levels, the limit; the rest is not read.");
            }
            doubts_.levels = true;
            skipping_ = true;
            return false;
        }
        if (is_object) {
            begin_level(at);
            return false;
        }
    } else if (kind == JsonKind::array && is_list(key_)) {
        enter_list(at);
        return false;
    }
    capturing_ = true;
    tree_.clear();
    return true;
}

bool PlanReceiver::open(JsonKind kind, std::uint32_t at) {
    if (skipping_) {
        ++skip_depth_;
        return true;
    }
    if (!capturing_ && !begin_value(kind, at)) {
        skip_depth_ = skipping_ ? 1 : 0;
        return true;
    }
    tree_.open(kind, at);
    return true;
}

bool PlanReceiver::close() {
    if (skipping_) {
        skipping_ = --skip_depth_ > 0;
    } else if (capturing_) {
        tree_.close();
        if (tree_.whole()) {
            capture_done();
        }
    } else if (in_list_) {
        in_list_ = false;
    } else if (in_level_) {
        end_level();
    } else if (in_levels_) {
        in_levels_ = false;
    }
    return !is_other_document_;
}

/// Reserves exactly, by looking ahead, so that no list is ever moved or kept larger than it is.
void PlanReceiver::enter_list(std::uint32_t at) {
    if (key_ == PlanKey::levels) {
        in_levels_ = true;
        return;
    }
    in_list_ = true;
    item_count_ = 0;
    list_count_ = 0;
    list_place_ = Place::of_key(place_here(), name_of_key(key_));
    // The shortest object that is kept, {"case":"d","q":1}, has 18 bytes: a list of less is not given room
    // for.
    constexpr std::size_t least_bytes = 18;
    const ElementCount list = count_elements(context_.text, at);
    const std::size_t count =
        std::min({list.elements, list.bytes / least_bytes + 1, context_.limits.members});
    switch (key_) {
    case PlanKey::columns:
        return plan_.columns.reserve(count);
    case PlanKey::walls:
        return plan_.walls.reserve(count);
    case PlanKey::members:
        return level_.members.reserve(count);
    case PlanKey::decks:
        return level_.decks.reserve(count);
    case PlanKey::area_loads:
        level_.own_area_loads = true;
        return level_.area_loads.reserve(count);
    case PlanKey::line_loads:
        level_.own_line_loads = true;
        return level_.line_loads.reserve(count);
    case PlanKey::point_loads:
        level_.own_point_loads = true;
        return level_.point_loads.reserve(count);
    case PlanKey::frames:
    case PlanKey::combinations:
        if (list.elements > 0) {
            report_here(ProblemCode::not_supported_yet, at, list_place_.pointer(),
                        key_ == PlanKey::frames
                            ? "`frames` of the plan: frames cannot be computed yet."
                            : "`combinations` of the plan cannot be computed yet; results "
                              "are characteristic, by case.",
                        "Leave the key out until then.");
        }
        return;
    default:
        return;
    }
}

bool PlanReceiver::may_keep_item(std::uint32_t at) {
    // Of members all levels count together, of other things each list.
    const std::size_t count = key_ == PlanKey::members ? ++member_count_ : ++list_count_;
    if (count == context_.limits.members + 1) {
        report_here(ProblemCode::too_much, at, Place::of_index(&list_place_, item_count_).pointer(),
                    "More than " + std::to_string(context_.limits.members) + ' ' +
                        std::string(noun_of(key_)) +
                        "s are listed, and that is the limit; the rest is not read.");
        doubt(key_);
    }
    return count <= context_.limits.members;
}

void PlanReceiver::begin_level(std::uint32_t at) {
    in_level_ = true;
    level_keys_ = 0;
    level_at_ = at;
    level_ = Level{};
    level_.id.append(unread::id);
    level_.elevation = unread::number;
    const LineCounter::Place place = context_.lines.place_of(at);
    level_.origin = {place.line, place.column, Origin::nowhere, level_count_ - 1};
}

void PlanReceiver::end_level() {
    for (const PlanKey key : {PlanKey::id, PlanKey::elevation}) {
        if ((level_keys_ & bit(key)) == 0) {
            report_here(ProblemCode::missing_key, level_at_, level_place_.pointer(),
                        '`' + std::string(name_of_key(key)) + "` of " + owner_here() + " is missing.");
        }
    }
    in_level_ = false;
    plan_.levels.push_back(std::move(level_));
    level_ = Level{};
}

void PlanReceiver::finish() {
    if (!in_plan_) {
        return;
    }
    for (const PlanKey key : {PlanKey::runnel, PlanKey::units, PlanKey::cases, PlanKey::levels}) {
        if ((plan_keys_ & bit(key)) == 0) {
            report_here(ProblemCode::missing_key, plan_at_, {},
                        '`' + std::string(name_of_key(key)) + "` of the plan is missing.",
                        key == PlanKey::runnel  ? "\"runnel\": \"plan/1\""
                        : key == PlanKey::units ? "\"units\": {\"length\": \"m\", \"force\": \"kN\"}"
                                                : "");
        }
    }
    doubts_.cases = doubts_.cases || (plan_keys_ & bit(PlanKey::cases)) == 0;
    doubts_.references = std::move(context_.references);
}

void PlanReceiver::know_units() {
    if (units_known_) {
        return;
    }
    units_known_ = true;
    plan_.units = find_units(context_.text, context_.limits).value_or(Units{});
    context_.scales = UnitScales(plan_.units);
}

void PlanReceiver::doubt(PlanKey list) {
    switch (list) {
    case PlanKey::cases:
        doubts_.cases = doubts_.case_kinds = true;
        return;
    case PlanKey::sections:
        doubts_.sections = true;
        return;
    case PlanKey::builds:
        doubts_.builds = true;
        return;
    case PlanKey::levels:
        doubts_.levels = true;
        return;
    case PlanKey::columns:
    case PlanKey::walls:
        doubts_.supports = true;
        return;
    default:
        return;
    }
}

void PlanReceiver::capture_done() {
    capturing_ = false;
    if (!in_plan_) {
        const JsonValue value{&context_, &tree_, 0, Place{}, "plan", {}, nullptr};
        Problem problem;
        problem.code = ProblemCode::wrong_type;
        problem.severity = Severity::error;
        problem.message = "A plan is an object, not " + std::string(words_for(value.kind())) + '.';
        context_.log.add_at(value.at(), std::move(problem));
        return;
    }
    if (key_ != PlanKey::runnel && key_ != PlanKey::title && key_ != PlanKey::units) {
        know_units();
    }
    if (in_list_) {
        const Place place = Place::of_index(&list_place_, item_count_++);
        return read_item(JsonValue{&context_, &tree_, 0, place, noun_of(key_), {}, nullptr});
    }
    if (in_levels_ && !in_level_) {
        const JsonValue value{&context_, &tree_, 0, level_place_, "plan", {}, nullptr};
        doubts_.levels = true;
        return value.report(ProblemCode::wrong_type, "`levels` takes a list of objects, and " +
                                                         value.place.element() + " is " +
                                                         std::string(words_for(value.kind())) + '.');
    }
    const bool known_level = in_level_ && level_.id != unread::id;
    const JsonValue value{&context_,   &tree_,
                          0,           Place::of_key(place_here(), name_of_key(key_)),
                          noun_here(), known_level ? std::string_view(level_.id) : std::string_view{},
                          place_here()};
    if (is_list(key_)) {
        doubt(key_);
        return value.wrong_type("a list");
    }
    in_level_ ? read_level_value(value) : read_plan_value(value);
}

RUNNEL_NAMESPACE_END
