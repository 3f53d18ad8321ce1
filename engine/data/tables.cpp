#include <algorithm>
#include <bathwright/data/tables.hpp>
#include <cassert>
#include <vector>

namespace bathwright::data {

/// Written by embed.cmake at build time: the tables, sorted by name.
struct EmbeddedTable {
  std::string_view name, text;
};
extern const std::span<const EmbeddedTable> embedded_tables;

std::string_view built_in_text(std::string_view path) {
  const auto found = std::find_if(embedded_tables.begin(), embedded_tables.end(),
                                  [&](const EmbeddedTable& t) { return t.name == path; });
  return found == embedded_tables.end() ? std::string_view{} : found->text;
}

std::span<const std::string_view> built_in_names() {
  static const std::vector<std::string_view> names = [] {
    std::vector<std::string_view> all;
    for (const EmbeddedTable& table : embedded_tables) all.push_back(table.name);
    return all;
  }();
  return names;
}

CsvTable built_in_table(std::string_view path, std::initializer_list<std::string_view> numeric) {
  auto table = CsvTable::read(std::string(path), built_in_text(path), {numeric.begin(), numeric.size()});
  assert(table);
  return std::move(*std::move(table));
}

}  // namespace bathwright::data
