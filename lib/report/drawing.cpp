#include "geometry/basic.hpp"
#include "report/names.hpp"
#include "report/page.hpp"
#include "report/region_tints.hpp"
#include "report/scale.hpp"
#include "report/svg_text.hpp"

#include <runnel/report.hpp>

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

struct Tint {
    std::string_view paper, line;
    int angle; ///< of the hatching, degrees
};
constexpr std::array<Tint, tint_count> tints{{{"#e9eef2", "#7c93a6", 25},
                                              {"#f4ead9", "#b99a63", 65},
                                              {"#e6efe1", "#86a678", 115},
                                              {"#f2e4e1", "#b98579", 155},
                                              {"#ece6f1", "#9484ab", 5},
                                              {"#e2efee", "#6fa09c", 90},
                                              {"#efefe3", "#a3a16a", 45}}};

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
        const double side = std::max(high_.x - low_.x, high_.y - low_.y);
        per_metre_ = side > 0 ? sheet_side / side : 1;
        width_ = std::max((high_.x - low_.x) * per_metre_ + 2 * margin, least_width);
        height_ = (high_.y - low_.y) * per_metre_ + 2 * margin + title_height + scale_bar_height;
    }

    /// North is up: y turns round.
    [[nodiscard]] Point on_sheet(Point p) const {
        return {margin + (p.x - low_.x) * per_metre_, margin + title_height + (high_.y - p.y) * per_metre_};
    }

    void open_sheet() {
        svg_.add("<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 ").number(width_).add(" ");
        svg_.number(height_).add("\" width=\"").number(width_).add("\" height=\"").number(height_);
        svg_.add("\" font-family=\"sans-serif\" font-size=\"").number(letter).add("\">\n<title>");
        svg_.text(plan_.title).add(plan_.title.empty() ? "" : ": ").text(level_.id).add("</title>\n<defs>\n");
        for (std::size_t t = 0; t < tints.size(); ++t) {
            svg_.add("<pattern id=\"tint").count(t).add("\" width=\"7\" height=\"7\" patternUnits=\"");
            svg_.add("userSpaceOnUse\" patternTransform=\"rotate(")
                .count(static_cast<std::size_t>(tints[t].angle));
            svg_.add(")\"><rect width=\"7\" height=\"7\" fill=\"").add(tints[t].paper);
            svg_.add("\"/><line x1=\"0\" y1=\"0\" x2=\"7\" y2=\"0\" stroke=\"").add(tints[t].line);
            svg_.add("\" stroke-width=\"0.9\"/></pattern>\n");
        }
        svg_.add("</defs>\n<style>\n"
                 ".region{stroke:#5d6b75;stroke-width:.6;fill-rule:evenodd}\n"
                 ".deck{fill:none;stroke:#39434b;stroke-width:1.2;stroke-dasharray:9 4}\n"
                 ".opening{fill:#fff;stroke:#39434b;stroke-width:1}\n"
                 ".cross{stroke:#39434b;stroke-width:.8}\n"
                 ".member{stroke:#12303f;stroke-linecap:butt}\n"
                 ".joist{stroke-width:1.1}.beam{stroke-width:2.6}.girder{stroke-width:4.4}\n"
                 ".wall{stroke:#4a3b30;stroke-width:9;stroke-opacity:.75}\n"
                 ".column{fill:#8c1c13;stroke:#fff;stroke-width:1}\n"
                 ".label{fill:#12303f;text-anchor:middle;paint-order:stroke;stroke:#fff;stroke-width:3.2;"
                 "stroke-linejoin:round}\n"
                 ".of-column{fill:#8c1c13;text-anchor:start}.of-deck{font-style:italic;fill:#39434b}\n"
                 "</style>\n<rect width=\"100%\" height=\"100%\" fill=\"#fff\"/>\n");
        svg_.add("<text x=\"")
            .number(margin)
            .add("\" y=\"")
            .number(margin * 0.75)
            .add("\" font-size=\"18\">");
        constexpr std::size_t longest = 80;
        svg_.text(fit(plan_.title, longest)).add(plan_.title.empty() ? "" : ", ");
        svg_.text(fit(level_.id, longest / 2)).add("</text>\n");
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
            label({p.x + column_side, p.y + column_side * 1.7}, 0, plan_.columns[c].id, "label of-column",
                  letter);
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

    void label_along(Point from, Point to, std::string_view id, double size) {
        constexpr double lift = 5; // clear of the line
        const Point a = on_sheet(from);
        const Point b = on_sheet(to);
        double angle = std::atan2(b.y - a.y, b.x - a.x);
        const double quarter = std::acos(0.0);
        // Text is read from below or from the right.
        if (angle > quarter - 1e-6) {
            angle -= 2 * quarter;
        } else if (angle <= -quarter - 1e-6) {
            angle += 2 * quarter;
        }
        constexpr double clear_of_columns = 0.42; // which stand at halves and thirds
        const Point middle = between(a, b, clear_of_columns);
        label({middle.x + lift * std::sin(angle), middle.y - lift * std::cos(angle)}, angle, id, "label",
              size);
    }

    void label(Point at, double angle, std::string_view id, std::string_view css_class, double size) {
        svg_.add("<text class=\"").add(css_class).add("\" x=\"").number(at.x).add("\" y=\"").number(at.y);
        svg_.add("\" font-size=\"").number(size).add("\"");
        if (angle != 0) {
            svg_.add(" transform=\"rotate(").number(angle * 90 / std::acos(0.0)).add(" ").number(at.x);
            svg_.add(" ").number(at.y).add(")\"");
        }
        constexpr std::size_t longest = 24;
        svg_.add(">").text(fit(id, longest)).add("</text>\n");
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
