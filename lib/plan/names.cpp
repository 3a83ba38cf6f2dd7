#include <runnel/plan.hpp>

RUNNEL_NAMESPACE_BEGIN

std::string_view name_of(CaseKind kind) noexcept {
    switch (kind) {
    case CaseKind::dead:
        return "dead";
    case CaseKind::superimposed_dead:
        return "superimposed_dead";
    case CaseKind::live:
        return "live";
    case CaseKind::roof_live:
        return "roof_live";
    case CaseKind::snow:
        return "snow";
    case CaseKind::rain:
        return "rain";
    case CaseKind::construction:
        return "construction";
    case CaseKind::other:
        return "other";
    }
    return "";
}

std::string_view name_of(Share share) noexcept {
    switch (share) {
    case Share::half:
        return "half";
    case Share::lever:
        return "lever";
    case Share::continuous:
        return "continuous";
    }
    return "";
}

std::string_view name_of(Role role) noexcept {
    switch (role) {
    case Role::joist:
        return "joist";
    case Role::beam:
        return "beam";
    case Role::girder:
        return "girder";
    }
    return "";
}

std::string_view name_of(SpanKind span) noexcept {
    switch (span) {
    case SpanKind::one_way:
        return "one-way";
    case SpanKind::two_way:
        return "two-way";
    case SpanKind::columns:
        return "columns";
    }
    return "";
}

RUNNEL_NAMESPACE_END
