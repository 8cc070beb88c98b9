// SPDX-License-Identifier: GPL-3.0-or-later
#include "core/files/toml_table.h"

#include "core/files/nearest_name.h"
#include "core/files/toml_tree.h"

#include <algorithm>
#include <cmath>
#include <set>

namespace whichway {

using Kind = TomlNode::Kind;

struct TomlTable::Document {
    std::string file;
    TomlNode root = {};
    std::vector<Error>* problems = nullptr;
};

struct TomlTable::View {
    std::shared_ptr<Document> document;
    const TomlNode* table = nullptr;
    std::set<std::string> known;
    std::set<std::string> faulty;

    void report(const std::string& code, const Place& at, const std::string& message,
                const std::string& remedy, std::vector<std::string> values = {}) const {
        document->problems->push_back(
            {.code = code, .place = at, .message = message, .remedy = remedy, .values = std::move(values)});
    }

    const TomlNode* find(const std::string& key, bool required) {
        known.insert(key);
        const TomlNode* node = table->member(key);
        if (!node && required) {
            faulty.insert(key);
            report("toml.missing-key", table->place, "The key “" + key + "” is missing.",
                   "Add it to this table.", {key});
        }
        return node;
    }

    void wrongType(const std::string& key, const TomlNode& node, const std::string& wanted) {
        faulty.insert(key);
        report("toml.type", node.place,
               "“" + key + "” is " + std::string(kindInWords(node.kind)) + ", and " + wanted + " is wanted.",
               "Write " + wanted + " here.", {key, wanted});
    }

    std::optional<double> finite(const std::string& key, const TomlNode& node) {
        if (node.kind != Kind::Number && node.kind != Kind::Integer) {
            wrongType(key, node, "a number");
            return std::nullopt;
        }
        if (!std::isfinite(node.number)) {
            faulty.insert(key);
            report("toml.not-finite", node.place, "“" + key + "” is not a finite number.",
                   "Write a finite number here.", {key});
            return std::nullopt;
        }
        return node.number;
    }
};

TomlTable::TomlTable(std::shared_ptr<View> view) : view_(std::move(view)) {}

std::optional<TomlTable> TomlTable::parse(std::string_view content, const std::string& file,
                                          std::vector<Error>& problems) {
    auto document = std::make_shared<Document>();
    document->file = file;
    document->problems = &problems;
    Result<TomlNode> root = parseToml(content, file);
    if (!root) {
        problems.push_back(root.error());
        return std::nullopt;
    }
    document->root = std::move(*root);
    auto view = std::make_shared<View>();
    view->table = &document->root;
    view->document = std::move(document);
    return TomlTable(std::move(view));
}

bool TomlTable::has(const std::string& key) const {
    return view_->table->member(key) != nullptr;
}

bool TomlTable::isText(const std::string& key) const {
    const TomlNode* node = view_->table->member(key);
    return node && node->kind == Kind::Text;
}

bool TomlTable::isList(const std::string& key) const {
    const TomlNode* node = view_->table->member(key);
    return node && node->kind == Kind::Array;
}

bool TomlTable::isFaulty(const std::string& key) const {
    return view_->faulty.contains(key);
}

Place TomlTable::place() const {
    return view_->table->place;
}

Place TomlTable::keyPlaceOf(const std::string& key) const {
    const TomlNode* node = view_->table->member(key);
    return node ? node->keyPlace : view_->table->place;
}

std::vector<Place> TomlTable::itemPlacesOf(const std::string& key) const {
    std::vector<Place> places;
    if (isList(key))
        for (const TomlNode& item : view_->table->member(key)->items)
            places.push_back(item.place);
    return places;
}

void TomlTable::require(const std::string& key) {
    view_->find(key, true);
}

void TomlTable::alsoKnows(const std::string& key) {
    view_->known.insert(key);
}

Place TomlTable::placeOf(const std::string& key) const {
    const TomlNode* node = view_->table->member(key);
    return node ? node->place : view_->table->place;
}

std::string TomlTable::text(const std::string& key, std::optional<std::string> otherwise) {
    const TomlNode* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or("");
    if (node->kind != Kind::Text) {
        view_->wrongType(key, *node, "a text");
        return otherwise.value_or("");
    }
    return node->text;
}

double TomlTable::number(const std::string& key, std::optional<double> otherwise) {
    const TomlNode* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or(0);
    return view_->finite(key, *node).value_or(otherwise.value_or(0));
}

long long TomlTable::integer(const std::string& key, std::optional<long long> otherwise) {
    const TomlNode* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or(0);
    if (node->kind != Kind::Integer) {
        view_->wrongType(key, *node, "a whole number");
        return otherwise.value_or(0);
    }
    return node->integer;
}

bool TomlTable::flag(const std::string& key, std::optional<bool> otherwise) {
    const TomlNode* node = view_->find(key, !otherwise);
    if (!node)
        return otherwise.value_or(false);
    if (node->kind != Kind::Flag) {
        view_->wrongType(key, *node, "true or false");
        return otherwise.value_or(false);
    }
    return node->flag;
}

std::vector<std::string> TomlTable::texts(const std::string& key) {
    std::vector<std::string> found;
    const TomlNode* node = view_->find(key, false);
    if (!node)
        return found;
    const TomlNode* list = node->kind == Kind::Array ? node : nullptr;
    if (!list) {
        view_->wrongType(key, *node, "a list of texts");
        return found;
    }
    for (const TomlNode& item : list->items) {
        if (item.kind != Kind::Text)
            view_->wrongType(key, item, "a text");
        found.push_back(item.text);
    }
    return found;
}

std::vector<double> TomlTable::numbers(const std::string& key, std::size_t length) {
    std::vector<double> found;
    const TomlNode* node = view_->find(key, false);
    if (!node)
        return found;
    const TomlNode* list = node->kind == Kind::Array ? node : nullptr;
    if (!list || (length > 0 && list->items.size() != length)) {
        view_->wrongType(key, *node,
                         length > 0 ? "a list of " + std::to_string(length) + " numbers"
                                    : "a list of numbers");
        return found;
    }
    for (const TomlNode& item : list->items)
        found.push_back(view_->finite(key, item).value_or(0));
    return found;
}

std::vector<std::vector<double>> TomlTable::rows(const std::string& key, std::size_t length) {
    std::vector<std::vector<double>> found;
    const TomlNode* node = view_->find(key, false);
    if (!node)
        return found;
    const TomlNode* list = node->kind == Kind::Array ? node : nullptr;
    if (!list) {
        view_->wrongType(key, *node, "a list of lists of numbers");
        return found;
    }
    for (const TomlNode& item : list->items) {
        const TomlNode* row = item.kind == Kind::Array ? &item : nullptr;
        if (!row || row->items.size() != length) {
            view_->wrongType(key, item, "a list of " + std::to_string(length) + " numbers");
            continue;
        }
        std::vector<double> values;
        for (const TomlNode& value : row->items)
            values.push_back(view_->finite(key, value).value_or(0));
        found.push_back(std::move(values));
    }
    return found;
}

std::optional<TomlTable> TomlTable::table(const std::string& key) {
    const TomlNode* node = view_->find(key, false);
    if (!node)
        return std::nullopt;
    if (node->kind != Kind::Table) {
        view_->wrongType(key, *node, "a table");
        return std::nullopt;
    }
    auto view = std::make_shared<View>();
    view->document = view_->document;
    view->table = node;
    return TomlTable(std::move(view));
}

std::vector<TomlTable> TomlTable::tables(const std::string& key) {
    std::vector<TomlTable> found;
    const TomlNode* node = view_->find(key, false);
    if (!node)
        return found;
    const TomlNode* list = node->kind == Kind::Array ? node : nullptr;
    if (!list) {
        view_->wrongType(key, *node, "a list of tables");
        return found;
    }
    for (const TomlNode& item : list->items) {
        if (item.kind != Kind::Table) {
            view_->wrongType(key, item, "a table");
            continue;
        }
        auto view = std::make_shared<View>();
        view->document = view_->document;
        view->table = &item;
        found.push_back(TomlTable(std::move(view)));
    }
    return found;
}

std::vector<std::string> TomlTable::keys() const {
    std::vector<std::string> keys;
    for (const auto& [key, node] : view_->table->members)
        keys.push_back(key);
    return keys;
}

void TomlTable::report(const std::string& code, const Place& place, const std::string& message,
                       const std::string& remedy, std::vector<std::string> values) {
    view_->report(code, place, message, remedy, std::move(values));
}

void TomlTable::refuseOthers() {
    constexpr int kNamed = 50; // a table of nothing but strange keys need not be listed whole
    const std::vector<std::string> known(view_->known.begin(), view_->known.end());
    int named = 0;
    for (const auto& [name, node] : view_->table->members) {
        if (view_->known.contains(name) || ++named > kNamed)
            continue;
        const std::string nearest = nearestName(name, known);
        view_->report("toml.unknown-key", node.keyPlace, "“" + name + "” is not a key of this table.",
                      nearest.empty() ? "Remove it." : "Did you mean “" + nearest + "”?", {name, nearest});
    }
}

} // namespace whichway
