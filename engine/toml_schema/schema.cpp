#include <bathwright/toml_schema/schema.hpp>

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <limits>

namespace bathwright::toml_schema {
namespace {

std::string shown(const Node& node) {
  switch (node.kind) {
    case Node::Kind::text:
      return '"' + printable(node.text) + '"';
    case Node::Kind::number:
      return fmt::format("{}", node.number);
    case Node::Kind::truth:
      return "true or false";
    case Node::Kind::moment:
      return "a date or time";
    case Node::Kind::list:
      return "a list";
    case Node::Kind::table:
      return "a table";
  }
  return "";
}

}  // namespace

Table::Table(Document& document, const Node& node, std::string path)
    : document_(&document), node_(&node), path_(std::move(path)), visit_(document.visits_.size()) {
  document.visits_.push_back({&node, path_, {}});
}

const Node* Table::find(std::string_view name) const {
  const auto found = std::ranges::find(node_->items, name, &Node::key);
  return found == node_->items.end() ? nullptr : &*found;
}

bool Table::has(std::string_view name) const { return find(name) != nullptr; }

std::vector<std::string> Table::names() const {
  std::vector<std::string> all;
  for (const Node& item : node_->items) all.push_back(item.key);
  return all;
}

int Table::line(std::string_view name) const {
  const Node* item = find(name);
  return item ? item->line : node_->line;
}

std::string Table::where(std::string_view name) const {
  std::string place = path_ + printable(name);
  if (name.empty() && !place.empty()) place.pop_back();  // the dot
  return at_line(document_->name_, line(name)) + ": " + place;
}

std::string Table::written(std::string_view name) const {
  const Node* item = find(name);
  return item && item->kind == Node::Kind::text ? item->text : "";
}

void Table::report(std::string_view name, std::string what, std::string expected, std::string try_this) {
  report(name, {{Fault::bad_input, where(name), std::move(what), std::move(expected), std::move(try_this)}});
}

void Table::report(std::string_view name, const Problems& problems) {
  for (const Problem& problem : problems) document_->problems_.emplace(line(name), problem);
}

bool Table::reported(std::string_view name) const {
  const auto [first, last] = document_->problems_.equal_range(line(name));
  const std::string place = where(name);
  return std::any_of(first, last, [&](const auto& entry) { return entry.second.where == place; });
}

const Node* Table::any(const Key& key) {
  document_->visits_[visit_].keys.emplace(key.name);
  const Node* item = find(key.name);
  if (!item && key.need == required) {
    report(key.name, "is missing", fmt::format("{} = {}", key.name, key.example));
  }
  return item;
}

const Node* Table::of_kind(const Key& key, Node::Kind kind, std::string_view expected) {
  const Node* item = any(key);
  if (!item || item->kind == kind) return item;
  report(key.name, shown(*item) + " is not " + std::string(expected),
         fmt::format("{}, as {}", expected, key.example));
  return nullptr;
}

std::string Table::text(const Key& key) {
  const Node* item = of_kind(key, Node::Kind::text, "text in quotes");
  if (!item) return "";
  if (item->text.find_first_not_of(' ') == std::string::npos) {
    report(key.name, "is empty", fmt::format("text, as {}", key.example));
  }
  return item->text;
}

std::vector<std::string> Table::texts(const Key& key) {
  std::vector<std::string> all;
  const Node* list = of_kind(key, Node::Kind::list, "a list");
  if (!list) return all;
  for (const Node& item : list->items) {
    if (item.kind == Node::Kind::text && !item.text.empty()) {
      all.push_back(item.text);
    } else {
      report(key.name, shown(item) + " is not a name", fmt::format("names in quotes, as {}", key.example));
    }
  }
  return all;
}

std::optional<double> Table::number(const Key& key, Range range) {
  const Node* item = of_kind(key, Node::Kind::number, "a number without quotes");
  if (!item) return std::nullopt;
  if (item->number >= range.low && item->number <= range.high) return item->number;
  report(key.name, shown(*item) + " is out of range",
         fmt::format("a number from {} to {}, as {}", range.low, range.high, key.example),
         "Check the decimal point.");
  return std::nullopt;
}

std::optional<double> Table::number(const Key& key) {
  constexpr double largest = std::numeric_limits<double>::max();
  return number(key, {-largest, largest});
}

bool Table::truth(const Key& key) {
  const Node* item = of_kind(key, Node::Kind::truth, "true or false");
  return item && item->truth;
}

const std::string* Table::number_with_unit(const Key& key) {
  const Node* item = any(key);
  if (!item) return nullptr;
  if (item->kind == Node::Kind::text) return &item->text;
  report(key.name, shown(*item) + (item->kind == Node::Kind::number ? " has no unit" : " is not a quantity"),
         fmt::format("a number with its unit in quotes, as {}", key.example));
  return nullptr;
}

std::optional<Table> Table::table(const Key& key) {
  const Node* item = of_kind(key, Node::Kind::table, "a table");
  if (!item) return std::nullopt;
  return Table(*document_, *item, path_ + printable(key.name) + '.');
}

std::vector<Table> Table::tables(const Key& key) {
  std::vector<Table> all;
  const Node* list = of_kind(key, Node::Kind::list, fmt::format("a list of tables [[{}]]", key.name));
  if (!list) return all;
  for (const Node& item : list->items) {
    if (item.kind == Node::Kind::table) {
      all.push_back(Table(*document_, item, path_ + printable(key.name) + '.'));
    } else {
      report(key.name, shown(item) + " is not a table", fmt::format("tables headed [[{}]]", key.name));
    }
  }
  return all;
}

Problems Document::problems_by_line() {
  for (const Visit& visit : visits_) {
    const std::vector<std::string> known(visit.keys.begin(), visit.keys.end());
    for (const Node& item : visit.table->items) {
      if (visit.keys.contains(item.key)) continue;
      const auto meant = nearest(item.key, known);
      problems_.emplace(
          item.line,
          Problem{Fault::bad_input, at_line(name_, item.line) + ": " + visit.path + printable(item.key),
                  "is not a key of this table", fmt::format("one of {}", fmt::join(known, ", ")),
                  meant ? "Did you mean " + *meant + '?' : ""});
    }
  }
  Problems all;
  for (const auto& [line, problem] : problems_) all.push_back(problem);
  return all;
}

}  // namespace bathwright::toml_schema
