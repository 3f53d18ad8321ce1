// A file of the shop by the kind its name begins with, reduced to its problems.
#pragma once

#include <bathwright/shopfiles/readings_file.hpp>
#include <bathwright/shopfiles/solution_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <string_view>

namespace shop_test {

template <class T>
bathwright::Problems problems_of(const bathwright::Result<T>& read) {
  return read ? bathwright::Problems{} : read.problems();
}

inline bathwright::Problems problems_of(std::string_view kind, std::string_view text) {
  using namespace bathwright;
  if (kind.starts_with("readings")) return problems_of(shopfiles::read_readings_text("file.toml", text));
  if (kind.starts_with("solution")) return problems_of(shopfiles::read_solution_text("file.toml", text));
  return problems_of(shopfiles::read_tank_text("file.toml", text, matter::StockCatalogue::built_in()));
}

}  // namespace shop_test
