#include <algorithm>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

namespace bathwright::sheets {
namespace {

using units::ConcentrationUnit;

/// A choice and the engine's unit.
struct Chosen {
  const char* words;
  ConcentrationUnit unit;
};
constexpr Chosen concentrations[] = {{"g/L", ConcentrationUnit::grams_per_litre},
                                     {"oz/US gal", ConcentrationUnit::ounces_per_us_gallon},
                                     {"oz/imp gal", ConcentrationUnit::ounces_per_imperial_gallon},
                                     {"mg/L", ConcentrationUnit::milligrams_per_litre},
                                     {"mol/L", ConcentrationUnit::moles_per_litre},
                                     {"mol/kg water", ConcentrationUnit::moles_per_kilogram_of_water},
                                     {"% w/w", ConcentrationUnit::percent_by_mass},
                                     {"ppm by mass", ConcentrationUnit::ppm_by_mass},
                                     {"N", ConcentrationUnit::equivalents_per_litre}};

ConcentrationUnit unit_of(const std::string& words) {
  const auto* const found = std::ranges::find(concentrations, words, &Chosen::words);
  return found == std::end(concentrations) ? ConcentrationUnit::grams_per_litre : found->unit;
}

std::vector<std::string> words_of_concentrations() {
  std::vector<std::string> all;
  for (const Chosen& one : concentrations) all.emplace_back(one.words);
  return all;
}

bool needs_solution(ConcentrationUnit unit) { return units::direct_factor(unit) == 0; }

std::string normal(double equivalents) { return "N (" + units::significant(equivalents, 1) + " eq/mol)"; }

/// The unit one changes to below 1: grams of a kilogram.
std::string smaller(const std::string& unit) {
  if (unit == "kg") return "g";
  if (unit == "lb") return "oz";
  if (unit == "L") return "mL";
  return unit == "US gal" ? "fl oz" : unit;
}

double in_unit(double amount, const std::string& engine_unit, const std::string& wanted) {
  return engine_unit == "L" ? units::value_in(units::Litres{amount}, wanted)
                            : units::value_in(units::Kilograms{amount}, wanted);
}

}  // namespace

const std::vector<UnitChoice>& unit_choices() {
  static const std::vector<UnitChoice> all{
      {"concentrations", words_of_concentrations(), &UnitNames::concentration},
      {"volumes", {"L", "US gal", "imp gal", "m3"}, &UnitNames::volume},
      {"temperatures", {"°C", "°F"}, &UnitNames::temperature},
      {"masses", {"kg", "g", "lb", "oz"}, &UnitNames::mass},
      {"liquids", {"L", "mL", "US gal", "imp gal", "fl oz"}, &UnitNames::liquid},
      {"densities", {"kg/L", "SG", "°Bé", "°Tw"}, &UnitNames::density}};
  return all;
}

Units::Units(const UnitNames& chosen) {
  std::vector<std::string*> mine{&concentration_, &volume_, &temperature_, &mass_, &liquid_, &density_};
  for (std::size_t i = 0; i < mine.size(); ++i) {
    const UnitChoice& choice = unit_choices()[i];
    const std::string& wanted = chosen.*choice.kept;
    *mine[i] = std::ranges::find(choice.all, wanted) == choice.all.end() ? choice.all.front() : wanted;
  }
  per_litre_ = units::value_in(units::Litres{1}, volume_);
}

LevelUnit Units::level(const bath::Quantity& quantity, const bath::TankView* in) const {
  const ConcentrationUnit unit = unit_of(concentration_);
  matter::ConcentrationBasis basis{.molar_mass = quantity.formula.molar_mass()};
  if (in && in->density_kg_per_L > 0) basis.solution_density = units::KilogramsPerLitre{in->density_kg_per_L};
  if (in && unit == ConcentrationUnit::moles_per_kilogram_of_water)
    basis.water_kg_per_L = water_kg_per_L(*in);
  const double equivalents = equivalents_of(quantity);
  if (unit == ConcentrationUnit::equivalents_per_litre && equivalents == 0) return {};
  const auto one = matter::in_unit(units::GramsPerLitre{1}, unit, basis, equivalents);
  if (!one) return {};
  return {unit == ConcentrationUnit::equivalents_per_litre ? normal(equivalents) : concentration_,
          one->value};
}

std::string Units::typed(const bath::Quantity& quantity) const {
  return only_for_now() ? "g/L" : level(quantity, nullptr).symbol;
}

bool Units::only_for_now() const { return needs_solution(unit_of(concentration_)); }

AmountUnit Units::amount_unit(const std::string& unit) const {
  const std::string& wanted = unit == "L" ? liquid_ : mass_;
  return {wanted, in_unit(1, unit, wanted)};
}

std::string Units::amount(double amount, const std::string& unit) const {
  AmountUnit shown = amount_unit(unit);
  if (std::abs(amount * shown.per_one) < 1) {
    shown.symbol = smaller(shown.symbol);
    shown.per_one = in_unit(1, unit, shown.symbol);
  }
  return figure(amount * shown.per_one) + " " + shown.symbol;
}

bool Units::as_on_paper(const std::string& unit) const {
  return unit == "L" ? liquid_ == "L" || liquid_ == "mL" : mass_ == "kg" || mass_ == "g";
}

std::string Units::mass(double kg, int digits) const {
  return units::significant(in_unit(kg, "kg", mass_), digits) + " " + mass_;
}

std::string Units::volume(double litres) const {
  return units::significant(litres * per_litre_) + " " + volume_symbol();
}

std::string Units::volume_symbol() const { return volume_ == "m3" ? "m³" : volume_; }

std::string Units::temperature(double celsius) const {
  constexpr int digits = 3;
  return units::significant(units::value_in(units::Celsius{celsius}, temperature_), digits) + " " +
         temperature_;
}

std::string Units::density(double kg_per_L) const {
  const units::KilogramsPerLitre density{kg_per_L};
  if (density_ == "°Bé") return fixed(units::value_in(density, "degBe"), 1) + " °Bé";
  if (density_ == "°Tw") return fixed(units::value_in(density, "degTw"), 1) + " °Tw";
  if (density_ == "SG") return fixed(units::value_in(density, "SG"), 3) + " SG";
  return fixed(kg_per_L, 3) + " kg/L";
}

double equivalents_of(const bath::Quantity& quantity) {
  if (quantity.formula.charge() != 0) return std::abs(quantity.formula.charge());
  const auto acid = quantity.counts.find("H^+");
  return acid == quantity.counts.end() || acid->second == 0 ? 0 : 1 / std::abs(acid->second);
}

std::optional<double> water_kg_per_L(const bath::TankView& view) {
  if (view.species.empty()) return std::nullopt;
  double kg_per_kg_of_water = 1;
  for (const bath::SpeciesView& species : view.species) {
    const auto formula = matter::Formula::parse(species.name.substr(0, species.name.find(" (")));
    if (!formula) return std::nullopt;
    kg_per_kg_of_water += species.molality * formula->molar_mass().v / 1000;
  }
  return view.density_kg_per_L / kg_per_kg_of_water;
}

}  // namespace bathwright::sheets
