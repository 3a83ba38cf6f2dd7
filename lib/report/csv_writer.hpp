#pragma once

#include <runnel/report.hpp>

#include <string>
#include <string_view>

RUNNEL_NAMESPACE_BEGIN

/// Writes comma-separated values (RFC 4180: lines end in CR LF, texts are quoted where they need it). A text
/// that a spreadsheet would take for a formula gets an apostrophe before it.
class CsvWriter {
public:
    explicit CsvWriter(const TextSink& sink) : sink_(sink) {}

    CsvWriter& text(std::string_view value);
    /// An SI value in units of `scale` SI units.
    CsvWriter& number(double value, double scale = 1);
    void end_row();
    void finish();

private:
    void separate();

    const TextSink& sink_;
    std::string buffer_;
    bool row_is_empty_ = true;
};

RUNNEL_NAMESPACE_END
