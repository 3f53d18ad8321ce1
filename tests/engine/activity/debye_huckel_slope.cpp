// Properties of water against tests/reference/water.csv.
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <bathwright/data/csv.hpp>
#include <fstream>
#include <sstream>

#include "solutions.hpp"

using namespace bathwright;
using namespace bathwright::activity;

TEST_CASE("the dielectric constant and the Debye-Hueckel slopes are those published", "[reference]") {
  std::ifstream file(PROJECT_DIR "/tests/reference/water.csv");
  std::stringstream text;
  text << file.rdbuf();
  constexpr std::string_view numeric[] = {"t_C",
                                          "eps_BradleyPitzer1979",
                                          "A_phi_BradleyPitzer1979",
                                          "B_DH_per_angstrom",
                                          "eps_ArcherWang1990",
                                          "A_phi_ArcherWang1990"};
  const auto table = data::CsvTable::read("water.csv", text.str(), numeric);
  REQUIRE(table);
  REQUIRE(table->size() == 21);
  for (std::size_t i = 0; i < table->size(); ++i) {
    const data::CsvRow row = (*table)[i];
    const units::Celsius t{row.number("t_C")};
    INFO(t.v << " degC");
    // Half a unit of the last printed digit, and as much again for 1 bar (ours) against 1 atm.
    CHECK(dielectric_constant(t) == Approx(row.number("eps_BradleyPitzer1979")).margin(1e-4).epsilon(0));
    CHECK(osmotic_slope(t) == Approx(row.number("A_phi_BradleyPitzer1979")).margin(1e-5).epsilon(0));
    CHECK(100 * size_slope_per_pm(t) == Approx(row.number("B_DH_per_angstrom")).margin(1e-5).epsilon(0));
    // The other published equation: the difference the header states.
    CHECK(dielectric_constant(t) == Approx(row.number("eps_ArcherWang1990")).margin(0.06).epsilon(0));
    CHECK(osmotic_slope(t) == Approx(row.number("A_phi_ArcherWang1990")).margin(8e-4).epsilon(0));
  }
}
