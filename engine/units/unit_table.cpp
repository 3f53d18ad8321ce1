#include "unit_table.hpp"

#include <algorithm>
#include <array>
#include <bathwright/base/nearest.hpp>
#include <cctype>
#include <utility>
#include <vector>

#include "number.hpp"

namespace bathwright::units {
namespace {

// Exact by definition: international yard and pound (1959), US gallon of 231 cubic inches, imperial gallon
// (UK Weights and Measures Act 1985), troy ounce of 480 grains. Checked against trade tables in the tests.
constexpr double inch_dm = 0.254;
constexpr double foot_dm = 12 * inch_dm;
constexpr double pound_kg = 0.45359237;
constexpr double ounce_kg = pound_kg / 16;
constexpr double grain_kg = pound_kg / 7000;
constexpr double troy_ounce_kg = 480 * grain_kg;
constexpr double pennyweight_kg = 24 * grain_kg;
constexpr double us_gallon_L = 3.785411784;
constexpr double imperial_gallon_L = 4.54609;
constexpr double us_fluid_ounce_L = us_gallon_L / 128;
// Density of water at 60 F, kg/L, the zero of the US hydrometer scales (NBS Circular 59).
constexpr double water_60F = 0.99904;

constexpr Unit volumes[] = {
    {"L", "litre|litres|liter|liters|dm3", 1},
    {"mL", "cm3|cc|millilitre|milliliter", 1e-3},
    {"uL", "", 1e-6},
    {"m3", "", 1000},
    {"US gal", "usgallon|usgallons|galus|gallonus", us_gallon_L},
    {"imp gal", "impgallon|impgallons|galimp|ukgal|galuk|imperialgallon", imperial_gallon_L},
    {"fl oz", "flozus|usfloz", us_fluid_ounce_L}};
constexpr Trap volume_traps[] = {
    {"gal|gallon|gallons", "Which gallon? Write \"US gal\" (3.785 L) or \"imp gal\" (4.546 L)."},
    {"oz", "Write \"fl oz\" for a volume."}};

constexpr Unit masses[] = {{"kg", "", 1},
                           {"g", "gram|grams", 1e-3},
                           {"mg", "", 1e-6},
                           {"t", "tonne|tonnes", 1000},
                           {"lb", "lbs|pound|pounds", pound_kg},
                           {"oz", "ozav|ounce|ounces", ounce_kg},
                           {"oz tr", "troyoz|troz|ozt", troy_ounce_kg},
                           {"dwt", "pennyweight", pennyweight_kg}};
constexpr Trap mass_traps[] = {{"ton|tons", "Which ton? Write \"t\" for 1000 kg; a short ton is 2000 lb."},
                               {"floz", "A fluid ounce is a volume; weigh it, or multiply by its density."}};

constexpr Unit temperatures[] = {{"degC", "C|celsius", 1},
                                 {"degF", "F|fahrenheit", 1 / 1.8, -32 / 1.8},
                                 {"K", "kelvin", 1, -zero_celsius_K}};
constexpr Trap temperature_traps[] = {{"deg", "Which degree? Write \"degC\" or \"degF\"."}};

constexpr Unit densities[] = {{"kg/L", "kg/dm3", 1},
                              {"g/mL", "g/cm3|g/cc", 1},
                              {"g/L", "", 1e-3},
                              {"kg/m3", "", 1e-3},
                              {"SG", "sg60F/60F|SG60/60F", water_60F},
                              {"degBe", "degBeheavy|Be|degBaume|degBaumeheavy", 0, 145 * water_60F, -1, 145},
                              {"degBe light", "Belight|degBaumelight", 0, 140 * water_60F, 1, 130},
                              {"degTw", "Tw|degTwaddell", water_60F / 200, water_60F}};

constexpr Unit lengths[] = {{"dm", "", 1},
                            {"m", "", 10},
                            {"cm", "", 0.1},
                            {"mm", "", 0.01},
                            {"um", "micron", 1e-5},
                            {"in", "inch|inches", inch_dm},
                            {"ft", "foot|feet", foot_dm},
                            {"mil", "", 1e-3 * inch_dm},
                            {"uin", "", 1e-6 * inch_dm}};

constexpr Unit areas[] = {{"dm2", "", 1},
                          {"m2", "sqm", 100},
                          {"cm2", "", 0.01},
                          {"mm2", "", 1e-4},
                          {"ft2", "sqft", foot_dm* foot_dm},
                          {"in2", "sqin", inch_dm* inch_dm}};

constexpr Unit current_densities[] = {{"A/dm2", "asd", 1},
                                      {"mA/cm2", "", 0.1},
                                      {"A/m2", "", 0.01},
                                      {"A/ft2", "asf|A/sqft", 1 / (foot_dm * foot_dm)}};

constexpr Unit durations[] = {{"h", "hr|hour|hours", 1},
                              {"min", "minute|minutes", 1.0 / 60},
                              {"s", "sec|second|seconds", 1.0 / 3600},
                              {"d", "day|days", 24}};
constexpr Trap duration_traps[] = {{"m", "Write \"min\" for minutes."}};

constexpr Unit molarities[] = {{"mol/L", "M|mol/dm3", 1}, {"mmol/L", "mM|mol/m3", 1e-3}};
constexpr Trap molarity_traps[] = {
    {"N", "Divide by the equivalents per mole and write mol/L: 0.1 N sulfuric acid is 0.05 mol/L."},
    {"m", "A molality cannot be used for a titrant; write \"mol/L\"."}};

constexpr Unit fractions[] = {{"%", "percent", 0.01}};

constexpr Unit concentrations[] = {
    {"g/L", "g/dm3|kg/m3", 1},
    {"mg/L", "mg/dm3|g/m3", 1e-3},
    {"oz/US gal", "ozav/usgal", 1000 * ounce_kg / us_gallon_L},
    {"oz/imp gal", "ozav/impgal", 1000 * ounce_kg / imperial_gallon_L},
    {"lb/US gal", "", 1000 * pound_kg / us_gallon_L},
    {"oz tr/US gal", "troyoz/usgal|troz/usgal|ozt/usgal", 1000 * troy_ounce_kg / us_gallon_L},
    {"mL/L", "cm3/dm3|L/m3", 1},
    {"fl oz/US gal", "", 1000 * us_fluid_ounce_L / us_gallon_L},
    {"% w/w", "w/w%|wt%|%wt|mass%|m/m%|%m/m", 0},
    {"% w/v", "w/v%|m/v%|%m/v", 10},
    {"% v/v", "v/v%|vol%|%vol", 10},
    {"mol/L", "M|mol/dm3", 1},
    {"mmol/L", "mM|mol/m3", 1e-3},
    {"mol/kg", "mol/kgwater|mol/kgH2O", 0},
    {"N", "", 1},
    {"ppm w/w", "mg/kg", 0},
    {"ppm w/v", "", 1e-3},
    {"points", "point", 0.01},
};
static_assert(std::size(concentrations) == static_cast<std::size_t>(ConcentrationUnit::points) + 1);
constexpr Trap concentration_traps[] = {
    {"oz/gal|floz/gal|lb/gal|troyoz/gal|oztr/gal|troz/gal", "Which gallon? Write \"US gal\" or \"imp gal\"."},
    {"%",
     "Which per cent? Write \"% w/w\" (g per 100 g), \"% w/v\" (g per 100 mL) or \"% v/v\" (mL per 100 mL)."},
    {"ppm", "Which ppm? Write \"ppm w/w\" (mg per kg of solution) or \"ppm w/v\" (mg per litre)."},
    {"m", "Write \"mol/kg\" for a molality, \"mol/L\" for a molarity."}};

template <std::size_t n>
constexpr std::array<std::string_view, n> symbols_of(const Unit (&units)[n]) {
  std::array<std::string_view, n> symbols;
  for (std::size_t i = 0; i < n; ++i) symbols[i] = units[i].symbol;
  return symbols;
}

constexpr auto volume_symbols = symbols_of(volumes);
constexpr auto mass_symbols = symbols_of(masses);
constexpr auto temperature_symbols = symbols_of(temperatures);
constexpr auto density_symbols = symbols_of(densities);
constexpr auto length_symbols = symbols_of(lengths);
constexpr auto area_symbols = symbols_of(areas);
constexpr auto current_density_symbols = symbols_of(current_densities);
constexpr auto duration_symbols = symbols_of(durations);
constexpr auto molarity_symbols = symbols_of(molarities);
constexpr auto fraction_symbols = symbols_of(fractions);
constexpr auto concentration_symbols = symbols_of(concentrations);

char lower(char c) { return c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c; }

bool equal_ignoring_case(std::string_view a, std::string_view b) {
  return std::ranges::equal(a, b, {}, lower, lower);
}

// M is mol/L but m would be a molality; mM and N likewise are only what they are as written.
bool case_matters(std::string_view spelling) {
  return spelling == "M" || spelling == "mM" || spelling == "N";
}

// Without blanks, points, brackets and ^, and with the usual signs in plain letters: "fl. oz (US)" ->
// "flozUS".
std::string fold_unit(std::string_view text) {
  static constexpr std::pair<std::string_view, std::string_view> signs[] = {
      {"°", "deg"}, {"º", "deg"}, {"²", "2"}, {"³", "3"}, {"µ", "u"}, {"μ", "u"}, {"é", "e"}, {"\u00a0", ""}};
  std::string folded;
  while (!text.empty()) {
    const auto sign = std::ranges::find_if(signs, [&](const auto& s) { return text.starts_with(s.first); });
    if (sign != std::end(signs)) {
      folded += sign->second;
      text.remove_prefix(sign->first.size());
      continue;
    }
    if (std::string_view(" \t.^()").find(text.front()) == text.npos) folded += text.front();
    text.remove_prefix(1);
  }
  return folded;
}

bool is_one_of(std::string_view folded, std::string_view spellings) {
  while (!spellings.empty()) {
    const std::size_t bar = spellings.find('|');
    const std::string_view spelling = spellings.substr(0, bar);
    if (folded == spelling || (!case_matters(spelling) && equal_ignoring_case(folded, spelling))) return true;
    spellings.remove_prefix(bar == spellings.npos ? spellings.size() : bar + 1);
  }
  return false;
}

}  // namespace

template <>
const Dimension& dimension_of<Litres>() {
  static constexpr Dimension d{"a volume", volumes, volume_traps, volume_symbols, 0, 1e7};
  return d;
}
template <>
const Dimension& dimension_of<Kilograms>() {
  static constexpr Dimension d{"a mass", masses, mass_traps, mass_symbols, 0, 1e6};
  return d;
}
template <>
const Dimension& dimension_of<Celsius>() {
  static constexpr Dimension d{
      "a temperature", temperatures, temperature_traps, temperature_symbols, -zero_celsius_K, 2000, true};
  return d;
}
template <>
const Dimension& dimension_of<KilogramsPerLitre>() {  // lighter than any liquid; osmium is 22.6
  static constexpr Dimension d{"a density", densities, {}, density_symbols, 0.1, 25};
  return d;
}
template <>
const Dimension& dimension_of<Decimetres>() {
  static constexpr Dimension d{"a length", lengths, {}, length_symbols, 0, 1e4};
  return d;
}
template <>
const Dimension& dimension_of<SquareDecimetres>() {
  static constexpr Dimension d{"an area", areas, {}, area_symbols, 0, 1e8};
  return d;
}
template <>
const Dimension& dimension_of<AmperesPerSquareDecimetre>() {
  static constexpr Dimension d{"a current density", current_densities, {}, current_density_symbols, 0, 1e4};
  return d;
}
template <>
const Dimension& dimension_of<Hours>() {
  static constexpr Dimension d{"a duration", durations, duration_traps, duration_symbols, 0, 1e6};
  return d;
}
template <>
const Dimension& dimension_of<MolesPerLitre>() {  // water itself has 55 mol/L
  static constexpr Dimension d{"a molar concentration", molarities, molarity_traps, molarity_symbols, 0, 60};
  return d;
}
const Dimension& fraction_dimension() {
  static constexpr Dimension d{"a share", fractions, {}, fraction_symbols, 0, 1};
  return d;
}
template <>
const Dimension& dimension_of<Concentration>() {  // the limits depend on the unit: see read.cpp
  static constexpr Dimension d{
      "a concentration", concentrations, concentration_traps, concentration_symbols, 0, 0};
  return d;
}

std::optional<std::size_t> find_unit(const Dimension& dimension, std::string_view text) {
  const std::string folded = fold_unit(text);
  for (std::size_t i = 0; i < dimension.units.size(); ++i) {
    const Unit& unit = dimension.units[i];
    if (is_one_of(folded, fold_unit(unit.symbol)) || is_one_of(folded, unit.spellings)) return i;
  }
  return std::nullopt;
}

Result<std::size_t> read_unit(const Dimension& dimension, std::string_view text, std::string_view whole,
                              std::string_view where) {
  if (const auto found = find_unit(dimension, text)) return *found;
  Problem problem{Fault::bad_input, std::string(where), "",
                  std::string(dimension.name) + " in " + list_of_units(dimension), ""};
  if (text.empty()) {
    problem.what = quoted(whole) + " has no unit";
    return problem;
  }
  problem.what = quoted(whole) + " has the unit " + quoted(text);
  const std::string folded = fold_unit(text);
  for (const Trap& trap : dimension.traps) {
    if (!is_one_of(folded, trap.spellings)) continue;
    problem.try_this = trap.advice;
    return problem;
  }
  const std::vector<std::string> symbols(dimension.symbols.begin(), dimension.symbols.end());
  if (const auto near = nearest(text, symbols)) problem.try_this = "Did you mean " + quoted(*near) + "?";
  return problem;
}

std::string list_of_units(const Dimension& dimension) {
  std::string list;
  for (const std::string_view symbol : dimension.symbols) {
    if (!list.empty()) list += ", ";
    list += symbol;
  }
  return list;
}

}  // namespace bathwright::units
