#pragma once

#include "plan/json_events.hpp"

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

RUNNEL_NAMESPACE_BEGIN

/// A value of the tree. Children of a list follow it directly; those of an object come as key and value.
struct JsonNode {
    double number = 0;
    std::uint32_t at = 0;   ///< offset in the document
    std::uint32_t next = 0; ///< index of the node behind this one and all inside it
    std::uint32_t text_from = 0;
    std::uint32_t text_size = 0;
    JsonKind kind = JsonKind::null;
};

/// One item of a plan's list as a small flat tree that is used again for the next, so that reading needs
/// memory for one item and not for the document.
class JsonTree {
public:
    void clear() {
        nodes_.clear();
        text_.clear();
        open_.clear();
    }
    void scalar(JsonKind kind, double number, std::string_view text, std::uint32_t at) {
        add(kind, at).number = number;
        keep(text);
    }
    void key(std::string_view name, std::uint32_t at) {
        add(JsonKind::key, at);
        keep(name);
    }
    void open(JsonKind kind, std::uint32_t at) {
        open_.push_back(static_cast<std::uint32_t>(nodes_.size()));
        add(kind, at);
    }
    void close() {
        nodes_[open_.back()].next = static_cast<std::uint32_t>(nodes_.size());
        open_.pop_back();
    }
    /// True when the value that was begun is whole.
    [[nodiscard]] bool whole() const { return open_.empty() && !nodes_.empty(); }

    [[nodiscard]] const JsonNode& node(std::uint32_t index) const { return nodes_[index]; }
    [[nodiscard]] std::string_view text(std::uint32_t index) const {
        return std::string_view(text_).substr(nodes_[index].text_from, nodes_[index].text_size);
    }

private:
    JsonNode& add(JsonKind kind, std::uint32_t at) {
        JsonNode node;
        node.kind = kind;
        node.at = at;
        node.next = static_cast<std::uint32_t>(nodes_.size()) + 1;
        nodes_.push_back(node);
        return nodes_.back();
    }
    void keep(std::string_view text) {
        nodes_.back().text_from = static_cast<std::uint32_t>(text_.size());
        nodes_.back().text_size = static_cast<std::uint32_t>(text.size());
        text_ += text;
    }

    std::vector<JsonNode> nodes_;
    std::vector<std::uint32_t> open_;
    std::string text_;
};

RUNNEL_NAMESPACE_END
