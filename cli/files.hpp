#pragma once

#include <runnel/report.hpp>

#include <cstdio>
#include <optional>
#include <string>

namespace runnel_cli {

/// The bytes of a file, or of standard input for "-"; nothing where it cannot be read, which is then said on
/// standard error.
[[nodiscard]] std::optional<std::string> read_file(const std::string& path);

/// Somewhere to write. Trouble is kept until close() and said there, once.
class Output {
public:
    static Output standard() { return {stdout, "standard output"}; }
    explicit Output(const std::string& path);
    Output(Output&&) noexcept;
    Output& operator=(Output&&) = delete;
    ~Output();

    [[nodiscard]] runnel::TextSink sink();
    /// True where everything was written.
    [[nodiscard]] bool close();

private:
    Output(std::FILE* file, std::string name) : file_(file), name_(std::move(name)) {}
    void keep_trouble();

    std::FILE* file_;
    std::string name_;
    int trouble_ = 0; ///< errno of the first failure
};

/// A file name made of an id: letters, digits, dot, minus and underscore only.
[[nodiscard]] std::string safe_file_name(const std::string& id);

/// Says something on standard error, with the program's name before it.
void complain(const std::string& sentence);
runnel::TextSink standard_error();

/// Colour is for terminals, and never with NO_COLOR.
[[nodiscard]] bool colour_on(std::FILE* stream);

} // namespace runnel_cli
