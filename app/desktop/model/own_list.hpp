// A plan's amounts as a person changed them.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <optional>
#include <string>
#include <utility>
#include <vector>

namespace bathwright::desktop {

struct OwnList {
  std::optional<double> take_out_L;  ///< of bath, before anything goes in; none where the plan has none
  std::vector<std::pair<std::string, double>> kg;  ///< by stock id, in the order they go in
  bool operator==(const OwnList&) const = default;
};

/// On the tank's shelf, else in the catalogue; nullptr where nobody knows it.
[[nodiscard]] const matter::StockChemical* stock_of(const bath::Tank& tank, const std::string& id);

}  // namespace bathwright::desktop
