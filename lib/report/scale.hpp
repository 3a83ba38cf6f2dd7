#pragma once

#include <runnel/units.hpp>

RUNNEL_NAMESPACE_BEGIN

/// SI values to those of a document's units: divide by these.
struct Scale {
    explicit Scale(Units output)
        : units(output), length(si_per_unit(output, dimension::length)),
          area(si_per_unit(output, dimension::area)), force(si_per_unit(output, dimension::force)),
          line_load(si_per_unit(output, dimension::line_load)),
          area_load(si_per_unit(output, dimension::area_load)),
          moment(si_per_unit(output, dimension::moment)) {}

    Units units;
    double length, area, force, line_load, area_load, moment;
};

RUNNEL_NAMESPACE_END
