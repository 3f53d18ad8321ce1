// Every reaction of engine/data/equilibria conserves atoms and charge, is about the species its row names,
// and leads back to species that need no row.
#include <bathwright/data/tables.hpp>
#include <bathwright/matter/formula.hpp>
#include <bathwright/speciation/reaction.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <set>
#include <string>
#include <string_view>

using namespace bathwright;
using data::built_in_table;
using data::CsvRow;
using data::CsvTable;
using speciation::Reaction;
using speciation::Term;

namespace {

constexpr std::string_view tables[] = {"equilibria/species.csv", "equilibria/solids.csv",
                                       "equilibria/gases.csv"};

bool has_phase(std::string_view name) { return name.ends_with("(s)") || name.ends_with("(g)"); }

std::string_view without_phase(std::string_view name) {
  if (has_phase(name)) name.remove_suffix(3);
  return name;
}

Reaction reaction_of(const CsvRow& row) {
  const auto reaction = speciation::parse_reaction(row["reaction"], row.where());
  INFO((reaction ? std::string{} : text(reaction.problems())));
  REQUIRE(reaction);
  return *reaction;
}

matter::Formula formula_of(std::string_view name, const std::string& where) {
  const auto formula = matter::Formula::parse(without_phase(name), where);
  INFO((formula ? std::string{} : text(formula.problems())));
  REQUIRE(formula);
  return *formula;
}

/// Right minus left, by element symbol; the charge under "charge".
std::map<std::string, double> imbalance(const Reaction& reaction, const std::string& where) {
  std::map<std::string, double> sum;
  const auto add = [&](const Term& term, double sign) {
    const matter::Formula formula = formula_of(term.name, where);
    for (const matter::Atom& atom : formula.atoms())
      sum[atom.element] += sign * term.coefficient * atom.count;
    sum["charge"] += sign * term.coefficient * formula.charge();
  };
  for (const Term& term : reaction.left) add(term, -1);
  for (const Term& term : reaction.right) add(term, 1);
  return sum;
}

/// Coefficient of `name`, products positive; 0 where it does not take part.
double coefficient(const Reaction& reaction, std::string_view name) {
  double sum = 0;
  for (const Term& term : reaction.left)
    if (term.name == name) sum -= term.coefficient;
  for (const Term& term : reaction.right)
    if (term.name == name) sum += term.coefficient;
  return sum;
}

template <class Visit>
void each_row(std::string_view path, std::initializer_list<std::string_view> numeric, Visit visit) {
  const CsvTable table = built_in_table(path, numeric);
  for (std::size_t i = 0; i < table.size(); ++i) {
    INFO(table[i].where() << ": " << table[i]["reaction"]);
    visit(table[i]);
  }
}

/// What a species or solid is made of in species that have no row, and log10 K of making it from them.
struct Made {
  std::map<std::string, double> from;
  double log10_K = 0;
};

/// Rewrites reactions in species that have no row, with the rows of set main that hold under `convention`.
class Basis {
 public:
  explicit Basis(std::string_view convention) {
    each_row("equilibria/species.csv", {"log10_K"}, [&](const CsvRow& row) {
      if (row["set"] != "main" || (row["convention"] != "both" && row["convention"] != convention)) return;
      const std::string name(row["species"]);
      rows_.insert_or_assign(name, Row{reaction_of(row), row.number("log10_K")});
    });
  }

  Made made(const std::string& name) const {
    std::set<std::string> open;
    return made(name, open);
  }

 private:
  struct Row {
    Reaction reaction;
    double log10_K;
  };

  Made made(const std::string& name, std::set<std::string>& open) const {
    const auto found = rows_.find(name);
    if (found == rows_.end()) return {{{name, 1.}}, 0};
    INFO(name << " is made from itself");
    REQUIRE(open.insert(name).second);
    Made result;
    result.log10_K = found->second.log10_K;
    const auto add = [&](const Term& term, double sign) {
      if (term.name == name) return;
      const Made part = made(term.name, open);
      for (const auto& [basis, count] : part.from) result.from[basis] += sign * term.coefficient * count;
      result.log10_K += sign * term.coefficient * part.log10_K;
    };
    for (const Term& term : found->second.reaction.left) add(term, 1);
    for (const Term& term : found->second.reaction.right) add(term, -1);
    open.erase(name);
    return result;
  }

  std::map<std::string, Row> rows_;
};

}  // namespace

TEST_CASE("every reaction balances in every element and in charge", "[unit]") {
  for (const std::string_view path : tables)
    each_row(path, {}, [](const CsvRow& row) {
      for (const auto& [element, excess] : imbalance(reaction_of(row), row.where())) {
        INFO(element << " right minus left");
        CHECK(excess == Approx(0).margin(1e-9).epsilon(0));
      }
    });
}

TEST_CASE("a species row forms one of its species, of the charge it states", "[unit]") {
  each_row("equilibria/species.csv", {"charge"}, [](const CsvRow& row) {
    CHECK(coefficient(reaction_of(row), row["species"]) == 1);
    CHECK(formula_of(row["species"], row.where()).charge() == row.number("charge"));
  });
}

TEST_CASE("a solid row dissolves one formula unit of its solid", "[unit]") {
  each_row("equilibria/solids.csv", {}, [](const CsvRow& row) {
    CHECK(coefficient(reaction_of(row), std::string(row["formula"]) + "(s)") == -1);
  });
}

TEST_CASE("a gas row dissolves one of its gas", "[unit]") {
  each_row("equilibria/gases.csv", {}, [](const CsvRow& row) {
    CHECK(coefficient(reaction_of(row), std::string(row["gas"]) + "(g)") == -1);
  });
}

TEST_CASE("only the solid or gas of a row carries a phase label", "[unit]") {
  for (const std::string_view path : tables)
    each_row(path, {}, [&](const CsvRow& row) {
      const Reaction reaction = reaction_of(row);
      int labelled = 0;
      for (const auto& side : {reaction.left, reaction.right})
        for (const Term& term : side) labelled += has_phase(term.name);
      CHECK(labelled == (path == "equilibria/species.csv" ? 0 : 1));
    });
}

TEST_CASE("no species is made from itself, and all are made of species that have no row", "[unit]") {
  for (const std::string_view convention : {"association", "interaction"}) {
    const Basis basis(convention);
    each_row("equilibria/species.csv", {}, [&](const CsvRow& row) {
      for (const auto& [name, count] : basis.made(std::string(row["species"])).from)
        CHECK(basis.made(name).from.size() == 1);
    });
  }
}

TEST_CASE("the two hydrogensulfate rows agree within their uncertainties at 25 C", "[unit]") {
  const double gap =
      Basis("association").made("HSO4^-").log10_K - Basis("interaction").made("HSO4^-").log10_K;
  CHECK(gap == Approx(0).margin(0.03).epsilon(0));  // 0.03: uncertainty of the association row
}

// log10 K of ZnO + H2O + 2 OH- = Zn(OH)4^2- must be log10 Ksp of ZnO plus the zincate constant of its own
// set.
TEST_CASE("zinc oxide in alkali is the sum of its solubility product and the zincate constant", "[unit]") {
  double sum = 0, direct = 0;
  each_row("equilibria/species.csv", {"log10_K"}, [&](const CsvRow& row) {
    if (row["set"] == "zincate" && row["species"] == "Zn(OH)4^2-") sum += row.number("log10_K");
  });
  each_row("equilibria/solids.csv", {"log10_K"}, [&](const CsvRow& row) {
    if (row["solid"] == "ZnO (zincite)") sum += row.number("log10_K");
    if (row["solid"] == "ZnO (zincite), alkaline form") direct = row.number("log10_K");
  });
  CHECK(direct == Approx(sum).margin(0.001).epsilon(0));
}

// Solids are published with H+ (acid form, *log10 K) and tabulated here with OH-; both must meet through the
// ion product of water. Acid forms: Brown & Ekberg 2016; Powell et al. 2007, 2013; NEA-TDB (nickel, tin,
// iron).
TEST_CASE("hydroxides and oxides agree with their published acid-form constants", "[reference]") {
  struct Published {
    std::string_view solid;
    double protons, acid_form_log10_K;
    double rounding = 0.005;  ///< half a unit of the last digit of the tabulated constant
  };
  const double log10_Kw = Basis("interaction").made("OH^-").log10_K;
  for (const Published& published : {
           Published{"Ni(OH)2 (beta, aged crystalline)", 2, 11.02},
           Published{"Ni(OH)2 (microcrystalline)", 2, 11.75},
           Published{"Co(OH)2 (pink, active)", 2, 13.24},
           Published{"Cu(OH)2", 2, 8.67},
           Published{"CuO (tenorite)", 2, 7.64},
           Published{"ZnO (zincite)", 2, 11.12},
           Published{"Zn(OH)2 (epsilon)", 2, 11.38},
           Published{"Zn(OH)2 (beta1)", 2, 11.72},
           Published{"Zn(OH)2 (gamma)", 2, 11.70},
           Published{"Zn(OH)2 (delta)", 2, 11.81},
           Published{"Fe(OH)2", 2, 12.85},
           Published{"Fe(OH)3 (amorphous)", 3, 3.50, 0.05},
           Published{"SnO (tetragonal)", 2, 1.60},
           Published{"Al(OH)3 (gibbsite)", 3, 7.75},
           Published{"Cr(OH)3 (active)", 3, 9.41},
           Published{"Ca(OH)2", 2, 22.75},
           Published{"Mg(OH)2 (brucite)", 2, 17.11},
       }) {
    bool found = false;
    each_row("equilibria/solids.csv", {"log10_K"}, [&](const CsvRow& row) {
      if (row["solid"] != published.solid || row["set"] != "main") return;
      found = true;
      const double expected = published.acid_form_log10_K + published.protons * log10_Kw;
      CHECK(row.number("log10_K") == Approx(expected).margin(published.rounding + 1e-9).epsilon(0));
    });
    INFO(published.solid);
    CHECK(found);
  }
}
