#include "dosing_habits.hpp"

#include <bathwright/units/read.hpp>

#include "ranges.hpp"

namespace bathwright::shopfiles {
namespace {

using bath::DosingHabits;

void read_fill(Table& dosing, DosingHabits& habits) {
  const std::string fill = dosing.text({"fill", optional, R"("to the mark")"});
  if (fill == "as is")
    habits.fill = DosingHabits::Fill::as_is;
  else if (!fill.empty() && fill != "to the mark")
    dosing.report("fill", '"' + printable(fill) + "\" is not how a tank is filled",
                  R"("to the mark" or "as is")");
}

void read_dead_band(Table& dosing, DosingHabits& habits) {
  const std::string band = dosing.text({"dead_band", optional, R"("2 %")"});
  if (band == "off") {
    habits.dead_band = false;
  } else if (!band.empty()) {
    const auto share = units::read_fraction(band, dosing.where("dead_band"));
    if (share)
      habits.dead_band_share = *share;
    else
      dosing.report("dead_band", '"' + printable(band) + "\" is no share of an aim", R"("2 %", or "off")");
  }
  constexpr Range possible{0, 1};  // pH units
  if (const auto pH = dosing.number({"dead_band_pH", optional, "0.05"}, possible)) habits.dead_band_pH = *pH;
}

}  // namespace

DosingHabits read_dosing_habits(Table& dosing) {
  DosingHabits habits;
  read_fill(dosing, habits);
  habits.whole_packages = dosing.truth({"whole_packages", optional, "true"});
  read_dead_band(dosing, habits);
  constexpr Range possible_prices{0, 1e4};  // per litre of waste
  if (const auto price = dosing.number({"waste_price", optional, "0.12"}, possible_prices))
    habits.waste_price_per_L = *price;
  if (const auto warming = dosing.number({"largest_warming_C", optional, "3"}, possible_warming))
    habits.largest_warming_C = *warming;
  if (const auto share = dosing.number({"mixing_share", optional, "0.05"}, possible_mixing))
    habits.mixing_share = *share;
  return habits;
}

}  // namespace bathwright::shopfiles
