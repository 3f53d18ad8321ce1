// Every wet method of the trade: there, with what a bench sheet says of it, and with the result of its usual
// reading.
#include <algorithm>
#include <bathwright/analysis/titration.hpp>
#include <bathwright/data/csv.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <fstream>
#include <iterator>

using namespace bathwright;
using namespace bathwright::analysis;

namespace {

data::CsvTable trade_methods() {
  std::ifstream file(TEST_DIR "/trade_methods.csv");
  const std::string content{std::istreambuf_iterator<char>(file), {}};
  constexpr std::string_view numeric[] = {"sample_mL", "mol_per_L", "reading", "result"};
  auto table = data::CsvTable::read("trade_methods.csv", content, numeric);
  REQUIRE(table);
  return *std::move(table);
}

/// The usual reading as it would be typed in.
Titration typed(const Method& m, double sample_mL, double mol_per_L, double reading) {
  Titration t{m.id, m.id, {sample_mL / 1000}, {mol_per_L}, 1, {reading / 1000}, {0}, "sheet:1"};
  if (sample_mL < 1) {  // an aliquot of a diluted sample
    t.sample = m.usual_sample;
    t.aliquot = m.usual_aliquot;
    t.diluted_to = {m.usual_sample.v * m.usual_aliquot.v / (sample_mL / 1000)};
  }
  switch (m.kind) {
    case Kind::back:  // 10 mL found of the reagent, the rest used up
      t.excess = {(reading + 10) / 1000};
      t.excess_strength = {mol_per_L};
      t.titrant = {mol_per_L / m.reagent_per_back};
      t.burette = {10e-3};
      break;
    case Kind::difference:  // weights times readings: p A + q B = reading, B being 10 mL
      t.second_burette = {10e-3};
      t.burette = {(reading - m.times_second * 10) / m.times_burette / 1000};
      break;
    case Kind::weighed:
      t.weighed = {reading / 1000};
      t.burette = {0};
      t.titrant = {0};
      break;
    case Kind::direct:
    case Kind::stated:
      break;
  }
  return t;
}

}  // namespace

TEST_CASE("every method of the trade is there and gives its usual result", "[reference]") {
  const auto table = trade_methods();
  CHECK(table.size() == 67);
  for (std::size_t i = 0; i < table.size(); ++i) {
    const auto row = table[i];
    INFO(row.where() << " " << row["method"]);
    const Method* m = method(row["method"]);
    REQUIRE(m);
    CHECK((m->kind == Kind::stated) == (row["kind"] == "entered"));
    if (m->kind == Kind::stated) continue;
    CHECK(m->titrant.starts_with(row["titrant"].substr(0, 4)));
    const bool points = row["stated_as"] == "points";  // 1 point: 0.01 mol/L of acid
    const auto formula = matter::Formula::parse(points ? "H^+" : std::string(row["stated_as"]));
    REQUIRE(formula);
    const double mol_per_L = m->kind == Kind::weighed ? 0 : row.number("mol_per_L");
    const auto result = work_out(typed(*m, row.number("sample_mL"), mol_per_L, row.number("reading")), *m,
                                 formula->molar_mass());
    INFO((result ? std::string() : text(result.problems())));
    REQUIRE(result);
    const double per_unit = points ? 100 / formula->molar_mass().v : row["unit"] == "mg/L" ? 1000 : 1;
    // Half of the last digit printed, and 2e-5 for the atomic weights.
    const double printed = row.number("result");
    CHECK(result->value.v * per_unit == Approx(printed).margin(0.0006 + 2e-5 * printed).epsilon(0));
  }
}

TEST_CASE("a method that brings cyanide, fluoride or chromic acid to the bench says what to mind", "[unit]") {
  for (const Method& m : methods()) {
    INFO(m.id);
    const auto about = [&](std::string_view word) {
      return std::ranges::any_of(m.steps,
                                 [&](const std::string& step) { return step.find(word) != step.npos; }) ||
             m.reaction.find(word) != std::string::npos || m.indicator.find(word) != std::string::npos;
    };
    if ((about("CN") || about("cyanide")) && !about("cyanide-free"))
      CHECK(m.safety.find("hood") != std::string::npos);
    if (about("KF") || about("HF") || about("fluoride") || about("F-"))
      CHECK(m.safety.find("plastic") != std::string::npos);
    if (about("Cr2O7") || about("CrO4") || m.indicator.find("chromate") != std::string::npos)
      CHECK(m.safety.find("Cr(VI)") != std::string::npos);
  }
}
