// The analyses of five invented tanks, worked by hand from their readings: 0.2 % unless a line says
// otherwise. Tank N-07 (Watts nickel) is in evaluate.cpp, "the morning analysis".
#include <bathwright/analysis/titration.hpp>
#include <bathwright/matter/formula.hpp>
#include <catch2/catch.hpp>
#include <cmath>

using namespace bathwright;
using namespace bathwright::analysis;

namespace {

Titration read(const std::string& method, double sample_mL, double mol_per_L, double burette_mL) {
  return {method, method, {sample_mL / 1000}, {mol_per_L}, 1, {burette_mL / 1000}, {0}, "bench.toml:4"};
}

Titrated worked(const Titration& t, const std::string& stated_as) {
  const auto result = work_out(t, *method(t.method), matter::Formula::parse(stated_as)->molar_mass());
  INFO((result ? std::string() : text(result.problems())));
  REQUIRE(result);
  return *result;
}

double g_per_L(const Titration& t, const std::string& stated_as) { return worked(t, stated_as).value.v; }

}  // namespace

TEST_CASE("copper cyanide tank C-04 from its readings", "[reference]") {
  const Titration copper = read("iodometric-copper", 5, 0.1003, 38.6);
  CHECK(g_per_L(copper, "Cu") == Approx(49.204685).epsilon(0.002));
  CHECK(g_per_L(copper, "CuCN") == Approx(69.350838).epsilon(0.002));
  CHECK(g_per_L(read("silver-free-cyanide", 10, 0.0995, 9.2), "NaCN") == Approx(8.9723846).epsilon(0.002));
  CHECK(g_per_L(read("barium-carbonate", 10, 1.002, 16.4), "Na2CO3") == Approx(87.08398).epsilon(0.002));
}

TEST_CASE("anodizing tank AL-1: free acid with fluoride, aluminium by difference", "[reference]") {
  CHECK(g_per_L(read("fluoride-sulfuric-acid", 10, 1.004, 36.1), "H2SO4") ==
        Approx(177.72804).epsilon(0.002));
  Titration aluminium = read("difference-aluminium", 10, 1.004, 47.3);
  aluminium.second_burette = {36.1e-3};
  const Titrated found = worked(aluminium, "Al");
  CHECK(found.value.v == Approx(10.113573).epsilon(0.002));
  // Two readings of 0.06 mL each: 0.0766219 g/L. The budget's g/L per mL, at that many mL; within 1 %.
  const double per_mL = found.value.v * found.budget.reading_rel / found.budget.reading_mL;
  CHECK(std::hypot(0.06, 0.06) * per_mL == Approx(0.076621887).epsilon(0.01));
  // Without fluoride the aluminium would be taken for acid: what the sheet must not show as free acid.
  CHECK(g_per_L(read("fluoride-sulfuric-acid", 10, 1.004, 47.3), "H2SO4") / 177.72804 > 1.3);
}

TEST_CASE("alkaline zinc tank Z-03 from its readings", "[reference]") {
  const double alkali = g_per_L(read("acid-free-hydroxide", 10, 1.001, 28.6), "NaOH");
  const double zinc = g_per_L(read("edta-zinc-demasked", 2, 0.1, 3.55), "Zn");
  CHECK(alkali == Approx(114.50581).epsilon(0.002));
  CHECK(zinc == Approx(11.60495).epsilon(0.002));
  CHECK(alkali / zinc == Approx(9.8669802).epsilon(0.002));
  CHECK(g_per_L(read("barium-carbonate", 10, 1.001, 13.1), "Na2CO3") == Approx(69.491562).epsilon(0.002));
}

TEST_CASE("hard chromium tank CR-5 from its readings", "[reference]") {
  Titration chromic = read("ferrous-chromic-acid", 10, 0.0988, 13.45);
  chromic.diluted_to = {0.5};
  chromic.aliquot = {10e-3};
  CHECK(g_per_L(chromic, "CrO3") == Approx(221.46116).epsilon(0.002));
  CHECK(g_per_L(chromic, "CrO3") / 2.55 == Approx(86.847515).epsilon(0.002));
}
