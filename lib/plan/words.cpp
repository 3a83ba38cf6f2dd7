#include "plan/words.hpp"

#include <algorithm>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

namespace {

constexpr std::size_t longest_shown = 60;

char lower(char c) {
    return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c;
}

std::size_t edits_between(std::string_view a, std::string_view b) {
    std::vector<std::size_t> before(b.size() + 1), last(b.size() + 1), row(b.size() + 1);
    for (std::size_t j = 0; j <= b.size(); ++j) {
        last[j] = j;
    }
    for (std::size_t i = 1; i <= a.size(); ++i) {
        row[0] = i;
        for (std::size_t j = 1; j <= b.size(); ++j) {
            const bool same = lower(a[i - 1]) == lower(b[j - 1]);
            row[j] = std::min({last[j] + 1, row[j - 1] + 1, last[j - 1] + (same ? 0 : 1)});
            if (i > 1 && j > 1 && lower(a[i - 1]) == lower(b[j - 2]) && lower(a[i - 2]) == lower(b[j - 1])) {
                row[j] = std::min(row[j], before[j - 2] + 1);
            }
        }
        std::swap(before, last);
        std::swap(last, row);
    }
    return last[b.size()];
}

} // namespace

std::string shown(std::string_view text) {
    std::size_t size = std::min(text.size(), longest_shown);
    while (size < text.size() && size > 0 && (static_cast<unsigned char>(text[size]) & 0xc0) == 0x80) {
        --size; // not inside a character of several bytes
    }
    std::string result(text.substr(0, size));
    for (char& c : result) {
        if (static_cast<unsigned char>(c) < 0x20 || c == 0x7f) {
            c = '?';
        }
    }
    return size < text.size() ? result + "..." : result;
}

std::string_view nearest_word(std::string_view given, std::span<const std::string_view> words) {
    if (given.empty() || given.size() > longest_shown) {
        return {};
    }
    std::string_view best;
    std::size_t fewest = given.size(); // as many edits as letters is no likeness
    for (const std::string_view word : words) {
        const std::size_t edits = edits_between(given, word);
        // One slip in three letters may be meant; more is another word. A beginning is taken as cut short.
        const bool begins = given.size() >= 3 && word.substr(0, given.size()) == given;
        if (edits < fewest && (edits <= 1 + std::max(given.size(), word.size()) / 4 || begins)) {
            best = word;
            fewest = edits;
        }
    }
    return best;
}

std::string listed(std::span<const std::string_view> words) {
    std::string text;
    for (std::size_t i = 0; i < words.size(); ++i) {
        text += i == 0 ? "" : i + 1 == words.size() ? " or " : ", ";
        text += words[i];
    }
    return text;
}

std::string hint_for(std::string_view given, std::span<const std::string_view> words, std::string_view lead) {
    const std::string_view nearest = nearest_word(given, words);
    if (!nearest.empty()) {
        return "Did you mean `" + std::string(nearest) + "`?";
    }
    return lead.empty() || words.empty() ? std::string{} : std::string(lead) + listed(words) + '.';
}

RUNNEL_NAMESPACE_END
