// The tables as a whole: rows that must agree, and a count that must not fall.
#include <catch2/catch.hpp>
#include <map>
#include <set>

#include "report.hpp"

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
  // Phthalate, citrate and oxalate standards have no interaction parameters and are judged with Davies; the
  // carbonate standard misses by 0.022 with Pitzer (REPORT.md).
  const std::map<std::string, activity::ModelKind> standards{
      {"PH-0106", activity::ModelKind::pitzer}, {"PH-0086", activity::ModelKind::pitzer},
      {"PH-0023", activity::ModelKind::pitzer}, {"PH-0101", activity::ModelKind::davies},
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
  std::map<std::pair<std::string, activity::ModelKind>, int> inside;
  for (const Line& line : lines()) inside[{line.figure.table, line.model}] += line.inside();
  using activity::ModelKind;
  CHECK(inside[{"mean_activity", ModelKind::pitzer}] >= 167);
  CHECK(inside[{"osmotic", ModelKind::pitzer}] >= 70);
  CHECK(inside[{"ph", ModelKind::pitzer}] >= 45);
  CHECK(inside[{"ph", ModelKind::davies}] >= 46);
  CHECK(inside[{"solubility", ModelKind::pitzer}] >= 26);
}

TEST_CASE("the report names every row", "[unit]") {
  const std::string report = markdown(lines());
  for (const Line& line : lines()) CHECK(report.find("| " + line.figure.id + " |") != std::string::npos);
}
