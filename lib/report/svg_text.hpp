#pragma once

#include <runnel/report.hpp>

#include <cstddef>
#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// Writes markup as it goes: parts as they are, numbers to a hundredth, text with what XML forbids taken out.
class SvgText {
public:
    explicit SvgText(const TextSink& sink) : sink_(sink) {}

    SvgText& add(std::string_view markup);
    SvgText& number(double value);
    SvgText& count(std::size_t value);
    SvgText& text(std::string_view words);
    void finish();

private:
    const TextSink& sink_;
    std::string buffer_;
};

RUNNEL_NAMESPACE_END
