#pragma once

#include "plan/check.hpp"
#include "plan/id_index.hpp"
#include "plan/object_reader.hpp"

#include <runnel/plan.hpp>

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// The object that a check is about.
struct Subject {
    Origin origin;
    std::string_view list; ///< that holds it
    std::string_view noun;
    std::string_view id; ///< empty: things without ids are named by their place in the list

    /// "member G1", "area_loads[2]".
    [[nodiscard]] std::string name() const;
};

enum class Range : std::uint8_t { any, not_negative, positive };

/// What the checks of a plan share: indices by id, the log, and ways to report.
class CheckContext {
public:
    CheckContext(const Plan& plan, const Limits& limits, const std::optional<Doubts>& doubts,
                 ProblemLog& log);

    const Plan& plan;
    const Limits& limits;
    ProblemLog& log;
    const bool from_text;
    const Doubts doubts;
    double snap; ///< the plan's, or the default where that is no use

    IdIndex<LoadCase> cases;
    IdIndex<Section> sections;
    IdIndex<Build> builds;
    IdIndex<Level> levels;
    IdIndex<Column> columns;
    IdIndex<Wall> walls;
    std::vector<std::uint32_t> like; ///< by level: index of the level it repeats, or `no_level`
    static constexpr std::uint32_t no_level = 0xffffffff;

    template <class Item>
    [[nodiscard]] static Subject subject(const Item& item, std::string_view list, std::string_view noun,
                                         std::size_t index, std::uint32_t level = Origin::nowhere) {
        Subject result{item.origin, list, noun, {}};
        if (item.origin.index == Origin::nowhere) { // built in code: counted where it stands
            result.origin.index = static_cast<std::uint32_t>(index);
            result.origin.level = level;
        }
        if constexpr (requires { item.id; }) {
            result.id = item.id;
        }
        return result;
    }

    Problem& report(const Subject& subject, ProblemCode code, std::string_view inside, std::string message,
                    std::string hint = {});

    /// False, and a problem, if the id is no good; silent where it could not be read.
    bool good_id(const Subject& subject);
    void taken(const Subject& subject, const Origin& first, std::string_view first_noun);

    /// True if the value can be worked with. Reports what is not finite, absurd or out of range.
    bool good_number(double value, const Subject& subject, std::string_view inside, Dimension dimension,
                     Range range = Range::any);
    bool good_number(const std::optional<double>& value, const Subject& subject, std::string_view inside,
                     Dimension dimension, Range range) {
        return !value || good_number(*value, subject, inside, dimension, range);
    }
    bool good_point(Point p, const Subject& subject, std::string_view inside);
    /// Both ends good, and further apart than `snap`.
    bool good_line(Point from, Point to, const Subject& subject);
    /// The ring without repeats, if it is one that can be worked with; else empty.
    [[nodiscard]] Ring good_ring(const Ring& ring, const Subject& subject, std::string_view inside);

    /// A reference to something with an id; silent where it could not be read or the list is in doubt.
    template <class Item>
    const Item* refer(std::string_view id, const IdIndex<Item>& index, std::string_view noun, bool in_doubt,
                      const Subject& subject, std::string_view inside) {
        const Item* item = index.find(id);
        if (item == nullptr && !is_unread(id) && !in_doubt) {
            refuse_reference(id, noun, subject, inside, index.hint_for_id(id));
        }
        return item;
    }
    Problem& refuse_reference(std::string_view id, std::string_view noun, const Subject& subject,
                              std::string_view inside, std::string hint = {});
    [[nodiscard]] bool is_unread(std::string_view id) const { return from_text && id == unread::id; }

    [[nodiscard]] std::string lengths(double metres) const;

    void use_section(const Section* section) {
        uses_own_weight =
            uses_own_weight || (section != nullptr && section->weight_per_length().value_or(0) > 0);
    }
    bool uses_own_weight = false; ///< some carrier or deck has weight of its own

    /// Elevation of a base or top; nothing where it is not known.
    [[nodiscard]] std::optional<double> elevation_of(std::string_view level) const;
    /// Whether a column or wall is a bearing at that elevation; in doubt yes.
    template <class Support>
    [[nodiscard]] bool bears_at(const Support& support, double elevation) const {
        const std::optional<double> base = elevation_of(support.base);
        const std::optional<double> top = elevation_of(support.top);
        return !base || !top || (elevation > *base && elevation <= *top);
    }
};

/// The phases of check_values, each in a file of its own kind.
void check_settings(CheckContext& context);
void check_schedules(CheckContext& context);  ///< cases, sections, builds, grid
void check_supports(CheckContext& context);   ///< columns and walls
void check_level_list(CheckContext& context); ///< ids, elevations, `like`
void check_levels(CheckContext& context);     ///< what stands on them
void check_amounts(CheckContext& context);    ///< what the plan asks for, joists and repeated levels included
void check_own_weight(CheckContext& context);

/// How many joists a field makes at most, not counting what cutting adds.
[[nodiscard]] double joists_of(const JoistField& field);

RUNNEL_NAMESPACE_END
