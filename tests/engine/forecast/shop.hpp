// A tank of sulfuric acid in which aluminium dissolves, and what the tests of the forecast ask of it.
#pragma once

#include <bathwright/forecast/forecast.hpp>
#include <catch2/catch.hpp>
#include <cmath>

namespace forecast_test {

using namespace bathwright;
using bath::FoundBy;
using forecast::Forecast;
using forecast::Policy;
using forecast::Replenishment;

template <class T>
T must(Result<T> result) {
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return std::move(result).value();
}

inline bath::Quantity quantity(const char* id, const char* formula, speciation::Composition counts) {
  return {id, id, must(matter::Formula::parse(formula)), std::move(counts)};
}

/// Sulfuric acid in which aluminium dissolves: acid titrated, sulfate by charge.
inline bath::BathType anodizing() {
  bath::BathType type;
  type.id = type.name = "anodizing";
  type.components = {{"H^+", FoundBy::analysis}, {"Al^3+", FoundBy::analysis}, {"SO4^2-", FoundBy::charge}};
  type.quantities = {quantity("Al^3+", "Al^3+", {{"Al^3+", 1}}), quantity("H2SO4", "H2SO4", {{"H^+", 0.5}})};
  bath::Use use;
  use.id = "anodizing";
  use.label = "aluminium that dissolves";
  use.counted_in = bath::CountedIn::ampere_hour;
  use.effects = {{"Al^3+", 3600 / 96485.33212 * 26.982 / 3 * 0.35}};
  use.effects_u_rel = 0.1;
  type.uses = {use};
  return type;
}

inline bath::Tank tank_of(const bath::BathType& type, double litres, double t_C = 25) {
  bath::Tank tank;
  tank.name = "test tank";
  tank.bath_type = type.id;
  tank.working_volume = {litres};
  tank.freeboard = {litres / 20};
  tank.temperature = tank.idle_temperature = {t_C};
  return tank;
}

inline bath::ShelfItem shelf(const char* id, double price) {
  const matter::StockChemical* stock = matter::StockCatalogue::built_in().find(id);
  REQUIRE(stock != nullptr);
  bath::ShelfItem item;
  item.stock = *stock;
  item.price = price;
  return item;
}

struct Anodizer {
  bath::BathType type = anodizing();
  bath::Tank tank = tank_of(type, 8000);
  bath::Chemistry chemistry = must(bath::Chemistry::prepare(type, {25}, {25}));
  bath::TankState start =
      must(chemistry.state_from({{"Al^3+", 10.1136}, {"H2SO4", 177.728}}, std::nullopt, {8000}, {25}));
  Policy policy;

  Anodizer() {
    policy.work = {{"anodizing", {42000, 0.05}}};
    policy.area_m2_per_shift = {560, 0};
    policy.drag_out_L_per_m2 = {0.1, 0.3};  // 1 mL/dm2
    policy.horizon_days = 30;
  }
  [[nodiscard]] Forecast ready() const { return must(Forecast::prepare(tank, chemistry, policy)); }
};

inline double level(const forecast::Run& run, int day, std::size_t quantity) {
  return run.days.at(static_cast<std::size_t>(day)).quantity_g_per_L.at(quantity);
}

}  // namespace forecast_test
