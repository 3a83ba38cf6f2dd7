#include "report/csv_writer.hpp"

#include "report/number_text.hpp"

RUNNEL_NAMESPACE_BEGIN

namespace {
constexpr std::size_t part_size = std::size_t{1} << 16; ///< bytes handed on at a time
constexpr std::string_view starts_a_formula = "=+-@\t\r";
} // namespace

CsvWriter& CsvWriter::text(std::string_view value) {
    separate();
    std::string safe(value);
    if (!safe.empty() && starts_a_formula.find(safe.front()) != std::string_view::npos) {
        safe.insert(safe.begin(), '\'');
    }
    if (safe.find_first_of(",\"\r\n") == std::string::npos) {
        buffer_ += safe;
        return *this;
    }
    buffer_ += '"';
    for (const char c : safe) {
        buffer_ += c;
        if (c == '"') {
            buffer_ += c;
        }
    }
    buffer_ += '"';
    return *this;
}

CsvWriter& CsvWriter::number(double value, double scale) {
    separate();
    NumberBuffer digits;
    buffer_ += number_text(value, scale, digits);
    return *this;
}

void CsvWriter::end_row() {
    buffer_ += "\r\n";
    row_is_empty_ = true;
    if (buffer_.size() >= part_size) {
        finish();
    }
}

void CsvWriter::finish() {
    sink_(buffer_);
    buffer_.clear();
}

void CsvWriter::separate() {
    if (!row_is_empty_) {
        buffer_ += ',';
    }
    row_is_empty_ = false;
}

RUNNEL_NAMESPACE_END
