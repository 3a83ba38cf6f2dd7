#include "geometry/basic.hpp"
#include "report/drawing_labels.hpp"
#include "report/drawing_marks.hpp"
#include "report/drawing_places.hpp"
#include "report/names.hpp"
#include "report/page.hpp"
#include "report/region_tints.hpp"
#include "report/scale.hpp"
#include "report/svg_text.hpp"

#include <runnel/report.hpp>
#include <runnel/version.hpp>

#include <algorithm>
#include <array>

RUNNEL_NAMESPACE_BEGIN

namespace {

// Sizes on the sheet, in its own units (px at 96 a inch).
constexpr double sheet_side = 1000; ///< the plan's longer side
constexpr double margin = 60;
constexpr double least_width = 480; ///< for the title
constexpr double title_height = 46;
constexpr double scale_bar_height = 40;
constexpr double column_side = 11;
constexpr double least_gap_for_labels = 14; ///< between joists, or their labels would overlap

class LevelDrawing {
public:
    LevelDrawing(const Plan& plan, const Framing& framing, std::uint32_t level, const Sharing& sharing,
                 const ReportOptions& options, const TextSink& sink)
        : plan_(plan), level_(framing.levels[level]), level_index_(level), sharing_(sharing),
          names_(plan, framing), scale_(options.units.value_or(plan.units)), svg_(sink) {}

    void draw() {
        find_extent();
        open_sheet();
        regions();
        decks();
        grid();
        walls();
        members();
        columns();
        labels();
        scale_bar();
        svg_.add("</svg>\n");
        svg_.finish();
    }

private:
    void find_extent() {
        low_ = {1e300, 1e300};
        high_ = {-1e300, -1e300};
        const auto grow = [this](Point p) {
            low_ = {std::min(low_.x, p.x), std::min(low_.y, p.y)};
            high_ = {std::max(high_.x, p.x), std::max(high_.y, p.y)};
        };
        for (const FramedDeck& deck : level_.decks) {
            std::for_each(deck.outline.begin(), deck.outline.end(), grow);
        }
        for (const FramedMember& member : level_.members) {
            grow(member.from);
            grow(member.to);
        }
        for (const std::uint32_t w : level_.walls) {
            grow(plan_.walls[w].from);
            grow(plan_.walls[w].to);
        }
        for (const std::uint32_t c : level_.columns) {
            grow(plan_.columns[c].at);
        }
        if (low_.x > high_.x) {
            low_ = high_ = {0, 0};
        }
        find_grid();
        const double side = std::max(high_.x - low_.x, high_.y - low_.y);
        per_metre_ = side > 0 ? sheet_side / side : 1;
        width_ = std::max((high_.x - low_.x) * per_metre_ + 2 * margin, least_width);
        height_ = (high_.y - low_.y) * per_metre_ + 2 * margin + title_height + scale_bar_height;
    }

    /// Grid lines as far as they are near the level; they may run on beyond it a little.
    void find_grid() {
        constexpr double beyond = 0.06; // of the longer side
        const double margin_around = beyond * std::max(high_.x - low_.x, high_.y - low_.y);
        const Point low{low_.x - margin_around, low_.y - margin_around};
        const Point high{high_.x + margin_around, high_.y + margin_around};
        for (const GridLine& line : plan_.grid) {
            const auto part = part_within(line.from, line.to, low, high);
            if (part && line.from != line.to) {
                grid_.push_back({line.id, part->first, part->second});
                low_ = {std::min({low_.x, part->first.x, part->second.x}),
                        std::min({low_.y, part->first.y, part->second.y})};
                high_ = {std::max({high_.x, part->first.x, part->second.x}),
                         std::max({high_.y, part->first.y, part->second.y})};
            }
        }
    }

    /// North is up: y turns round.
    [[nodiscard]] Point on_sheet(Point p) const {
        return {margin + (p.x - low_.x) * per_metre_, margin + title_height + (high_.y - p.y) * per_metre_};
    }

    void open_sheet() {
        svg_.add("<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 ").number(width_).add(" ");
        svg_.number(height_).add("\" width=\"").number(width_).add("\" height=\"").number(height_);
        svg_.add("\" font-family=\"sans-serif\" font-size=\"").number(letter).add("\">\n");
        // Tells the program's own drawings from others.
        svg_.add("<!-- runnel ").add(version()).add(" -->\n<title>");
        svg_.text(plan_.title).add(plan_.title.empty() ? "" : ": ").text(level_.id).add("</title>\n");
        drawing_style(svg_);
        svg_.add("<rect width=\"100%\" height=\"100%\" fill=\"#fff\"/>\n");
        svg_.add("<text x=\"")
            .number(margin)
            .add("\" y=\"")
            .number(margin * 0.75)
            .add("\" font-size=\"18\">");
        const std::string title = plan_.title.empty() ? level_.id : level_.id + ": " + plan_.title;
        constexpr double letter_width = 11; // at 18
        svg_.text(fit(title, static_cast<std::size_t>((width_ - 2 * margin) / letter_width)))
            .add("</text>\n");
    }

    void ring_path(const Ring& ring) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Point p = on_sheet(ring[i]);
            svg_.add(i == 0 ? "M" : "L").number(p.x).add(" ").number(p.y);
        }
        svg_.add("Z");
    }

    void regions() {
        const std::vector<Region> regions = regions_of(sharing_);
        const std::vector<std::uint8_t> tint_of = choose_tints(regions);
        svg_.add("<g>\n");
        for (std::size_t r = 0; r < regions.size(); ++r) {
            svg_.add("<path class=\"region\" data-deck=\"").text(level_.decks[regions[r].deck].id);
            svg_.add("\" data-carrier=\"");
            svg_.text(names_.carrier(level_index_, sharing_.carrier(regions[r].carrier)));
            svg_.add("\" fill=\"url(#tint").count(tint_of[r]).add(")\" d=\"");
            for (const Ring& ring : regions[r].rings) {
                ring_path(ring);
            }
            svg_.add("\"/>\n");
        }
        end_zones();
        svg_.add("</g>\n");
    }

    /// What goes to a line's end is set off from what goes to its length.
    void end_zones() {
        const std::vector<Region> zones = regions_of(end_zones_of(sharing_, level_));
        has_end_zones_ = !zones.empty();
        for (const Region& zone : zones) {
            svg_.add("<path class=\"end-zone\" d=\"");
            for (const Ring& ring : zone.rings) {
                ring_path(ring);
            }
            svg_.add("\"/>\n");
        }
    }

    void decks() {
        svg_.add("<g>\n");
        for (const FramedDeck& deck : level_.decks) {
            svg_.add("<path class=\"deck\" data-id=\"").text(deck.id).add("\" d=\"");
            ring_path(deck.outline);
            svg_.add("\"/>\n");
            for (const Ring& opening : deck.openings) {
                svg_.add("<path class=\"opening\" d=\"");
                ring_path(opening);
                svg_.add("\"/>\n");
                cross_out(opening);
            }
        }
        svg_.add("</g>\n");
    }

    /// Lines from every corner to the one that lies opposite in the ring: the diagonals of a rectangle.
    void cross_out(const Ring& opening) {
        const std::size_t half = opening.size() / 2;
        for (std::size_t i = 0; i < half; ++i) {
            svg_.add("<line class=\"cross\"");
            line(opening[i], opening[i + half]);
            svg_.add("/>\n");
        }
    }

    void line(Point from, Point to) {
        const Point a = on_sheet(from);
        const Point b = on_sheet(to);
        svg_.add(" x1=\"").number(a.x).add("\" y1=\"").number(a.y).add("\" x2=\"").number(b.x);
        svg_.add("\" y2=\"").number(b.y).add("\"");
    }

    /// A thin line of dashes and dots, with its id in a ring beyond its `from` end.
    void grid() {
        constexpr double radius = 12;
        constexpr std::size_t longest = 5; // characters in the ring
        svg_.add("<g>\n");
        for (const GridPart& part : grid_) {
            svg_.add("<line class=\"grid\" data-id=\"").text(part.id).add("\"");
            line(part.from, part.to);
            svg_.add("/>\n");
            const Point end = on_sheet(part.from);
            const Point run = on_sheet(part.to) - end;
            const Point ring = end - (radius / norm(run)) * run;
            svg_.add("<circle class=\"grid-mark\" cx=\"").number(ring.x).add("\" cy=\"").number(ring.y);
            svg_.add("\" r=\"").number(radius).add("\"/>\n");
            const std::string id = fit(part.id, longest);
            write(Label{id, "label of-grid", small_letter}, {{ring.x, ring.y + 0.35 * small_letter}});
        }
        svg_.add("</g>\n");
    }

    void walls() {
        svg_.add("<g>\n");
        for (const std::uint32_t w : level_.walls) {
            svg_.add("<line class=\"wall\" data-id=\"").text(plan_.walls[w].id).add("\"");
            line(plan_.walls[w].from, plan_.walls[w].to);
            svg_.add("/>\n");
        }
        svg_.add("</g>\n");
    }

    /// The highest role is drawn last, so that it lies on top.
    void members() {
        svg_.add("<g>\n");
        for (const Role role : {Role::joist, Role::beam, Role::girder}) {
            for (const FramedMember& member : level_.members) {
                if (member.role == role) {
                    svg_.add("<line class=\"member ").add(name_of(role)).add("\" data-id=\"");
                    svg_.text(member.id).add("\"");
                    line(member.from, member.to);
                    svg_.add("/>\n");
                }
            }
        }
        svg_.add("</g>\n");
    }

    void columns() {
        svg_.add("<g>\n");
        for (const std::uint32_t c : level_.columns) {
            const Point p = on_sheet(plan_.columns[c].at);
            svg_.add("<rect class=\"column\" data-id=\"").text(plan_.columns[c].id).add("\" x=\"");
            svg_.number(p.x - column_side / 2)
                .add("\" y=\"")
                .number(p.y - column_side / 2)
                .add("\" width=\"");
            svg_.number(column_side).add("\" height=\"").number(column_side).add("\"/>\n");
        }
        svg_.add("</g>\n");
    }

    void labels() {
        svg_.add("<g>\n");
        const ClearPlaces places(lines_to_avoid());
        for (const FramedDeck& deck : level_.decks) {
            deck_label(deck, places);
        }
        for (const FramedMember& member : level_.members) {
            if (has_label(member)) {
                write(label_of(member), spot_of(member));
            }
        }
        for (const std::uint32_t w : level_.walls) {
            const Wall& wall = plan_.walls[w];
            write({wall.id, "label"}, spot_along(on_sheet(wall.from), on_sheet(wall.to)));
        }
        for (const std::uint32_t c : level_.columns) {
            write(label_of(plan_.columns[c]), spot_of(plan_.columns[c]));
        }
        svg_.add("</g>\n");
    }

    void write(const Label& label, Label::Spot spot) { label.write(svg_, spot, {width_, height_}); }

    [[nodiscard]] static Label label_of(const FramedMember& member) {
        return {member.id, "label", member.role == Role::joist ? small_letter : letter};
    }
    [[nodiscard]] Label::Spot spot_of(const FramedMember& member) const {
        return spot_along(on_sheet(member.from), on_sheet(member.to));
    }
    [[nodiscard]] static Label label_of(const Column& column) { return {column.id, "label of-column"}; }
    [[nodiscard]] Label::Spot spot_of(const Column& column) const {
        const Point p = on_sheet(column.at);
        return {{p.x + column_side + 0.5 * label_of(column).width(), p.y + column_side * 1.7}};
    }

    /// What the labels of decks keep clear of. Joists are too many for that.
    [[nodiscard]] std::vector<std::pair<Point, Point>> lines_to_avoid() const {
        std::vector<std::pair<Point, Point>> lines;
        const auto add_ring = [&](const Ring& ring) {
            for (std::size_t i = 0; i < ring.size(); ++i) {
                lines.emplace_back(on_sheet(ring[i]), on_sheet(ring[(i + 1) % ring.size()]));
            }
        };
        const auto add = [&](Point from, Point to, std::string_view id) {
            lines.emplace_back(on_sheet(from), on_sheet(to));
            lines.push_back(Label{id, "label"}.middle_line(spot_along(on_sheet(from), on_sheet(to))));
        };
        for (const FramedDeck& deck : level_.decks) {
            add_ring(deck.outline);
            std::for_each(deck.openings.begin(), deck.openings.end(), add_ring);
        }
        for (const FramedMember& member : level_.members) {
            if (member.role != Role::joist) {
                add(member.from, member.to, member.id);
            }
        }
        for (const std::uint32_t w : level_.walls) {
            add(plan_.walls[w].from, plan_.walls[w].to, plan_.walls[w].id);
        }
        for (const std::uint32_t c : level_.columns) {
            const Column& column = plan_.columns[c];
            lines.push_back(label_of(column).middle_line(spot_of(column)));
            lines.emplace_back(on_sheet(column.at), lines.back().first);
        }
        return lines;
    }

    [[nodiscard]] bool has_label(const FramedMember& member) const {
        return !member.from_field || field_labels_fit(member);
    }
    [[nodiscard]] bool field_labels_fit(const FramedMember& member) const {
        const std::vector<JoistField>& fields = plan_.levels[member.origin.level].joist_fields;
        return member.origin.level < plan_.levels.size() && member.origin.index < fields.size() &&
               fields[member.origin.index].spacing * per_metre_ >= least_gap_for_labels;
    }

    [[nodiscard]] Ring on_sheet(const Ring& ring) const {
        Ring there;
        for (const Point& p : ring) {
            there.push_back(on_sheet(p));
        }
        return there;
    }

    /// A deck's id, with the share where it is not by halves, and below it the mark of how it spans. Stands
    /// at the middle of the deck's bounding box, a little off, where members cross, if it is clear there.
    void deck_label(const FramedDeck& deck, const ClearPlaces& places) {
        const bool halves = deck.span != SpanKind::one_way || deck.share == Share::half;
        const std::string text = halves ? deck.id : deck.id + " (" + std::string(name_of(deck.share)) + ')';
        const Label label{text, "label of-deck"};
        const Ring outline = on_sheet(deck.outline);
        std::vector<Ring> openings;
        for (const Ring& opening : deck.openings) {
            openings.push_back(on_sheet(opening));
        }
        const Box around = box_of(std::span<const Point>(outline));
        const Point size = around.high - around.low;
        const SpanMark mark = span_mark(deck, std::min(size.x, size.y));
        const double half_width = std::max(label.width() / 2, mark.half_width());
        constexpr double aside = 0.4;
        const Point at =
            places.find(outline, openings, {around.low.x + aside * size.x, around.high.y - aside * size.y},
                        {{-half_width, -letter}, {half_width, mark.below() + mark.half_height()}});
        svg_.add("<path class=\"span\" data-deck=\"").text(deck.id).add("\" d=\"");
        mark.draw(svg_, {at.x, at.y + mark.below()});
        svg_.add("\"/>\n");
        write(label, {at});
    }

    /// A round length of about a fifth of the drawing.
    void scale_bar() {
        constexpr double share = 0.2;
        const double wished = share * sheet_side / per_metre_ / scale_.length;
        const double decade = std::pow(10, std::floor(std::log10(wished)));
        const double leading = wished / decade;
        const double length = decade * (leading >= 5 ? 5 : leading >= 2 ? 2 : 1);
        const double pixels = length * scale_.length * per_metre_;
        const double y = height_ - margin * 0.7;
        svg_.add("<path fill=\"none\" stroke=\"#12303f\" d=\"M").number(margin).add(" ").number(y - 5);
        svg_.add("v5h").number(pixels).add("v-5\"/>\n<text x=\"").number(margin + pixels + 8).add("\" y=\"");
        svg_.number(y).add("\" fill=\"#12303f\">").number(length).add(" ");
        svg_.text(name_of(scale_.units.length)).add("</text>\n");
        if (has_end_zones_) {
            svg_.add("<text x=\"").number(margin).add("\" y=\"").number(y + 1.7 * letter);
            svg_.add("\" font-size=\"").number(small_letter);
            svg_.add("\" fill=\"#39434b\">Within dotted lines: to the end of the beam or wall</text>\n");
        }
    }

    const Plan& plan_;
    const FramedLevel& level_;
    std::uint32_t level_index_;
    const Sharing& sharing_;
    Names names_;
    Scale scale_;
    SvgText svg_;
    struct GridPart {
        std::string_view id;
        Point from, to;
    };
    std::vector<GridPart> grid_;
    Point low_, high_;
    bool has_end_zones_ = false;
    double per_metre_ = 1;
    double width_ = 0, height_ = 0;
};

} // namespace

void draw_level(const Plan& plan, const Framing& framing, std::uint32_t level, const Sharing& sharing,
                const ReportOptions& options, const TextSink& sink) {
    LevelDrawing(plan, framing, level, sharing, options, sink).draw();
}

RUNNEL_NAMESPACE_END
