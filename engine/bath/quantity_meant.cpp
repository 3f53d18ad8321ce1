#include "bathwright/bath/quantity_meant.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <cctype>

namespace bathwright::bath {
namespace {

bool same_word(std::string_view a, std::string_view b) {
  return std::ranges::equal(
      a, b, [](unsigned char x, unsigned char y) { return std::tolower(x) == std::tolower(y); });
}

}  // namespace

std::optional<std::string> quantity_meant(const BathType& type, std::string_view word) {
  for (const Quantity& quantity : type.quantities)
    if (same_word(word, quantity.label) ||
        same_word(word, std::string_view(quantity.id).substr(0, quantity.id.find('^'))))
      return quantity.id;
  std::vector<std::string> ids;
  if (type.acid_by_pH()) ids.emplace_back("pH");
  for (const Quantity& quantity : type.quantities) ids.push_back(quantity.id);
  return nearest(word, ids);
}

}  // namespace bathwright::bath
