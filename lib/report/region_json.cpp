#include "report/region_json.hpp"

#include "geometry/basic.hpp"
#include "report/problem_json.hpp"

#include <runnel/report.hpp>

RUNNEL_NAMESPACE_BEGIN

namespace {

using Layout = JsonWriter::Layout;

void write_ring(JsonWriter& json, const Ring& ring, const Scale& scale, bool closed) {
    json.open_array();
    for (const Point& point : ring) {
        json.pair(point.x, point.y, scale.length);
    }
    if (closed && !ring.empty()) {
        json.pair(ring.front().x, ring.front().y, scale.length);
    }
    json.close_array();
}

bool holds(const Ring& ring, Point p) {
    bool inside = false;
    for (std::size_t i = 0, j = ring.size() - 1; i < ring.size(); j = i++) {
        const Point a = ring[i];
        const Point b = ring[j];
        if ((a.y > p.y) != (b.y > p.y) && p.x < a.x + (p.y - a.y) * (b.x - a.x) / (b.y - a.y)) {
            inside = !inside;
        }
    }
    return inside;
}

/// Rings in the order that GeoJSON wants: each outer ring with its holes.
std::vector<std::vector<const Ring*>> polygons_of(const Region& region) {
    std::vector<std::vector<const Ring*>> polygons;
    for (const Ring& ring : region.rings) {
        if (signed_area(ring) >= 0) {
            polygons.push_back({&ring});
        }
    }
    for (const Ring& ring : region.rings) {
        if (signed_area(ring) >= 0 || polygons.empty()) {
            continue;
        }
        std::size_t owner = 0;
        for (std::size_t i = 0; i < polygons.size(); ++i) {
            if (holds(*polygons[i].front(), between(ring[0], ring[1], 0.5))) {
                owner = i;
            }
        }
        polygons[owner].push_back(&ring);
    }
    return polygons;
}

class RegionLister {
public:
    RegionLister(const Plan& plan, const Framing& framing, std::span<const Sharing> sharings,
                 const RegionView& view, const ReportOptions& options, const TextSink& sink)
        : framing_(framing), sharings_(sharings), view_(view), scale_(options.units.value_or(plan.units)),
          names_(plan, framing), json_(sink) {}

    void write(std::span<const Problem> problems) {
        const bool geojson = view_.format == RegionFormat::geojson;
        json_.open_object(Layout::block);
        if (geojson) {
            json_.key("type").text("FeatureCollection");
        }
        json_.key("units").open_object();
        json_.key("length").text(name_of(scale_.units.length)).key("force").text(name_of(scale_.units.force));
        json_.close_object();
        json_.key("problems").open_array(Layout::block);
        for (const Problem& problem : problems) {
            write_problem(json_, problem, scale_);
        }
        json_.close_array();
        json_.key(geojson ? "features" : "levels").open_array(Layout::block);
        for (std::uint32_t l = 0; l < framing_.levels.size() && l < sharings_.size(); ++l) {
            if (!view_.level || *view_.level == l) {
                geojson ? features(l) : level(l);
            }
        }
        json_.close_array().close_object();
        json_.finish();
    }

private:
    void level(std::uint32_t level) {
        json_.open_object(Layout::block);
        json_.key("id").text(framing_.levels[level].id);
        json_.key("regions").open_array(Layout::block);
        for (const Region& region : regions_of(sharings_[level])) {
            write_region(json_, region, sharings_[level], level, framing_, names_, scale_);
        }
        json_.close_array().close_object();
    }

    void features(std::uint32_t level) {
        for (const Region& region : regions_of(sharings_[level])) {
            const Carrier carrier = sharings_[level].carrier(region.carrier);
            json_.open_object();
            json_.key("type").text("Feature");
            json_.key("properties").open_object();
            json_.key("level").text(framing_.levels[level].id);
            json_.key("deck").text(framing_.levels[level].decks[region.deck].id);
            json_.key("carrier").text(names_.carrier(level, carrier));
            json_.key("kind").text(Names::kind(carrier.kind));
            json_.key("area").number(region.area, scale_.area);
            json_.close_object();
            json_.key("geometry").open_object();
            json_.key("type").text("MultiPolygon");
            json_.key("coordinates").open_array();
            for (const std::vector<const Ring*>& polygon : polygons_of(region)) {
                json_.open_array();
                for (const Ring* ring : polygon) {
                    write_ring(json_, *ring, scale_, true);
                }
                json_.close_array();
            }
            json_.close_array().close_object().close_object();
        }
    }

    const Framing& framing_;
    std::span<const Sharing> sharings_;
    const RegionView& view_;
    Scale scale_;
    Names names_;
    JsonWriter json_;
};

} // namespace

void write_region(JsonWriter& json, const Region& region, const Sharing& sharing, std::uint32_t level,
                  const Framing& framing, const Names& names, const Scale& scale) {
    const Carrier carrier = sharing.carrier(region.carrier);
    json.open_object();
    json.key("deck").text(framing.levels[level].decks[region.deck].id);
    json.key("carrier").text(names.carrier(level, carrier));
    json.key("kind").text(Names::kind(carrier.kind));
    json.key("area").number(region.area, scale.area);
    json.key("centroid").pair(region.centroid.x, region.centroid.y, scale.length);
    json.key("rings").open_array();
    for (const Ring& ring : region.rings) {
        write_ring(json, ring, scale, false);
    }
    json.close_array().close_object();
}

void write_regions(const Plan& plan, const Framing& framing, std::span<const Sharing> sharings,
                   std::span<const Problem> problems, const RegionView& view, const ReportOptions& options,
                   const TextSink& sink) {
    if (view.format != RegionFormat::svg) {
        RegionLister(plan, framing, sharings, view, options, sink).write(problems);
        return;
    }
    const std::uint32_t level = view.level.value_or(0);
    if (level < framing.levels.size() && level < sharings.size()) {
        draw_level(plan, framing, level, sharings[level], options, sink);
    }
}

RUNNEL_NAMESPACE_END
