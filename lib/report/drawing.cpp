#include "geometry/basic.hpp"
#include "report/drawing_marks.hpp"
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
constexpr double letter = 13;
constexpr double small_letter = 10.5;
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
        svg_.add("</g>\n");
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
            label({ring.x, ring.y + 0.35 * small_letter}, 0, fit(part.id, longest), "label of-grid",
                  small_letter);
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
        for (const FramedDeck& deck : level_.decks) {
            if (deck.span == SpanKind::one_way) {
                span_arrow(deck);
            }
            label(label_place(deck), 0, deck.id, "label of-deck", letter);
        }
        for (const FramedMember& member : level_.members) {
            if (!member.from_field || field_labels_fit(member)) {
                label_along(member.from, member.to, member.id,
                            member.role == Role::joist ? small_letter : letter);
            }
        }
        for (const std::uint32_t w : level_.walls) {
            label_along(plan_.walls[w].from, plan_.walls[w].to, plan_.walls[w].id, letter);
        }
        for (const std::uint32_t c : level_.columns) {
            Point p = on_sheet(plan_.columns[c].at);
            const double half_width = 0.5 * label_width(plan_.columns[c].id, letter);
            label({p.x + column_side + half_width, p.y + column_side * 1.7}, 0, plan_.columns[c].id,
                  "label of-column", letter);
        }
        svg_.add("</g>\n");
    }

    [[nodiscard]] bool field_labels_fit(const FramedMember& member) const {
        const std::vector<JoistField>& fields = plan_.levels[member.origin.level].joist_fields;
        return member.origin.level < plan_.levels.size() && member.origin.index < fields.size() &&
               fields[member.origin.index].spacing * per_metre_ >= least_gap_for_labels;
    }

    /// A deck's label stands at the middle of its bounding box, a little off, where members cross.
    [[nodiscard]] Point label_place(const FramedDeck& deck) const {
        Point low = deck.outline[0];
        Point high = deck.outline[0];
        for (const Point& p : deck.outline) {
            low = {std::min(low.x, p.x), std::min(low.y, p.y)};
            high = {std::max(high.x, p.x), std::max(high.y, p.y)};
        }
        constexpr double aside = 0.4;
        return on_sheet({low.x + aside * (high.x - low.x), low.y + aside * (high.y - low.y)});
    }

    /// Along the strips, below the deck's label.
    void span_arrow(const FramedDeck& deck) {
        constexpr double longest = 24;
        constexpr double share = 0.15; // of the deck's shorter side
        const Ring& ring = deck.outline;
        const auto by_x = [](Point a, Point b) { return a.x < b.x; };
        const auto by_y = [](Point a, Point b) { return a.y < b.y; };
        const auto [left, right] = std::minmax_element(ring.begin(), ring.end(), by_x);
        const auto [bottom, top] = std::minmax_element(ring.begin(), ring.end(), by_y);
        const double side = std::min(right->x - left->x, top->y - bottom->y) * per_metre_;
        const double half_length = std::min(longest, share * side);
        const double angle = deck.direction * std::acos(0.0) / 90;
        const Point along{std::cos(angle), -std::sin(angle)};
        const Point at = label_place(deck);
        const double below = 0.6 * letter + half_length * std::abs(along.y);
        svg_.add("<path class=\"span\" data-deck=\"").text(deck.id).add("\" d=\"");
        double_arrow(svg_, {at.x, at.y + below}, along, half_length);
        svg_.add("\"/>\n");
    }

    void label_along(Point from, Point to, std::string_view id, double size) {
        constexpr double lift = 5; // clear of the line
        const Point a = on_sheet(from);
        const Point b = on_sheet(to);
        double angle = std::atan2(b.y - a.y, b.x - a.x);
        const double quarter = std::acos(0.0);
        constexpr double upright = 1e-6; // radians: a vertical line's direction up to rounding
        // Text is read from below or from the right.
        if (angle > quarter - upright) {
            angle -= 2 * quarter;
        } else if (angle <= -quarter - upright) {
            angle += 2 * quarter;
        }
        constexpr double clear_of_columns = 0.42; // which stand at halves and thirds
        const Point middle = between(a, b, clear_of_columns);
        label({middle.x + lift * std::sin(angle), middle.y - lift * std::cos(angle)}, angle, id, "label",
              size);
    }

    static constexpr std::size_t longest_label = 24; ///< columns

    /// About: letters differ.
    [[nodiscard]] static double label_width(std::string_view id, double size) {
        constexpr double of_letter = 0.62;
        return of_letter * size * static_cast<double>(columns_of(fit(id, longest_label)));
    }

    /// `at`: the middle of the line that the letters stand on.
    void label(Point at, double angle, std::string_view id, std::string_view css_class, double size) {
        const double width = label_width(id, size);
        // The letters' middle lies above the line they stand on.
        constexpr double rise_of_middle = 0.35;
        const Point rise{rise_of_middle * size * std::sin(angle), -rise_of_middle * size * std::cos(angle)};
        at = kept_on_sheet(at + rise, width, size, angle, {width_, height_}) - rise;
        svg_.add("<text class=\"").add(css_class).add("\" x=\"").number(at.x).add("\" y=\"").number(at.y);
        svg_.add("\" font-size=\"").number(size).add("\"");
        if (angle != 0) {
            svg_.add(" transform=\"rotate(").number(angle * 90 / std::acos(0.0)).add(" ").number(at.x);
            svg_.add(" ").number(at.y).add(")\"");
        }
        svg_.add(">").text(fit(id, longest_label)).add("</text>\n");
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
    double per_metre_ = 1;
    double width_ = 0, height_ = 0;
};

} // namespace

void draw_level(const Plan& plan, const Framing& framing, std::uint32_t level, const Sharing& sharing,
                const ReportOptions& options, const TextSink& sink) {
    LevelDrawing(plan, framing, level, sharing, options, sink).draw();
}

RUNNEL_NAMESPACE_END
