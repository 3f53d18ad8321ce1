// The demonstration tank of baths/ with the real Watts nickel plugin, as a shop would have it.
#pragma once

#include <bathwright/bath/chemistry.hpp>
#include <bathwright/matter/stock.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <catch2/catch.hpp>

#include "built_in_types.hpp"

namespace demo {

using namespace bathwright;

template <class T>
T must(Result<T> result) {
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return std::move(result).value();
}

inline const bath::Tank& tank() {
  static const bath::Tank read =
      must(shopfiles::read_tank(PROJECT_DIR "/baths/n-07.toml", matter::StockCatalogue::built_in()));
  return read;
}

inline const bath::BathType& watts() {
  const bath::BathType* type = built_in_types().find("watts-nickel");
  REQUIRE(type);
  return *type;
}

inline const bath::Chemistry& chemistry() {
  static const bath::Chemistry ready =
      must(bath::Chemistry::prepare(watts(), tank().temperature, tank().idle_temperature));
  return ready;
}

/// Levels in g/L of nickel sulfate and chloride hexahydrate and boric acid.
inline bath::TankState state(double sulfate, double chloride, double boric_acid, double pH = 4.2,
                             double volume_L = 2400) {
  return must(
      chemistry().state_from({{"NiSO4.6H2O", sulfate}, {"NiCl2.6H2O", chloride}, {"H3BO3", boric_acid}}, pH,
                             {volume_L}, tank().temperature));
}

inline double level(const bath::TankView& view, const std::string& quantity) {
  for (std::size_t q = 0; q < watts().quantities.size(); ++q)
    if (watts().quantities[q].id == quantity) return view.quantity_g_per_L[q];
  FAIL("no quantity " << quantity);
  return 0;
}

inline const matter::StockChemical& stock(const std::string& id) {
  const matter::StockChemical* found = matter::StockCatalogue::built_in().find(id);
  REQUIRE(found != nullptr);
  return *found;
}

}  // namespace demo
