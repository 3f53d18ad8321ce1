#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <cctype>
#include <cmath>
#include <map>

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

std::string normal(double equivalents) { return "N (" + units::significant(equivalents, 1) + " eq/mol)"; }

/// As sheets write it.
std::string degree_word(const std::string& unit) { return unit == "°F" ? "degF" : "degC"; }

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

/// Without spaces and in small letters, degrees with their sign.
std::string spelling(std::string_view word) {
  std::string plain;
  for (const char c : word)
    if (c != ' ') plain += static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
  if (plain.starts_with("deg")) plain.replace(0, 3, "°");
  return plain == "°be" ? "°bé" : plain == "m³" ? "m3" : plain;
}

/// A unit of a list as it was typed, and the kinds of figure it may be for.
struct Word {
  std::string typed, unit;
  std::vector<const UnitChoice*> kinds;
};

Word word_of(std::string_view typed) {
  const std::size_t first = std::min(typed.find_first_not_of(' '), typed.size());
  Word word{std::string(typed.substr(first, typed.find_last_not_of(' ') + 1 - first)), {}, {}};
  for (const UnitChoice& choice : unit_choices())
    for (const std::string& unit : choice.all)
      if (spelling(unit) == spelling(typed)) word.unit = unit, word.kinds.push_back(&choice);
  return word;
}

Problem unknown(const std::string& typed) {
  std::string expected;
  std::vector<std::string> all;
  for (const UnitChoice& choice : unit_choices()) {
    expected += (expected.empty() ? "" : "; ") + choice.what + " in ";
    for (const std::string& unit : choice.all) expected += (&unit == &choice.all.front() ? "" : ", ") + unit;
    all.insert(all.end(), choice.all.begin(), choice.all.end());
  }
  const auto close = nearest(typed, all);
  return {Fault::bad_input, "--units", "\"" + typed + "\" is no unit to choose", expected,
          close ? "Did you mean \"" + *close + "\"?" : ""};
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

Result<UnitNames> unit_names(std::string_view list) {
  std::vector<Word> words;
  Problems problems;
  for (std::size_t at = 0; at <= list.size();) {
    const std::size_t end = std::min(list.find(',', at), list.size());
    Word word = word_of(list.substr(at, end - at));
    at = end + 1;
    if (word.kinds.empty())
      problems.push_back(unknown(word.typed));
    else
      words.push_back(std::move(word));
  }
  // First what is of one kind only: beside m3, L is for liquids.
  std::ranges::stable_sort(words, {}, [](const Word& word) { return word.kinds.size(); });
  UnitNames names;
  std::map<const UnitChoice*, std::string> said;
  for (const Word& word : words) {
    bool new_kind = false;
    for (const UnitChoice* kind : word.kinds)
      if (said.emplace(kind, word.typed).second) names.*kind->kept = word.unit, new_kind = true;
    if (!new_kind)
      problems.push_back({Fault::bad_input, "--units",
                          "\"" + said[word.kinds.front()] + "\" and \"" + word.typed + "\" are both for " +
                              word.kinds.front()->what,
                          "one unit for each kind of figure", ""});
  }
  if (!problems.empty()) return problems;
  return names;
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

int LevelUnit::decimals(int of_g_per_L) const {
  return std::clamp(of_g_per_L - static_cast<int>(std::round(std::log10(per_g_per_L))), 0, 6);
}

Medium Units::medium_of(const bath::TankView& view) const {
  return {view.density_kg_per_L, needs_water() ? water_kg_per_L(view) : std::nullopt};
}

LevelUnit Units::level(const bath::Quantity& quantity, const Medium& in) const {
  const ConcentrationUnit unit = unit_of(concentration_);
  matter::ConcentrationBasis basis{.molar_mass = quantity.formula.molar_mass(),
                                   .water_kg_per_L = in.water_kg_per_L};
  if (in.density_kg_per_L > 0) basis.solution_density = units::KilogramsPerLitre{in.density_kg_per_L};
  const double equivalents = equivalents_of(quantity);
  if (unit == ConcentrationUnit::equivalents_per_litre && equivalents == 0) return {};
  const auto one = matter::in_unit(units::GramsPerLitre{1}, unit, basis, equivalents);
  if (!one) return {};
  return {unit == ConcentrationUnit::equivalents_per_litre ? normal(equivalents) : concentration_,
          one->value};
}

LevelUnit Units::any_level() const {
  const auto one = units::grams_per_litre_if_direct({1, unit_of(concentration_)});
  return one ? LevelUnit{concentration_, 1 / one->v} : LevelUnit{};
}

std::string Units::typed(const bath::Quantity& quantity) const {
  return needs_medium() ? "g/L" : level(quantity).symbol;
}

bool Units::needs_medium() const { return units::direct_factor(unit_of(concentration_)) == 0; }

bool Units::needs_water() const {
  return unit_of(concentration_) == ConcentrationUnit::moles_per_kilogram_of_water;
}

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

std::string Units::mass(double kg, int digits) const {
  return units::significant(in_unit(kg, "kg", mass_), digits) + " " + mass_;
}

AmountUnit Units::small_mass() const {
  const std::string unit = smaller(mass_);
  return {unit, in_unit(1, "kg", unit)};
}

std::string Units::volume(double litres, int digits) const {
  return units::significant(litres * per_litre_, digits) + " " + volume_symbol();
}

std::string Units::liquid(double litres, int digits) const {
  const bool little = liquid_ != "L" && in_unit(litres, "L", liquid_) < 1;  // litres are told as they are
  const std::string unit = little ? smaller(liquid_) : liquid_;
  return units::significant(in_unit(litres, "L", unit), digits) + " " + unit;
}

std::string Units::volume_symbol() const { return volume_ == "m3" ? "m³" : volume_; }

std::string Units::volume_figure(double litres, int decimals) const {
  const int finer = std::max(0, static_cast<int>(std::ceil(-std::log10(per_litre_))));
  return fixed(volume_value(litres), decimals + finer);
}

std::string Units::temperature(double celsius) const {
  constexpr int digits = 3;
  return units::significant(units::value_in(units::Celsius{celsius}, temperature_), digits) + " " +
         temperature_;
}

std::string Units::degrees(units::Celsius at) const {
  constexpr int digits = 3;
  return units::show(at, temperature_, digits);
}

std::string Units::warming(double by_C) const {
  const auto shown = [&](double celsius) { return units::value_in(units::Celsius{celsius}, temperature_); };
  return figure(shown(by_C) - shown(0), 2) + " " + degree_word(temperature_);
}

std::string Units::note() const {
  std::string words;
  const auto say = [&](const std::string& unit) { words += (words.empty() ? "" : ", ") + unit; };
  const UnitNames log;
  if (concentration_ != log.concentration) say(concentration_);
  if (mass_ != log.mass) say(mass_);
  if (volume_ != log.volume) say(volume_symbol());
  if (liquid_ != log.liquid && liquid_ != volume_) say(liquid_);
  if (temperature_ != log.temperature) say(degree_word(temperature_));
  if (words.empty()) return "";
  return "Units: " + words + ". The log, checks and notes keep g/L, kg, L, degC.";
}

std::string Units::density(double kg_per_L, int decimals) const {
  const units::KilogramsPerLitre density{kg_per_L};
  if (density_ == "°Bé") return fixed(units::value_in(density, "degBe"), 1) + " °Bé";
  if (density_ == "°Tw") return fixed(units::value_in(density, "degTw"), 1) + " °Tw";
  if (density_ == "SG") return fixed(units::value_in(density, "SG"), decimals) + " SG";
  return fixed(kg_per_L, decimals) + " kg/L";
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
