#include "local_date.hpp"

namespace bathwright::shopfiles {

std::string read_date(Table& table, const Key& key) {
  const Node* written = table.any(key);
  if (!written) return "";
  Node day = *written;
  if (day.kind == Node::Kind::text) {  // in quotes: what TOML itself would take without them
    auto tree = parse_toml("", "day = " + day.text);
    if (tree && tree->items.size() == 1) day = tree->items[0];
  }
  constexpr std::size_t length = std::string_view("2027-06-30").size();
  if (day.kind == Node::Kind::moment && day.text.size() == length) return day.text;
  table.report(key.name, "is not a date", "year-month-day, as " + std::string(key.example));
  return "";
}

}  // namespace bathwright::shopfiles
