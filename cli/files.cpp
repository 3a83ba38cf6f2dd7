#include "files.hpp"

#include <unistd.h>

#include <array>
#include <cerrno>
#include <cstdlib>
#include <cstring>
#include <utility>

namespace runnel_cli {

void complain(const std::string& sentence) {
    std::fputs(("runnel: " + sentence + '\n').c_str(), stderr);
}

runnel::TextSink standard_error() {
    return [](std::string_view text) { std::fwrite(text.data(), 1, text.size(), stderr); };
}

bool colour_on(std::FILE* stream) {
    const char* const terminal = std::getenv("TERM");
    const bool dumb = terminal != nullptr && std::strcmp(terminal, "dumb") == 0;
    return std::getenv("NO_COLOR") == nullptr && !dumb && isatty(fileno(stream)) == 1;
}

std::optional<std::string> read_file(const std::string& path) {
    const bool standard = path == "-";
    std::FILE* const file = standard ? stdin : std::fopen(path.c_str(), "rb");
    if (file == nullptr) {
        complain("cannot read " + path + ": " + std::strerror(errno));
        return std::nullopt;
    }
    std::string text;
    std::array<char, 1 << 16> part;
    errno = 0;
    while (const std::size_t count = std::fread(part.data(), 1, part.size(), file)) {
        text.append(part.data(), count);
    }
    const bool failed = std::ferror(file) != 0;
    const int trouble = errno;
    if (!standard) {
        std::fclose(file);
    }
    if (failed) {
        complain("cannot read " + (standard ? "standard input" : path) + ": " + std::strerror(trouble));
        return std::nullopt;
    }
    return text;
}

Output::Output(const std::string& path) : file_(std::fopen(path.c_str(), "wb")), name_(path) {
    if (file_ == nullptr) {
        keep_trouble();
    }
}

Output::Output(Output&& other) noexcept
    : file_(std::exchange(other.file_, nullptr)), name_(std::move(other.name_)), trouble_(other.trouble_) {}

Output::~Output() {
    if (file_ != nullptr && file_ != stdout) {
        std::fclose(file_);
    }
}

void Output::keep_trouble() {
    if (trouble_ == 0) {
        trouble_ = errno != 0 ? errno : EIO;
    }
}

runnel::TextSink Output::sink() {
    return [this](std::string_view text) {
        if (trouble_ == 0 && std::fwrite(text.data(), 1, text.size(), file_) != text.size()) {
            keep_trouble();
        }
    };
}

bool Output::close() {
    if (file_ != nullptr) {
        std::FILE* const file = std::exchange(file_, nullptr);
        errno = 0;
        const bool closed = file == stdout ? std::fflush(file) == 0 : std::fclose(file) == 0;
        if (!closed) {
            keep_trouble();
        }
    }
    if (trouble_ != 0) {
        complain("cannot write " + name_ + ": " + std::strerror(trouble_));
    }
    return trouble_ == 0;
}

std::string safe_file_name(const std::string& id) {
    constexpr std::size_t longest = 80;
    std::string name;
    for (const char c : id.substr(0, longest)) {
        const bool letter = (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z');
        const bool digit = c >= '0' && c <= '9';
        name += letter || digit || c == '.' || c == '-' || c == '_' ? c : '_';
    }
    return name;
}

} // namespace runnel_cli
