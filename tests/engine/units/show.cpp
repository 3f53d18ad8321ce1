#include <bathwright/units/read.hpp>
#include <bathwright/units/show.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <random>
#include <string>
#include <vector>

using namespace bathwright;
using namespace bathwright::units;

namespace {

constexpr int digits = 12;
constexpr double half_of_last_digit =
    0.501e-11;  // relative, where the mantissa is 1; 0.001 for the reading back

// Shows 1000 random quantities and reads them again. The range is in the base unit.
template <class Quantity, class Read>
void round_trip_in(std::string_view unit, Read read, double lowest, double highest) {
  INFO("seed " << Catch::rngSeed());
  std::mt19937_64 random(Catch::rngSeed());
  std::uniform_real_distribution<double> logarithm(std::log10(lowest), std::log10(highest));
  for (int i = 0; i < 1000; ++i) {
    const Quantity q{std::pow(10, logarithm(random))};
    const std::string shown = show(q, unit, digits);
    CAPTURE(q.v, shown);
    const auto again = read(shown, "");
    REQUIRE(again);
    const double seen = value_in(q, unit);
    REQUIRE(value_in(*again, unit) == Approx(seen).margin(half_of_last_digit * std::abs(seen)).epsilon(0));
  }
}

template <class Quantity, class Read>
void round_trip(Read read, double lowest, double highest) {
  for (const std::string_view unit : symbols<Quantity>())
    round_trip_in<Quantity>(unit, read, lowest, highest);
}

}  // namespace

TEST_CASE("what is shown can be read again, in every unit", "[property][units]") {
  round_trip<Litres>(read_volume, 1e-3, 1e5);
  round_trip<Kilograms>(read_mass, 1e-3, 1e5);
  round_trip<Celsius>(read_temperature, 1, 110);
  for (const std::string_view unit : symbols<KilogramsPerLitre>()) {  // the light Baume scale ends at water
    const bool light = unit == "degBe light";
    round_trip_in<KilogramsPerLitre>(unit, read_density, light ? 0.8 : 1.01, light ? 0.99 : 2.5);
  }
  round_trip<Decimetres>(read_length, 1e-2, 1e3);
  round_trip<SquareDecimetres>(read_area, 1e-2, 1e5);
  round_trip<AmperesPerSquareDecimetre>(read_current_density, 1e-2, 1e3);
  round_trip<Hours>(read_duration, 1e-2, 1e4);
  round_trip<MolesPerLitre>(read_molarity, 1e-4, 20);
}

TEST_CASE("concentrations survive being shown", "[property][units]") {
  INFO("seed " << Catch::rngSeed());
  std::mt19937_64 random(Catch::rngSeed());
  std::uniform_real_distribution<double> value(0.01, 50);
  for (std::size_t unit = 0; unit < symbols<Concentration>().size(); ++unit) {
    for (int i = 0; i < 1000; ++i) {
      const Concentration c{value(random), static_cast<ConcentrationUnit>(unit), 2};
      const std::string shown = show(c, digits);
      CAPTURE(shown);
      const auto again = read_concentration(shown);
      REQUIRE(again);
      REQUIRE(again->unit == c.unit);
      REQUIRE(again->value == Approx(c.value).epsilon(1e-11));
    }
  }
}

TEST_CASE("significant digits, with no exponent in the usual range", "[unit][units]") {
  const std::vector<std::tuple<double, int, std::string>> rows = {{0, 4, "0"},
                                                                  {1, 4, "1.000"},
                                                                  {299.5664, 4, "299.6"},
                                                                  {9.9996, 4, "10.00"},
                                                                  {123456, 4, "123500"},
                                                                  {0.00012345, 3, "0.000123"},
                                                                  {-5.25, 2, "-5.2"},
                                                                  {1e14, 1, "100000000000000"},
                                                                  {0.1, 17, "0.10000000000000001"},
                                                                  {1.5e20, 3, "1.50e+20"},
                                                                  {2e-9, 2, "2.0e-09"},
                                                                  {54, 2, "54"}};
  for (const auto& [value, n, expected] : rows) CHECK(significant(value, n) == expected);
  CHECK(significant(std::nan("")) == "nan");
  CHECK(significant(-INFINITY) == "-inf");
}

TEST_CASE("a quantity is shown in the unit asked for", "[unit][units]") {
  CHECK(show(Litres{1892.705892}, "US gal") == "500.0 US gal");
  CHECK(show(Celsius{54}, "°F", 3) == "129 degF");
  CHECK(show(KilogramsPerLitre{1.17773}, "degBe", 3) == "22.0 degBe");
  CHECK(show(Kilograms{77.1574}) == "77.16 kg");
  CHECK(show(GramsPerLitre{14.3}) == "14.30 g/L");
  CHECK(show(Concentration{0.2, ConcentrationUnit::equivalents_per_litre, 2}, 2) == "0.20 N (2.0 eq/mol)");
}

TEST_CASE("an unknown unit shows the base unit, never a wrong label", "[failure][units]") {
  CHECK(show(Litres{2}, "bucket") == "2.000 L");
  CHECK(value_in(Litres{2}, "bucket") == 2);
}
