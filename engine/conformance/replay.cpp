#include "replay.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/bath/chemistry.hpp>
#include <cmath>

namespace bathwright::conformance {
namespace {

Problem absent(const Expectation& expected, std::string_view kind) {
  return {Fault::bad_input, expected.where, "there is no " + std::string(kind) + " \"" + expected.of + '"',
          "one of the bath type", "See bathwright plugins show for them."};
}

template <class Rows, class Id>
const auto* find(const Rows& rows, const std::string& wanted, Id id) {
  const auto found = std::ranges::find(rows, wanted, id);
  return found == rows.end() ? nullptr : &*found;
}

/// What the engine gives for the figure.
Result<double> computed(const bath::BathType& type, const bath::TankView& view, const Expectation& e) {
  const auto room = [&](double bath::Headroom::*log10, bool bath::Headroom::*covered) -> Result<double> {
    const auto* solid = find(view.headroom, e.of, &bath::Headroom::solid);
    if (!solid) return absent(e, "watched solid that can form here,");
    if (!(solid->*covered))
      return Problem{Fault::out_of_range, e.where, "the constant of " + e.of + " does not hold here",
                     "a temperature within its range", ""};
    return solid->*log10;
  };
  switch (e.figure) {
    case Figure::pH:
      return view.pH;
    case Figure::ionic_strength:
      return view.ionic_strength;
    case Figure::density:
      return view.density_kg_per_L;
    case Figure::level: {
      const auto* quantity = type.quantity(e.of);
      if (!quantity) return absent(e, "quantity");
      return view.quantity_g_per_L[static_cast<std::size_t>(quantity - type.quantities.data())];
    }
    case Figure::molality:
    case Figure::log10_activity: {
      const auto* species = find(view.species, e.of, &bath::SpeciesView::name);
      if (!species) return absent(e, "species");
      return e.figure == Figure::molality ? species->molality : species->log10_activity;
    }
    case Figure::indicator: {
      const auto* indicator = find(view.indicators, e.of, &bath::IndicatorValue::id);
      if (!indicator) return absent(e, "indicator");
      if (!indicator->value) return Problem{Fault::out_of_range, e.where, indicator->note, "a value", ""};
      return *indicator->value;
    }
    case Figure::headroom:
      return room(&bath::Headroom::working_log10, &bath::Headroom::covers_working);
    case Figure::idle_headroom:
      return room(&bath::Headroom::idle_log10, &bath::Headroom::covers_idle);
    case Figure::deposit: {
      const auto* use = find(type.uses, e.of, &bath::Use::id);
      const auto* metal = use ? type.quantity(use->deposits) : nullptr;
      if (!metal || use->counted_in != bath::CountedIn::ampere_hour)
        return absent(e, "use that deposits a metal by current,");
      return bath::metal_mol_per_Ah(*use) * bath::metal_of(*metal).v * use->cathode_efficiency;
    }
  }
  return absent(e, "figure");
}

bool met(const Expectation& e, double value) {
  return std::isfinite(value) && (!e.value || std::abs(value - *e.value) <= *e.tolerance) &&
         (!e.above || value > *e.above) && (!e.below || value < *e.below);
}

std::string in_words(const Expectation& e) {
  std::string words;
  if (e.value) words = fmt::format("{:g} +/- {:g}", *e.value, *e.tolerance);
  if (e.above) words = fmt::format("above {:g}", *e.above);
  if (e.below) words += fmt::format("{}below {:g}", e.above ? ", " : "", *e.below);
  return words;
}

Check compare(const bath::BathType& type, const bath::TankView& view, const Example& example,
              const Expectation& e) {
  Check check{Group::examples, example.name + ": " + std::string(name(e.figure))};
  if (!e.of.empty()) check.what += ' ' + e.of;
  const auto value = computed(type, view, e);
  if (!value) {
    check.problems = value.problems();
    return check;
  }
  std::string in(unit(e.figure));
  if (e.figure == Figure::indicator) in = find(type.indicators, e.of, &bath::Indicator::id)->unit;
  if (!in.empty()) in.insert(0, 1, ' ');
  check.found = fmt::format("computed {:.6g}{}, by hand {}", *value, in, in_words(e));
  if (!met(e, *value))
    check.problems.push_back({Fault::inconsistent_data, e.where,
                              fmt::format("the engine gives {:.6g}{}", *value, in),
                              in_words(e) + in + " from " + e.from, ""});
  return check;
}

Result<bath::TankView> solved(const bath::BathType& type, const Example& example) {
  const auto chemistry = bath::Chemistry::prepare(type, example.temperature, example.idle_temperature);
  if (!chemistry) return chemistry.problems();
  const auto state = chemistry->state_from(example.g_per_L, example.pH, example.volume, example.temperature);
  if (!state) return state.problems();
  return chemistry->view(*state);
}

}  // namespace

std::vector<Check> replay(const bath::BathType& type, const std::vector<Example>& examples) {
  std::vector<Check> checks;
  for (const Example& example : examples) {
    const auto view = solved(type, example);
    if (!view) {
      Problems problems = view.problems();
      for (Problem& problem : problems) problem.where = example.where + ": " + problem.where;
      checks.push_back({Group::examples, example.name + ": can be computed", "", std::move(problems)});
      continue;
    }
    for (const Expectation& expected : example.expected)
      checks.push_back(compare(type, *view, example, expected));
  }
  return checks;
}

}  // namespace bathwright::conformance
