#include <bathwright/matter/concentration.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <bathwright/units/read.hpp>

#include "dosing_habits.hpp"
#include "local_date.hpp"
#include "ranges.hpp"
#include "schema.hpp"
#include "shelf.hpp"

namespace bathwright::shopfiles {
namespace {

using bath::Aim;
using bath::Tank;

/// The share of an inner volume that anodes, coils and parts take, so that solution cannot.
double read_displacement(Table& vessel) {
  const Key key{"displacement", required, R"("5 %")"};
  if (vessel.any(key) == nullptr) return 0;
  const auto share = units::read_fraction(vessel.written(key.name), vessel.where(key.name));
  if (!share) {
    vessel.report(key.name, share.problems());
    return 0;
  }
  if (*share > possible_displacement.high)
    vessel.report(key.name, "leaves hardly any room for solution", "0 to 50 %",
                  "Give the share that is taken.");
  return *share;
}

/// Solution at the mark: as it is, or from the walls less what stands between them. One of the two, so that
/// nothing is taken off twice.
units::Litres read_working_volume(Table& vessel) {
  const auto litres = [&](const Key& key) {
    return vessel.positive(key, units::read_volume).value_or(units::Litres{});
  };
  if (!vessel.has("inner_volume")) {
    if (vessel.has("displacement")) {
      read_displacement(vessel);
      vessel.report("displacement", "stands without an inner_volume",
                    "inner_volume, from the walls of the vessel",
                    "Leave it out: a working_volume is what the solution fills already.");
    }
    return litres({"working_volume", required, R"("2400 L")"});
  }
  if (vessel.has("working_volume")) {
    litres({"working_volume", optional, R"("2400 L")"});
    vessel.report("working_volume", "stands beside an inner_volume", "the one or the other",
                  "Remove one of them.");
  }
  const units::Litres inner = litres({"inner_volume", required, R"("2526 L")"});
  return {inner.v * (1 - read_displacement(vessel))};
}

void read_vessel(Table& root, Tank& tank) {
  auto vessel = root.table({"vessel", required, R"({ working_volume = "2400 L", freeboard = "150 L" })"});
  if (!vessel) return;
  tank.working_volume = read_working_volume(*vessel);
  const auto freeboard = vessel->quantity({"freeboard", required, R"("150 L")"}, units::read_volume);
  tank.surface = vessel->positive({"surface", optional, R"("200 dm2")"}, units::read_area);
  tank.freeboard = freeboard.value_or(units::Litres{});
}

units::Celsius read_bath_temperature(Table& operating, const Key& key) {
  const auto temperature = operating.quantity(key, units::read_temperature).value_or(units::Celsius{});
  if (temperature.v < liquid_bath_C.low || temperature.v > liquid_bath_C.high) {
    operating.report(key.name, "no bath is liquid at this temperature", "-10 to 110 degC", "Check the unit.");
  }
  return temperature;
}

void read_operating(Table& root, Tank& tank) {
  auto operating =
      root.table({"operating", required, R"({ temperature = "55 degC", idle_temperature = "18 degC" })"});
  if (!operating) return;
  tank.temperature = read_bath_temperature(*operating, {"temperature", required, R"("55 degC")"});
  tank.idle_temperature = read_bath_temperature(*operating, {"idle_temperature", required, R"("18 degC")"});
}

std::optional<double> pH_of(Table& target, const Key& key, const std::string&) {
  return target.number(key, possible_pH);
}

/// g/L of `quantity`, whose formula is looked at only where the unit needs its molar mass.
std::optional<double> grams_per_litre_of(Table& target, const Key& key, const std::string& quantity) {
  const auto written = target.quantity(key, units::read_concentration);
  if (!written) return std::nullopt;
  matter::ConcentrationBasis basis;
  if (units::moles_per_litre_if_direct(*written)) {
    const auto formula = matter::Formula::parse(quantity, target.where(key.name));
    if (!formula) {
      target.report(key.name, formula.problems());
      return std::nullopt;
    }
    basis.molar_mass = formula->molar_mass();
  }
  const auto grams = matter::grams_per_litre(*written, basis, target.where(key.name));
  if (grams) return grams->v;
  target.report(key.name, grams.problems());
  return std::nullopt;
}

std::optional<Aim> read_aim(Table& target, const std::string& quantity) {
  const bool is_pH = quantity == "pH";
  auto entry = target.table({quantity, required,
                             is_pH ? "{ aim = 4.2, low = 3.8, high = 4.6 }"
                                   : R"({ aim = "42 g/L", low = "38 g/L", high = "45 g/L" })"});
  if (!entry) return std::nullopt;
  const auto read = is_pH ? pH_of : grams_per_litre_of;
  const auto aim = read(*entry, {"aim", required, is_pH ? "4.2" : R"("42 g/L")"}, quantity);
  const auto low = read(*entry, {"low", required, is_pH ? "3.8" : R"("38 g/L")"}, quantity);
  const auto high = read(*entry, {"high", required, is_pH ? "4.6" : R"("45 g/L")"}, quantity);
  const auto every = entry->positive({"every", optional, R"("24 h")"}, units::read_duration);
  if (!aim || !low || !high) return std::nullopt;
  if (!(*low <= *aim && *aim <= *high)) {
    target.report(quantity, "the aim is not inside its window", "low <= aim <= high");
  } else if (*low == *high) {
    target.report(quantity, "the window has no width", "low < high");
  }
  return Aim{quantity, *aim, *low, *high, every ? std::optional(every->v) : std::nullopt};
}

void read_targets(Table& root, Tank& tank) {
  auto target =
      root.table({"target", required, R"(a table of quantities, as "Ni^2+" = { aim = "75 g/L", ... })"});
  if (!target) return;
  for (const std::string& quantity : target->names()) {
    if (auto aim = read_aim(*target, quantity)) tank.aims.push_back(*std::move(aim));
  }
  if (target->names().empty()) root.report("target", "names no quantity", "at least one quantity to hold");
}

void read_limits(Table& root, Tank& tank) {
  auto limits = root.table({"limits", optional, R"({ revision = "C", from = 2026-01-15 })"});
  if (!limits) return;
  tank.limits.revision = limits->text({"revision", required, R"("C")"});
  tank.limits.from = read_date(*limits, {"from", optional, "2026-01-15"});
  tank.limits.owner = limits->text({"owner", optional, R"("process chemist")"});
  tank.limits.source = limits->text({"source", optional, R"("supplier sheet of 2025-11")"});
}

}  // namespace

Result<Tank> read_tank_text(std::string_view name, std::string_view text,
                            const matter::StockCatalogue& catalogue) {
  auto tree = parse_toml(name, text);
  if (!tree) return tree.problems();
  Document file(name, *std::move(tree));
  Table root = file.root();
  Tank tank;
  tank.file = name;
  tank.bath_type = root.text({"bath_type", required, R"("watts-nickel")"});
  tank.name = root.text({"name", required, R"("N-07 bright nickel")"});
  tank.shop = root.text({"shop", optional, R"("Brindlewick Surface Works")"});
  tank.line = root.text({"line", optional, R"("line 2, nickel")"});
  tank.currency = root.text({"currency", optional, R"("EUR")"});
  read_vessel(root, tank);
  read_operating(root, tank);
  read_targets(root, tank);
  read_limits(root, tank);
  if (auto shelf = root.table({"shelf", optional, R"({ boric-acid = { price = 1.90, unit = "kg" } })"})) {
    tank.shelf = read_shelf(*shelf, catalogue);
  }
  if (auto dosing = root.table({"dosing", optional, R"({ dead_band = "2 %" })"}))
    tank.dosing = read_dosing_habits(*dosing);
  return file.conclude(std::move(tank));
}

Result<Tank> read_tank(const std::string& path, const matter::StockCatalogue& catalogue) {
  const auto text = read_text_file(path);
  if (!text) return text.problems();
  return read_tank_text(path, *text, catalogue);
}

}  // namespace bathwright::shopfiles
