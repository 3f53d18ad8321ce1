#include <bathwright/matter/water.hpp>
#include <catch2/catch.hpp>
#include <utility>

using namespace bathwright;

TEST_CASE("density of water agrees with the printed table", "[reference][matter]") {
  // Kell 1975, J. Chem. Eng. Data 20:97, table of densities at 1 atm, kg/m3; printed values from memory.
  // Tolerance: the temperature scale has changed since (IPTS-68 to ITS-90), by 0.016 K at 60 degC, which is
  // 0.008 kg/m3.
  const std::pair<double, double> rows[] = {{0, 999.840},  {4, 999.972},  {20, 998.203},
                                            {25, 997.045}, {60, 983.191}, {100, 958.363}};
  for (const auto& [t_C, kg_per_m3] : rows) {
    INFO(t_C << " degC");
    CHECK(1000 * matter::water_density({t_C}).v == Approx(kg_per_m3).margin(0.01).epsilon(0));
  }
}
