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
  std::optional<double> u_assay_rel = {};      ///< one standard uncertainty of the assay over the assay
  std::string grade, lot, expires;             ///< the last a day, "2027-06-30"; empty: not given

  [[nodiscard]] double price_per_kg() const;
  /// Whether the lot is past its last day on `day`, "2026-03-02" or longer; false where either is empty.
  [[nodiscard]] bool expired_on(std::string_view day) const;
};

/// Which issue of the limits the aims and windows of a tank file are; empty: not given.
struct LimitsRevision {
  std::string revision, from, owner, source;  ///< from: the day they hold from, "2026-01-15"
};

/// How this shop doses this tank.
struct DosingHabits {
  enum class Fill : std::uint8_t { to_mark, as_is } fill = Fill::to_mark;
  bool whole_packages = false;    ///< solids go in by the whole bag
  bool dead_band = true;          ///< false: corrected however small the difference
  double dead_band_share = 0.02;  ///< of the aim: what is nearer is left alone, if its analysis is no worse
  double dead_band_pH = 0.05;
  double waste_price_per_L = 0;  ///< of bath taken out, in the tank's currency
  /// Most that one portion may warm the whole tank, degC. Common practice: 5, anodizing 3, pickles 10.
  double largest_warming_C = 5;
  /// Share of the tank that a portion meets before it is stirred away. Common practice: a twentieth, at the
  /// filter return.
  double mixing_share = 0.05;
};

struct Tank {
  std::string file;  ///< where it was read from, for messages
  std::string bath_type, name, shop, line, currency;
  units::Litres working_volume;  ///< at the mark
  units::Litres freeboard;       ///< that may stand above the mark
  std::optional<units::SquareDecimetres> surface;
  units::Celsius temperature, idle_temperature;
  std::vector<Aim> aims;
  LimitsRevision limits;  ///< of the aims
  std::vector<ShelfItem> shelf;
  DosingHabits dosing;

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
