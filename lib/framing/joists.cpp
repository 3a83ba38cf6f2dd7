#include "framing/lines.hpp"

#include <limits>

RUNNEL_NAMESPACE_BEGIN

namespace {

/// Coordinates of a field about its first corner: `along` the joists, `across` square to them, the way their
/// numbers rise.
struct FieldAxes {
    Point origin, along, across;

    [[nodiscard]] Point to_plan(double s, double t) const { return origin + t * across + s * along; }
};

FieldAxes axes_of(const JoistField& field) {
    FieldAxes axes;
    axes.origin = field.outline.front();
    axes.along = direction_at(field.direction);
    axes.across = {-axes.along.y, axes.along.x};
    const double rounding = noise_of(1.0);
    const bool along_x = std::abs(axes.across.x) <= rounding;
    if (along_x ? axes.across.y < 0 : axes.across.x < 0) {
        axes.across = -1.0 * axes.across;
    }
    return axes;
}

/// An edge of the outline that a joist line can cross: rising across.
struct FieldEdge {
    double t_low, t_high; ///< across
    double s_low, s_high; ///< along, at t_low and t_high

    [[nodiscard]] double s_at(double t) const {
        return t <= t_low    ? s_low
               : t >= t_high ? s_high
                             : s_low + (t - t_low) / (t_high - t_low) * (s_high - s_low);
    }
};

struct FieldOutline {
    std::vector<FieldEdge> edges; ///< by t_low
    double lowest = 0, highest = 0;
};

FieldOutline outline_in(const FieldAxes& axes, const JoistField& field) {
    FieldOutline outline;
    const Ring& ring = field.outline;
    const auto across = [&](Point p) { return dot(p - axes.origin, axes.across); };
    const auto along = [&](Point p) { return dot(p - axes.origin, axes.along); };
    outline.lowest = outline.highest = across(ring.front());
    for (std::size_t i = 0; i < ring.size(); ++i) {
        Point a = ring[i];
        Point b = ring[(i + 1) % ring.size()];
        if (across(a) > across(b)) {
            std::swap(a, b);
        }
        outline.lowest = std::min(outline.lowest, across(a));
        outline.highest = std::max(outline.highest, across(b));
        if (across(a) < across(b)) {
            outline.edges.push_back({across(a), across(b), along(a), along(b)});
        }
    }
    std::sort(outline.edges.begin(), outline.edges.end(),
              [](const FieldEdge& a, const FieldEdge& b) { return a.t_low < b.t_low; });
    return outline;
}

/// Where joist lines lie across the field. Positions are multiples, not sums: no error grows along a field.
struct Positions {
    double first = 0, spacing = 0;
    std::size_t regular = 0; ///< how many at the spacing
    bool one_more = false;   ///< at the far edge
    double far_edge = 0;

    [[nodiscard]] std::size_t count() const { return regular + (one_more ? 1 : 0); }
    [[nodiscard]] double at(std::size_t k) const {
        return k < regular ? std::min(first + static_cast<double>(k) * spacing, far_edge) : far_edge;
    }
};

Positions positions_in(const FieldOutline& outline, const JoistField& field, const Tolerance& tolerance,
                       std::size_t at_most) {
    Positions positions;
    positions.first = outline.lowest + field.offset;
    positions.spacing = field.spacing;
    positions.far_edge = outline.highest;
    const double breadth = outline.highest + tolerance.noise - positions.first;
    if (breadth >= 0) {
        const double steps = std::floor(breadth / field.spacing);
        positions.regular =
            steps < static_cast<double>(at_most) ? static_cast<std::size_t>(steps) + 1 : at_most + 1;
    }
    const double last = positions.regular == 0 ? outline.lowest : positions.at(positions.regular - 1);
    positions.one_more = field.edges && outline.highest - last > tolerance.snap;
    return positions;
}

/// Adds the stretches between successive crossings: inside the outline by the rule of even and odd.
void add_stretches(std::vector<double>& crossings, std::vector<Stretch>& stretches) {
    std::sort(crossings.begin(), crossings.end());
    for (std::size_t i = 0; i + 1 < crossings.size(); i += 2) {
        stretches.push_back({crossings[i], crossings[i + 1]});
    }
    crossings.clear();
}

/// Joins stretches that overlap or meet.
void join_stretches(std::vector<Stretch>& stretches, double noise) {
    std::sort(stretches.begin(), stretches.end(),
              [](const Stretch& a, const Stretch& b) { return a.from < b.from; });
    std::size_t kept = 0;
    for (const Stretch& stretch : stretches) {
        if (kept > 0 && stretch.from <= stretches[kept - 1].to + noise) {
            stretches[kept - 1].to = std::max(stretches[kept - 1].to, stretch.to);
        } else {
            stretches[kept++] = stretch;
        }
    }
    stretches.resize(kept);
}

/// Clips parallel lines, asked for by rising t, by an outline. Only edges that the line can cross are looked
/// at.
class Clipper {
public:
    Clipper(const FieldOutline& outline, double noise) : outline_(outline), noise_(noise) {}

    /// The stretches that the line at `t` has inside the outline as a closed set. A line through corners or
    /// along edges is taken as what the lines just above it and just below it tend to, together.
    void clip(double t, std::vector<Stretch>& stretches) {
        while (next_ < outline_.edges.size() && outline_.edges[next_].t_low <= t + noise_) {
            active_.push_back(next_++);
        }
        std::erase_if(active_, [&](std::size_t e) { return outline_.edges[e].t_high < t - noise_; });
        stretches.clear();
        bool at_corner = false;
        for (const std::size_t e : active_) {
            const FieldEdge& edge = outline_.edges[e];
            const bool starts = edge.t_low >= t - noise_;
            const bool ends = edge.t_high <= t + noise_;
            at_corner = at_corner || starts || ends;
            if (!ends) {
                above_.push_back(edge.s_at(t));
            }
            if (!starts) {
                below_.push_back(edge.s_at(t));
            }
        }
        add_stretches(above_, stretches);
        if (at_corner) {
            add_stretches(below_, stretches);
            join_stretches(stretches, noise_);
        }
        below_.clear();
    }

private:
    const FieldOutline& outline_;
    double noise_;
    std::size_t next_ = 0;
    std::vector<std::size_t> active_;
    std::vector<double> above_, below_;
};

void lay_field(LevelDraft& draft, std::uint32_t field_number, const FieldAxes& axes,
               const FieldOutline& outline, const Positions& positions) {
    Clipper clipper(outline, draft.tolerance.noise);
    std::vector<Stretch> stretches;
    draft.lines.reserve(draft.lines.size() + positions.count());
    for (std::size_t k = 0; k < positions.count(); ++k) {
        const double t = positions.at(k);
        clipper.clip(t, stretches);
        for (const Stretch& stretch : stretches) {
            if (stretch.length() <= draft.reach()) {
                continue;
            }
            Line line;
            line.axis = {axes.to_plan(stretch.from, t), axes.to_plan(stretch.to, t)};
            line.source = static_cast<std::uint32_t>(k);
            line.field = field_number;
            line.role = Role::joist;
            draft.lines.push_back(line);
        }
    }
}

void refuse_field(LevelDraft& draft, const Listed<JoistField>& field, std::size_t room) {
    draft.problems.add(ProblemCode::too_much, [&] {
        return problem_at(ProblemCode::too_much, field.origin, "joist_fields",
                          "Joist field " + field.what->id + " with a spacing of " +
                              length_text(field.what->spacing, draft.plan.units) +
                              " asks for more than the " + std::to_string(room) +
                              " members that the plan's limit leaves.",
                          "Check the spacing.", {field.what->id});
    });
}

} // namespace

void lay_joists(LevelDraft& draft, std::size_t& room) {
    for (std::uint32_t i = 0; i < draft.lists.joist_fields.size(); ++i) {
        const Listed<JoistField>& listed = draft.lists.joist_fields[i];
        const JoistField& field = *listed.what;
        if (field.outline.size() < 3 || !(field.spacing > 0)) {
            continue; // refused by check_plan
        }
        const FieldAxes axes = axes_of(field);
        const FieldOutline outline = outline_in(axes, field);
        const Positions positions = positions_in(outline, field, draft.tolerance, room);
        if (positions.count() > room) {
            refuse_field(draft, listed, room);
            continue;
        }
        const std::size_t before = draft.lines.size();
        lay_field(draft, i, axes, outline, positions);
        room -= std::min(room, draft.lines.size() - before);
    }
}

RUNNEL_NAMESPACE_END
