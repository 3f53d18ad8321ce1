// What people type, and what comes of it. Factors are checked against printed trade tables and worked
// examples.
#include <bathwright/units/read.hpp>
#include <catch2/catch.hpp>
#include <string>
#include <vector>

using namespace bathwright;
using namespace bathwright::units;

namespace {

struct Reading {
  std::string text;
  double expected;   // in the base unit
  double tolerance;  // half a unit of the last printed digit, or 1e-12 relative for a definition
  std::string source;
};

template <class Read>
void check(Read read, const std::vector<Reading>& readings) {
  for (const Reading& r : readings) {
    INFO(r.text << "   " << r.source);
    const auto got = read(r.text, "here");
    REQUIRE(got);
    CHECK(got->v == Approx(r.expected).margin(r.tolerance).epsilon(0));
  }
}

template <class T>
std::string message(const Result<T>& result) {
  return result ? "accepted" : text(result.problems());
}

double grams_per_litre(const std::string& text) {
  const auto c = read_concentration(text);
  INFO(text);
  REQUIRE(c);
  REQUIRE(grams_per_litre_if_direct(*c));
  return grams_per_litre_if_direct(*c)->v;
}

const std::string trade = "trade conversion table, printed digits";
const std::string definition = "exact by definition";

}  // namespace

TEST_CASE("volumes in every unit", "[reference][units]") {
  check(read_volume, {{"2340 L", 2340, 0, definition},
                      {"12,5mL", 0.0125, 1e-15, definition},
                      {"250 µL", 250e-6, 1e-15, definition},
                      {"250 uL", 250e-6, 1e-15, definition},
                      {"1.5 m³", 1500, 0, definition},
                      {"3 dm3", 3, 0, definition},
                      {"1 US gal", 3.785411784, 1e-12, definition},
                      {"1 imp gal", 4.54609, 1e-12, definition},
                      {"128 fl oz", 3.785411784, 1e-12, "128 US fl oz to the gallon"},
                      {"1 fl. oz. (US)", 0.0295735, 5e-8, "NIST SP 811 appendix B.8, printed digits"},
                      {"500 US gal", 1892.71, 0.005, "500 gal tank in litres, trade worked example"},
                      {"2e3 L", 2000, 0, "an exponent is a number too"},
                      {"  7 l ", 7, 0, "case and blanks"}});
}

TEST_CASE("masses in every unit", "[reference][units]") {
  check(read_mass,
        {{"12 kg", 12, 0, definition},
         {"250 g", 0.25, 1e-15, definition},
         {"80 mg", 80e-6, 1e-18, definition},
         {"1.2 t", 1200, 1e-12, definition},
         {"1 lb", 0.45359237, 1e-15, definition},
         {"16 oz", 0.45359237, 1e-15, "16 oz to the pound"},
         {"1 oz tr", 0.0311034768, 1e-15, definition},
         {"1 troy oz", 0.0311034768, 1e-15, definition},
         {"1 dwt", 0.00155517, 5e-9, trade},
         {"218.75 lb", 99.2233, 5e-5, "700 US gal at 5.0 oz/gal: 218.75 lb, handbook make-up table"}});
}

TEST_CASE("temperatures in every unit", "[reference][units]") {
  check(read_temperature, {{"54 degC", 54, 0, definition},
                           {"54 °C", 54, 0, definition},
                           {"54C", 54, 0, definition},
                           {"32 °F", 0, 1e-12, definition},
                           {"212 F", 100, 1e-12, definition},
                           {"-40 degF", -40, 1e-12, "the scales meet"},
                           {"298,15 K", 25, 1e-12, definition},
                           {"\u22125 degC", -5, 0, "a typographic minus sign"}});
}

TEST_CASE("densities and the hydrometer scales", "[reference][units]") {
  constexpr double water = 0.99904;  // kg/L at 60 F
  check(read_density, {{"1.21 kg/L", 1.21, 0, definition},
                       {"1,21 g/mL", 1.21, 0, definition},
                       {"1.21 g/cm³", 1.21, 0, definition},
                       {"1210 kg/m3", 1.21, 1e-12, definition},
                       {"1,234 g/mL", 1.234, 0, "three decimals: a thousand g/mL cannot be meant"},
                       {"1.5 SG", 1.5 * water, 1e-12, definition},
                       {"0 degBe", 1.0000 * water, 5e-5, "NBS Circular 59"},
                       {"10 °Bé", 1.0741 * water, 5e-5, "NBS Circular 59"},
                       {"30 degBe", 1.2609 * water, 5e-5, "NBS Circular 59"},
                       {"42 degBe", 1.4078 * water, 5e-5, "NBS Circular 59"},
                       {"66 degBe heavy", 1.8354 * water, 5e-5, "NBS Circular 59, oil of vitriol"},
                       {"22 degBe", 1.17773, 5e-6, "22 degBe acid, trade worked example"},
                       {"10 degBe light", 1.0000 * water, 5e-5, "NBS Circular 59"},
                       {"26 degBe light", 0.8974 * water, 5e-5, "NBS Circular 59, aqua ammonia"},
                       {"40 degTw", 1.2 * water, 1e-12, "SG = 1 + Tw/200"}});
}

TEST_CASE("lengths, areas, current densities and durations", "[reference][units]") {
  check(read_length, {{"3 cm", 0.3, 1e-15, definition},
                      {"25 mm", 0.25, 1e-15, definition},
                      {"1 dm", 1, 0, definition},
                      {"2 m", 20, 0, definition},
                      {"1 in", 0.254, 1e-15, definition},
                      {"1 ft", 3.048, 1e-15, definition},
                      {"1 mil", 25.4e-5, 1e-15, "1 mil = 25.4 um, " + trade},
                      {"1 µin", 0.0254e-5, 1e-18, "1 uin = 0.0254 um, " + trade}});
  check(read_area, {{"1 ft2", 9.290304, 1e-12, trade},
                    {"1 ft²", 9.290304, 1e-12, trade},
                    {"2 m²", 200, 0, definition},
                    {"50 dm2", 50, 0, definition},
                    {"50 dm^2", 50, 0, definition}});
  check(read_current_density, {{"4 A/dm2", 4, 0, definition},
                               {"4 A/dm²", 4, 0, definition},
                               {"1 A/ft2", 0.107639, 5e-7, trade},
                               {"45 A/ft2", 4.84376, 5e-6, "trade worked example"},
                               {"45 ASF", 4.84376, 5e-6, "the trade's short form"},
                               {"10 mA/cm2", 1, 1e-15, definition}});
  check(read_duration, {{"90 min", 1.5, 1e-15, definition},
                        {"3600 s", 1, 1e-15, definition},
                        {"2 d", 48, 0, definition},
                        {"8h", 8, 0, definition}});
}

TEST_CASE("molarities", "[unit][units]") {
  check(read_molarity, {{"0.1012 mol/L", 0.1012, 0, definition},
                        {"0,1 M", 0.1, 0, definition},
                        {"98.5 mmol/L", 0.0985, 1e-15, definition},
                        {"98.5 mM", 0.0985, 1e-15, definition}});
  CHECK(message(read_molarity("0.1 N")).find("equivalents") != std::string::npos);
  CHECK(message(read_molarity("0.1 m")).find("molality") != std::string::npos);
}

TEST_CASE("a share may stand without a unit, but never above one", "[unit][units]") {
  CHECK(*read_fraction("0.985") == 0.985);
  CHECK(*read_fraction("98,5 %") == Approx(0.985).margin(1e-15).epsilon(0));
  CHECK(*read_fraction("1") == 1);
  CHECK(message(read_fraction("99")).find("99 %") != std::string::npos);
  CHECK_FALSE(read_fraction("101 %"));
  CHECK_FALSE(read_fraction("-0.1"));
  CHECK_FALSE(read_fraction("0.5 g"));
}

TEST_CASE("concentrations with a plain factor", "[reference][units]") {
  CHECK(grams_per_litre("14,3 g/L") == 14.3);
  CHECK(grams_per_litre("80 mg/L") == Approx(0.08).margin(1e-15).epsilon(0));
  CHECK(grams_per_litre("1 oz/US gal") == Approx(7.48915).margin(5e-6).epsilon(0));   // trade table
  CHECK(grams_per_litre("40 oz/US gal") == Approx(299.566).margin(5e-4).epsilon(0));  // trade worked example
  CHECK(grams_per_litre("1 oz/imp gal") == Approx(6.23602).margin(5e-6).epsilon(0));  // NIST SP 811 B.8
  CHECK(grams_per_litre("1 lb/US gal") == Approx(119.826).margin(5e-4).epsilon(0));   // trade table
  CHECK(grams_per_litre("1 troy oz/US gal") == Approx(8.21667).margin(5e-6).epsilon(0));  // trade table
  CHECK(grams_per_litre("2 % w/v") == 20);
  CHECK(moles_per_litre_if_direct(*read_concentration("6.2 points"))->v == Approx(0.062).epsilon(1e-14));
  CHECK(grams_per_litre("50 ppm w/v") == Approx(0.05).margin(1e-15).epsilon(0));
  CHECK(*millilitres_per_litre_if_direct(*read_concentration("6 fl oz/US gal")) ==
        Approx(46.875).margin(1e-9).epsilon(0));  // trade worked example
  CHECK(*millilitres_per_litre_if_direct(*read_concentration("10 % v/v")) == 100);
  CHECK(*millilitres_per_litre_if_direct(*read_concentration("3 mL/L")) == 3);
  CHECK(moles_per_litre_if_direct(*read_concentration("0.5 mol/L"))->v == 0.5);
  CHECK(moles_per_litre_if_direct(*read_concentration("0.2 N (2 eq/mol)"))->v == 0.1);
}

TEST_CASE("concentrations that need chemistry are kept as typed", "[unit][units]") {
  const std::vector<std::pair<std::string, ConcentrationUnit>> rows = {
      {"37 % w/w", ConcentrationUnit::percent_by_mass},
      {"37 wt%", ConcentrationUnit::percent_by_mass},
      {"1.2 mol/kg", ConcentrationUnit::moles_per_kilogram_of_water},
      {"30 ppm w/w", ConcentrationUnit::ppm_by_mass},
      {"30 ppm (w/w)", ConcentrationUnit::ppm_by_mass}};
  for (const auto& [typed, unit] : rows) {
    INFO(typed);
    const auto c = read_concentration(typed);
    REQUIRE(c);
    CHECK(c->unit == unit);
    CHECK_FALSE(grams_per_litre_if_direct(*c));
    CHECK_FALSE(moles_per_litre_if_direct(*c));
    CHECK_FALSE(millilitres_per_litre_if_direct(*c));
  }
}

TEST_CASE("a word that means two things is asked about", "[failure][units]") {
  CHECK(message(read_volume("500 gal")).find("Which gallon") != std::string::npos);
  CHECK(message(read_concentration("40 oz/gal")).find("Which gallon") != std::string::npos);
  CHECK(message(read_concentration("50 ppm")).find("Which ppm") != std::string::npos);
  CHECK(message(read_concentration("10 %")).find("Which per cent") != std::string::npos);
  CHECK(message(read_concentration("0.2 N")).find("equivalents") != std::string::npos);
  CHECK(message(read_mass("2 tons")).find("Which ton") != std::string::npos);
  CHECK(message(read_concentration("1 m")).find("mol/kg") != std::string::npos);
}

TEST_CASE("a number without a unit is refused and the units are named", "[failure][units]") {
  const std::string said = message(read_volume("2340", "baths/nickel.toml:14: volume"));
  CHECK(said.find("baths/nickel.toml:14: volume") != std::string::npos);
  CHECK(said.find("no unit") != std::string::npos);
  CHECK(said.find("US gal") != std::string::npos);
  CHECK_FALSE(read_temperature("54"));
  CHECK_FALSE(read_concentration("14.3"));
}

TEST_CASE("a thousands separator is never guessed", "[failure][units]") {
  for (const std::string typed :
       {"1,234.5 L", "1.234,5 L", "1.234.567 L", "1 250 L", "1'250 L", "1,250 L", "12,500 kg"}) {
    INFO(typed);
    const auto volume = read_volume(typed.back() == 'g' ? typed.substr(0, typed.size() - 2) + "L" : typed);
    REQUIRE_FALSE(volume);
    CHECK(message(volume).find("Write 1") != std::string::npos);  // says how to write it
  }
  CHECK(*read_volume("0,125 L") == Litres{0.125});  // no thousand begins with 0
  CHECK(*read_volume("1,25 L") == Litres{1.25});    // no thousand has two digits behind
  CHECK(*read_volume("1.250 L") == Litres{1.25});   // the point is the decimal point
}

TEST_CASE("what cannot be a reading is refused", "[failure][units]") {
  for (const std::string typed : {"", "   ", "L", "nan L", "inf L", "1e999 L", "-5 L", "1e9 L", "5 Q",
                                  "--5 L", "5 L L", ",", ". L", "5 \xff\xfe"}) {
    INFO(typed);
    CHECK_FALSE(read_volume(typed));
  }
  CHECK(message(read_mass("-1 kg")).find("negative") != std::string::npos);
  CHECK_FALSE(read_temperature("-300 degC"));
  CHECK_FALSE(read_density("145 degBe"));  // the scale has its pole there
  CHECK_FALSE(read_density("150 degBe"));
  CHECK_FALSE(read_density("1234 g/mL"));
  CHECK_FALSE(read_concentration("-3 g/L"));
  CHECK_FALSE(read_concentration("101 % w/w"));
  CHECK_FALSE(read_concentration("2000000 ppm w/w"));
  CHECK_FALSE(read_concentration("1001 mL/L"));
  CHECK_FALSE(read_concentration("99999 g/L"));
  CHECK_FALSE(read_concentration("0.2 N (0 eq/mol)"));
  CHECK_FALSE(read_concentration("0.2 N (two)"));
  CHECK(message(read_volume("5 mK")).find("expected") != std::string::npos);
  CHECK(message(read_volume(std::string(5000, '7'))).size() < 400);
}

TEST_CASE("a message does not cut a letter in two", "[failure][units]") {
  std::string typed(59, 'x');
  for (int i = 0; i < 10; ++i) typed += "µ";  // two bytes; the message has room for 60
  CHECK(message(read_volume(typed)).find('"' + std::string(59, 'x') + "...\"") != std::string::npos);
}

TEST_CASE("words between a normality and its equivalents are not passed over", "[failure][units]") {
  CHECK(read_concentration("0.2 N(2 eq/mol)"));
  CHECK_FALSE(read_concentration("0.2 N acid (2 eq/mol)"));
}

TEST_CASE("an unknown unit gets the nearest one", "[failure][units]") {
  CHECK(message(read_concentration("14.3 g/K")).find("\"g/L\"") != std::string::npos);
}
