// The tables as a whole: rows that must agree, and a count that must not fall.
#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <set>

#include "report.hpp"
#include "saturate.hpp"

using namespace bathwright;
using namespace bathwright::reference;

namespace {

const std::vector<Line>& lines() {
  static const std::vector<Line> all = compare_all();
  return all;
}

std::string text(const Line& line) {
  return line.figure.id + " " + line.figure.system + " " + line.figure.conditions + ": published " +
         std::to_string(line.figure.published) + ", computed " +
         (line.computed.value ? std::to_string(*line.computed.value) : "nothing") + " " +
         line.computed.not_covered;
}

}  // namespace

TEST_CASE("single salts at 25 degC agree within the scatter of their sources", "[reference]") {
  const std::set<std::string> level{"NaCl", "KCl", "HCl", "NiCl2", "NiSO4"};
  int judged = 0;
  for (const Line& line : lines()) {
    const Figure& f = line.figure;
    if (f.table != "mean_activity" || line.model != activity::ModelKind::pitzer || f.t_C != 25) continue;
    // Of H2SO4 the sources agree on the slope, not on the level (README.md).
    const bool ratio = f.quantity.starts_with("mean_activity_coefficient_ratio");
    if (!level.contains(f.system) && !(f.system == "H2SO4" && ratio)) continue;
    if (!line.covered()) continue;  // above the molality of the fit
    INFO(text(line));
    CHECK(line.inside());
    ++judged;
  }
  CHECK(judged >= 27);
}

TEST_CASE("the primary pH standards at 25 degC agree within 0.02", "[reference]") {
  // On the conventional scale (report_pH.cpp). Phthalate, citrate and oxalate standards have no interaction
  // parameters and are judged with Davies.
  const std::map<std::string, activity::ModelKind> standards{
      {"PH-0106", activity::ModelKind::pitzer}, {"PH-0086", activity::ModelKind::pitzer},
      {"PH-0023", activity::ModelKind::pitzer}, {"PH-0101", activity::ModelKind::pitzer},
      {"PH-0051", activity::ModelKind::davies}, {"PH-0030", activity::ModelKind::davies},
      {"PH-0035", activity::ModelKind::davies}};
  std::size_t judged = 0;
  for (const Line& line : lines()) {
    const auto standard = standards.find(line.figure.id);
    if (standard == standards.end() || standard->second != line.model) continue;
    INFO(text(line));
    REQUIRE(line.computed.value);
    CHECK(*line.computed.value == Approx(line.figure.published).margin(0.02).epsilon(0));
    ++judged;
  }
  CHECK(judged == standards.size());
}

TEST_CASE("no fewer rows lie inside their tolerance than when this was written", "[reference]") {
  // A ratchet: raise a number when the engine improves, never lower it without saying why.
  // Judged are the rows the engine itself does not call indicative (coverage.hpp): a wider caution lowers the
  // count.
  std::map<std::pair<std::string, activity::ModelKind>, int> inside;
  for (const Line& line : lines()) inside[{line.figure.table, line.model}] += line.inside();
  using activity::ModelKind;
  // Lowered when what a published fit, a slope and a psi of zero leave open was first counted: strong
  // sulfuric acid and solutions near 0 degC that were right are now called indicative, as are the wrong ones
  // beside them (mean_activity 181, osmotic 77, isopiestic 21, supplement_solubility 3). ph was 86 before the
  // polyborate parameters moved the medians that stand in for citrate (-0.014 became -0.016), with Davies 73
  // before they had measured enthalpies (borax at 0 degC).
  CHECK(inside[{"mean_activity", ModelKind::pitzer}] >= 180);
  CHECK(inside[{"mean_activity", ModelKind::davies}] >= 9);
  CHECK(inside[{"osmotic", ModelKind::pitzer}] >= 76);
  // 52 until psi of copper was regressed from 13 of them, 8 of which had been inside; of the rest two came in
  // and MX-0048 went out.
  CHECK(inside[{"mixed", ModelKind::pitzer}] >= 45);
  CHECK(inside[{"isopiestic", ModelKind::pitzer}] >= 16);
  CHECK(inside[{"vapour", ModelKind::pitzer}] >= 12);
  CHECK(inside[{"ph", ModelKind::pitzer}] >= 83);
  CHECK(inside[{"ph", ModelKind::davies}] >= 72);
  CHECK(inside[{"solubility", ModelKind::pitzer}] >= 107);
  CHECK(inside[{"supplement_solubility", ModelKind::pitzer}] >= 2);
}

TEST_CASE("no answer is wrong in silence", "[reference]") {
  // Valid, and outside by more than three tolerances and three of the uncertainties the engine states.
  int advisory = 0;
  for (const Line& line : lines()) {
    if (!line.silent()) continue;
    INFO(text(line) << ", u " << line.computed.u.value_or(0));
    CHECK(line.figure.advisory());
    ++advisory;
  }
  CHECK(advisory <= 15);  // a ratchet
}

TEST_CASE("every value that is judged states its uncertainty", "[reference]") {
  for (const Line& line : lines()) {
    if (!line.covered()) continue;
    INFO(text(line));
    REQUIRE(line.computed.u);
    CHECK(std::isfinite(*line.computed.u));
    CHECK(*line.computed.u > 0);
  }
}

TEST_CASE("silent is what neither the tolerance nor the stated uncertainty explains", "[unit]") {
  const auto line = [](double computed, std::optional<double> u, std::string not_covered = {}) {
    Figure figure;
    figure.published = 1;
    figure.tolerance = 0.01;
    return Line{figure, activity::ModelKind::pitzer, {computed, std::move(not_covered), {}, u}};
  };
  CHECK(line(1.05, 0.01).silent());
  CHECK(line(1.05, std::nullopt).silent());
  CHECK_FALSE(line(1.05, 0.02).silent());
  CHECK_FALSE(line(1.025, 0.001).silent());
  CHECK_FALSE(line(1.05, 0.01, "a doubt").silent());
}

TEST_CASE("a doubtful row is a row of the tables and says why", "[unit]") {
  std::set<std::string> doubtful;
  for (const Line& line : lines())
    if (line.figure.doubtful) doubtful.insert(line.figure.id);
  CHECK(doubtful == std::set<std::string>{"MX-0009", "SP-0008", "VP-0046"});
}

TEST_CASE("the conventional pH is the unscaled one where chloride follows the convention", "[unit]") {
  // Both figures of 0.05 mol/kg tetroxalate by Davies, whose gamma_Cl is near the convention's (0.80): within
  // 0.002.
  const Figure tetroxalate{
      "ph",  "PH-0035", "K tetroxalate buffer", "m(KH3(C2O4)2)=0.05 mol/kg", "pH", "pH", 25, 1.679,
      0.015, false};
  const Computed computed = compute_pH(tetroxalate, activity::ModelKind::davies);
  REQUIRE(computed.value);
  const double unscaled = std::stod(computed.note.substr(computed.note.rfind(' ')));
  CHECK(*computed.value == Approx(unscaled).margin(0.002).epsilon(0));
}

TEST_CASE("contents per litre are those of the saturated solution", "[unit]") {
  // 100 g/L MgSO4 saturated with gypsum: the contents times the volume give back what was asked for.
  const auto found =
      saturate({"CaSO4"}, {{"MgSO4", 100, Content::Unit::g_per_L}}, 25, activity::ModelKind::pitzer);
  REQUIRE(found);
  CHECK(found->contents.at("MgSO4") * molar_mass("MgSO4") / found->volume_L ==
        Approx(100).margin(1e-5).epsilon(0));
}

TEST_CASE("a row that a constant was regressed from is judged nowhere", "[unit]") {
  const auto row = std::find_if(lines().begin(), lines().end(),
                                [](const Line& line) { return line.figure.id == "SO-0172"; });
  REQUIRE(row != lines().end());
  CHECK_FALSE(row->covered());
  CHECK(row->computed.not_covered == "fitted: log10 K of KNO3 was regressed from this row");
}

TEST_CASE("the report names every row", "[unit]") {
  const std::string report = markdown(lines());
  for (const Line& line : lines()) CHECK(report.find("| " + line.figure.id + " |") != std::string::npos);
}
