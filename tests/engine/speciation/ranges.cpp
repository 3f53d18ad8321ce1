// What lies beyond the data is never answered as if it did not: random compositions beyond a fit, of ions
// without parameters, at temperatures without data.
#include <bathwright/data/tables.hpp>
#include <bathwright/speciation/coverage.hpp>
#include <set>

#include "systems.hpp"

using namespace bathwright;
using namespace bathwright::speciation;
using activity::ModelKind;

namespace {

using Pair = std::pair<std::string, std::string>;

struct Published {
  double max_molality = 0;
  bool away_from_25 = false;  ///< a slope or a table of temperatures
  bool of_salt = true;        ///< the end of the fit counts the salt
};

/// Read from the table itself, not from the model: cation, anion and what is published about them in any set.
std::map<Pair, Published> published_pairs() {
  const data::CsvTable table =
      data::built_in_table("activity/pitzer_binary.csv", {"t_C", "dbeta0_dT", "max_molality"});
  std::map<Pair, Published> found;
  for (std::size_t i = 0; i < table.size(); ++i) {
    const data::CsvRow row = table[i];
    Published& pair = found[{std::string(row["cation"]), std::string(row["anion"])}];
    pair.max_molality = std::max(pair.max_molality, row.number("max_molality"));
    pair.away_from_25 = pair.away_from_25 || row.number("t_C") != 25 || !row["dbeta0_dT"].empty();
    pair.of_salt = pair.of_salt && row["range_of"].empty();
  }
  return found;
}

bool is_component(const std::string& name) {
  const auto& basis = equilibria_for(ModelKind::pitzer).basis();
  return name != "H^+" && std::find(basis.begin(), basis.end(), name) != basis.end();
}

/// mol of cation and anion in that many mol of their salt.
Amounts of_salt(const Pair& pair, double mol) {
  const int zc = activity::charge_in_name(pair.first), za = -activity::charge_in_name(pair.second);
  const int common = std::gcd(zc, za);
  return {{pair.first, mol * za / common}, {pair.second, mol * zc / common}};
}

struct Told {
  int answers = 0, silent = 0;
};

/// Answers and silences for random amounts of a salt, mol/kg. What is nearly all bound in neutral complexes
/// is passed over: no ion is left whose interactions could matter.
void try_salt(const Pair& pair, double low, double high, double t_C, std::mt19937& random, Told& told) {
  constexpr double left = 0.1;
  const int zc = activity::charge_in_name(pair.first), za = -activity::charge_in_name(pair.second);
  const double strength_per_mol = 0.5 * zc * za * (zc + za) / std::gcd(zc, za);
  const Solver solver = solver_of({pair.first, pair.second}, {t_C});
  std::uniform_real_distribution<double> ln_mol(std::log(low), std::log(high));
  for (int repeat = 0; repeat < 3; ++repeat) {
    const double mol = std::exp(ln_mol(random));
    const auto answer = solver.solve(task_of(solver.system(), of_salt(pair, mol)));
    if (!answer || answer->ionic_strength < left * mol * strength_per_mol) continue;
    const Coverage found = coverage(solver, *answer);
    ++told.answers;
    INFO(pair.first << " " << pair.second << " " << mol << " mol/kg at " << t_C << " degC");
    const bool silent = found.valid && found.warnings.empty() && found.missing.empty();
    told.silent += silent;
    CHECK_FALSE(silent);
  }
}

}  // namespace

TEST_CASE("more of a salt than its parameters were fitted to is told", "[property]") {
  constexpr double saturation_limited = 0.1;  // a fit that ends below ended where the salt saturates (gypsum)
  std::mt19937 random(20260802);
  Told told;
  for (const auto& [pair, published] : published_pairs())
    if (is_component(pair.first) && is_component(pair.second) && published.of_salt &&
        published.max_molality >= saturation_limited)
      try_salt(pair, 1.06 * published.max_molality, 3 * published.max_molality, 25, random, told);
  CHECK(told.answers > 200);
  CHECK(told.silent == 0);
}

TEST_CASE("two ions about which nothing is published are told", "[property]") {
  std::mt19937 random(20260803);
  const auto published = published_pairs();
  Told told;
  const auto& basis = equilibria_for(ModelKind::pitzer).basis();
  for (const std::string& cation : basis)
    for (const std::string& anion : basis)
      if (is_component(cation) && activity::charge_in_name(cation) > 0 &&
          activity::charge_in_name(anion) < 0 && !published.contains({cation, anion}))
        try_salt({cation, anion}, 0.1, 2, 25, random, told);
  CHECK(told.answers > 1500);
  CHECK(told.silent == 0);
}

TEST_CASE("parameters known at 25 degC only are told when it is warm", "[property]") {
  // From 1 mol/kg on: a slope of beta0 of 4e-4 kg/mol a kelvin, the usual size, is then 1 % in gamma.
  std::mt19937 random(20260804);
  std::uniform_real_distribution<double> warm(45, 95);
  Told told;
  for (const auto& [pair, published] : published_pairs())
    if (is_component(pair.first) && is_component(pair.second) && !published.away_from_25 &&
        published.max_molality > 1)
      try_salt(pair, 1, published.max_molality, warm(random), random, told);
  CHECK(told.answers > 50);
  CHECK(told.silent == 0);
}

TEST_CASE("the models of charge alone are told beyond their ionic strength, whatever is dissolved",
          "[property]") {
  std::mt19937 random(20260805);
  for (const ModelKind kind : {ModelKind::davies, ModelKind::debye_huckel, ModelKind::sit})
    for (const BathSystem& bath : bath_systems()) {
      const Solver solver = solver_of(bath.components(), room, kind);
      for (int repeat = 0; repeat < 50; ++repeat) {
        const auto answer = solver.solve(wild_totals(solver.system(), random));
        if (!answer || answer->ionic_strength <= solver.model().trusted_ionic_strength()) continue;
        INFO(activity::name(kind) << ", " << bath.name << ", I = " << answer->ionic_strength);
        const Coverage found = coverage(solver, *answer);
        CHECK_FALSE(found.valid);
        CHECK_FALSE(found.warnings.empty());
      }
    }
}
