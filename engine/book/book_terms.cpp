#include "book_terms.hpp"

#include <bathwright/data/tables.hpp>
#include <cassert>
#include <map>
#include <string>

namespace bathwright::book {

double doubt(std::string_view id) {
  static const auto terms = [] {
    const auto table = data::built_in_table("analysis/book_terms.csv", {"value"});
    std::map<std::string, double, std::less<>> all;
    for (std::size_t i = 0; i < table.size(); ++i) all.emplace(table[i]["id"], table[i].number("value"));
    return all;
  }();
  const auto found = terms.find(id);
  assert(found != terms.end());
  return found->second;
}

}  // namespace bathwright::book
