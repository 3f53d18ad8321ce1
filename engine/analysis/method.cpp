#include <algorithm>
#include <bathwright/analysis/method.hpp>
#include <bathwright/data/tables.hpp>

#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

Method method_of(const data::CsvRow& row) {
  Method m;
  m.id = row["id"];
  m.aliases = row.list("aliases");
  m.analyte = row["analyte"];
  m.titrant = row["titrant"];
  m.mol_per_mol = row.number("mol_per_mol");
  m.usual_sample = {row.number("sample_mL") / 1000};
  m.usual_titrant = {row.number("titrant_mol_per_L")};
  m.indicator = row["indicator"];
  m.end_point = row["end_point"];
  m.reaction = row["reaction"];
  m.interferences = row["interferences"];
  m.source = row["source"];
  m.u_end_point_mL = uncertainty_term("end-point-" + std::string(row["end_point_class"]));
  m.u_method_rel = row.number("repeatability_rel");
  return m;
}

}  // namespace

const std::vector<Method>& methods() {
  static const std::vector<Method> all = [] {
    const auto table = data::built_in_table(
        "analysis/titrations.csv", {"mol_per_mol", "sample_mL", "titrant_mol_per_L", "repeatability_rel"});
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

std::vector<std::string> methods_for(std::string_view quantity) {
  std::vector<std::string> ids;
  for (const Method& m : methods()) {
    if (m.analyte == quantity) ids.push_back(m.id);
  }
  return ids;
}

}  // namespace bathwright::analysis
