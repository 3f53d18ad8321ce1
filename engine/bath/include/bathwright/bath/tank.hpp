// A particular vat in a particular shop: its size, its aims, what stands on its shelf. Values only; reading
// them from a file is shopfiles' work.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/matter/stock.hpp>
#include <bathwright/units/quantity.hpp>
#include <optional>

namespace bathwright::bath {

/// A controlled quantity of the tank: g/L of the quantity, or pH units.
struct Aim {
  std::string quantity;  ///< a BathType quantity id, or "pH"
  double aim = 0, low = 0, high = 0;
  std::optional<double> every_h = {};  ///< how often it is to be analysed, hours
};

/// A chemical that this shop can add to this tank.
struct ShelfItem {
  matter::StockChemical stock;  ///< with this lot's assay and density
  double price = 0;             ///< per `priced_per`, in the tank's currency
  enum class Per : std::uint8_t { kilogram, litre } priced_per = Per::kilogram;
  std::optional<double> largest_rise_g_per_L;  ///< overrides the bath type's rule
  std::optional<double> package;               ///< kg or L of one bag or drum

  [[nodiscard]] double price_per_kg() const;
};

struct Tank {
  std::string file;  ///< where it was read from, for messages
  std::string bath_type, name, shop, currency;
  units::Litres working_volume;  ///< at the mark
  units::Litres freeboard;       ///< that may stand above the mark
  std::optional<units::SquareDecimetres> surface;
  units::Celsius temperature, idle_temperature;
  std::vector<Aim> aims;
  std::vector<ShelfItem> shelf;

  [[nodiscard]] const Aim* aim(std::string_view quantity) const;  ///< nullptr if not controlled
  [[nodiscard]] const ShelfItem* on_shelf(std::string_view stock_id) const;
};

/// What is in a tank: amounts, never concentrations. Components in the order of Chemistry::components().
struct TankState {
  std::vector<double> component_mol;
  double water_kg = 0;
  units::Celsius temperature;
};

}  // namespace bathwright::bath
