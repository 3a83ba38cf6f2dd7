#include "report/csv_writer.hpp"

#include <array>
#include <charconv>

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

CsvWriter& CsvWriter::number(double value) {
    separate();
    std::array<char, 32> digits;
    const auto [end, error] =
        std::to_chars(digits.data(), digits.data() + digits.size(), value == 0 ? 0.0 : value);
    buffer_.append(digits.data(), end);
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
