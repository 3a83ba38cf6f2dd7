#include "plan/look_ahead.hpp"

#include "plan/items.hpp"

RUNNEL_NAMESPACE_BEGIN

ElementCount count_elements(std::string_view text, std::size_t at) {
    std::size_t depth = 0;
    std::size_t commas = 0;
    bool empty = true;
    for (std::size_t i = at; i < text.size(); ++i) {
        switch (text[i]) {
        case '"':
            empty = false;
            for (++i; i < text.size() && text[i] != '"'; ++i) {
                i += text[i] == '\\' ? 1 : 0;
            }
            break;
        case '[':
        case '{':
            empty = empty && depth == 0;
            ++depth;
            break;
        case ']':
        case '}':
            if (--depth == 0) {
                return {empty ? 0 : commas + 1, i + 1 - at};
            }
            break;
        case ',':
            commas += depth == 1 ? 1 : 0;
            break;
        default:
            empty = empty && static_cast<unsigned char>(text[i]) <= ' ';
            break;
        }
    }
    return {commas, text.size() - at};
}

namespace {

/// Takes the value of `units` at the top of the document and ends the walk there.
class UnitsFinder final : public JsonReceiver {
public:
    explicit UnitsFinder(ReadingContext& quiet) : quiet_(quiet) {}

    bool scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) override {
        if (capturing_) {
            tree_.scalar(kind, number, text, at);
        }
        return go_on();
    }
    bool key(std::string_view name, std::uint32_t at) override {
        if (capturing_) {
            tree_.key(name, at);
        } else {
            capturing_ = depth_ == 1 && name == "units";
        }
        return true;
    }
    bool open(JsonKind kind, std::uint32_t at) override {
        ++depth_;
        if (capturing_) {
            tree_.open(kind, at);
        }
        return true;
    }
    bool close() override {
        --depth_;
        if (capturing_) {
            tree_.close();
        }
        return go_on();
    }

    std::optional<Units> found;

private:
    bool go_on() {
        if (!capturing_ || !tree_.whole()) {
            return true;
        }
        found =
            read_units(JsonValue{&quiet_, &tree_, 0, Place::of_key(nullptr, "units"), "plan", {}, nullptr});
        return false;
    }

    ReadingContext& quiet_;
    JsonTree tree_;
    std::size_t depth_ = 0;
    bool capturing_ = false;
};

} // namespace

std::optional<Units> find_units(std::string_view text, const Limits& limits) {
    Limits quiet = limits; // what is wrong with them is told when the reading gets there
    quiet.problems = 0;
    ReadingContext context(text, quiet);
    UnitsFinder finder(context);
    (void)walk_json(text, limits.nesting, finder);
    return finder.found;
}

RUNNEL_NAMESPACE_END
