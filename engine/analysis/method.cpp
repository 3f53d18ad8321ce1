#include <algorithm>
#include <bathwright/analysis/method.hpp>
#include <bathwright/data/tables.hpp>
#include <cassert>
#include <cmath>

#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

template <class Enum, std::size_t n>
Enum word(std::string_view text, const std::string_view (&words)[n]) {
  const auto at = std::ranges::find(words, text);
  assert(at != std::end(words));  // a test reads every row
  return static_cast<Enum>(at - std::begin(words));
}

constexpr std::string_view kinds[] = {"direct", "back", "difference", "weighed", "stated"};
constexpr std::string_view shares[] = {"", "free", "total"};

double or_zero(double value) { return std::isfinite(value) ? value : 0; }

Method method_of(const data::CsvRow& row) {
  Method m;
  m.id = row["id"];
  m.aliases = row.list("aliases");
  for (const std::string& analyte : row.list("analytes")) {
    const auto formula = matter::Formula::parse(analyte, row.where());
    assert(formula);
    m.analytes.push_back(*formula);
  }
  m.kind = word<Kind>(row["kind"], kinds);
  m.share = word<Share>(row["share"], shares);
  m.titrant = row["titrant"];
  m.mol_per_mol = or_zero(row.number("mol_per_mol"));
  m.back_titrant = row["back_titrant"];
  m.reagent_per_back = or_zero(row.number("reagent_per_back"));
  if (m.kind == Kind::difference) {
    m.times_burette = row.number("times_burette");
    m.times_second = row.number("times_second");
    m.two_flasks = row["flasks"] == "2";
  }
  m.usual_sample = {row.number("sample_mL") / 1000};
  m.usual_flask = {or_zero(row.number("diluted_to_mL")) / 1000};
  m.usual_aliquot = {or_zero(row.number("aliquot_mL")) / 1000};
  m.usual_titrant = {or_zero(row.number("titrant_mol_per_L"))};
  m.indicator = row["indicator"];
  m.end_point = row["end_point"];
  m.reaction = row["reaction"];
  m.interferences = row["interferences"];
  m.safety = row["safety"];
  m.note = row["note"];
  m.steps = row.list("steps");
  m.source = row["source"];
  if (const auto quality = row["end_point_class"]; !quality.empty())
    m.u_end_point_mL = uncertainty_term("end-point-" + std::string(quality));
  m.u_method_rel = row.number("repeatability_rel");
  return m;
}

}  // namespace

const std::vector<Method>& methods() {
  static const std::vector<Method> all = [] {
    const auto table =
        data::built_in_table("analysis/titrations.csv",
                             {"mol_per_mol", "reagent_per_back", "times_burette", "times_second", "sample_mL",
                              "diluted_to_mL", "aliquot_mL", "titrant_mol_per_L", "repeatability_rel"});
    std::vector<Method> read;
    for (std::size_t i = 0; i < table.size(); ++i) read.push_back(method_of(table[i]));
    return read;
  }();
  return all;
}

const Method* method(std::string_view id) {
  const auto found = std::ranges::find_if(
      methods(), [&](const Method& m) { return m.id == id || std::ranges::count(m.aliases, id) > 0; });
  return found == methods().end() ? nullptr : &*found;
}

std::optional<double> quantity_per_analyte(const Method& method, const bath::Quantity& quantity) {
  for (const matter::Formula& analyte : method.analytes) {
    if (analyte.charge() == quantity.formula.charge() && matter::same_composition(analyte, quantity.formula))
      return 1;
    if (quantity.counts.size() == 1 && quantity.counts.begin()->first == analyte.text())
      return quantity.counts.begin()->second;
  }
  return std::nullopt;
}

std::vector<std::string> methods_for(const bath::Quantity& quantity) {
  std::vector<std::string> ids;
  for (const Method& m : methods()) {
    if (m.kind != Kind::stated && quantity_per_analyte(m, quantity)) ids.push_back(m.id);
  }
  return ids;
}

}  // namespace bathwright::analysis
