#include "uncertainty_terms.hpp"

#include <bathwright/data/tables.hpp>
#include <cassert>
#include <cmath>
#include <map>
#include <string>

namespace bathwright::analysis {
namespace {

using ToleranceBySize = std::map<double, double>;  // mL

ToleranceBySize class_a(std::string_view kind) {
  const auto table = data::built_in_table("analysis/glassware.csv", {"size_mL", "tolerance_mL"});
  ToleranceBySize tolerances;
  for (std::size_t i = 0; i < table.size(); ++i) {
    if (table[i]["kind"] == kind) tolerances[table[i].number("size_mL")] = table[i].number("tolerance_mL");
  }
  return tolerances;
}

const ToleranceBySize& burettes() {
  static const ToleranceBySize glass = class_a("burette");
  return glass;
}

const ToleranceBySize& pipettes() {
  static const ToleranceBySize glass = class_a("pipette");
  return glass;
}

const ToleranceBySize& flasks() {
  static const ToleranceBySize glass = class_a("flask");
  return glass;
}

const std::map<std::string, double, std::less<>>& terms() {
  static const auto read = [] {
    const auto table = data::built_in_table("analysis/uncertainty_terms.csv", {"value"});
    std::map<std::string, double, std::less<>> all;
    for (std::size_t i = 0; i < table.size(); ++i) all.emplace(table[i]["id"], table[i].number("value"));
    return all;
  }();
  return read;
}

std::optional<double> u_of_smallest(const ToleranceBySize& glass, double volume_mL) {
  constexpr double round_off = 1e-9;  // 10 mL typed and carried in litres may come back as 10.000000000000002
  const auto holds = glass.lower_bound(volume_mL * (1 - round_off));
  if (holds == glass.end()) return std::nullopt;
  return holds->second / std::sqrt(6);
}

}  // namespace

std::optional<double> u_burette_mL(double volume_mL) { return u_of_smallest(burettes(), volume_mL); }
std::optional<double> u_pipette_mL(double volume_mL) { return u_of_smallest(pipettes(), volume_mL); }
std::optional<double> u_flask_mL(double volume_mL) { return u_of_smallest(flasks(), volume_mL); }
double largest_burette_mL() { return burettes().rbegin()->first; }
double largest_pipette_mL() { return pipettes().rbegin()->first; }
double largest_flask_mL() { return flasks().rbegin()->first; }

double uncertainty_term(std::string_view id) {
  const auto found = terms().find(id);
  assert(found != terms().end());
  return found->second;
}

const std::vector<std::string>& titrant_states() {
  static const std::vector<std::string> states = [] {
    constexpr std::string_view prefix = "titrant-";
    std::vector<std::string> all;
    for (const auto& [id, value] : terms())
      if (id.starts_with(prefix)) all.push_back(id.substr(prefix.size()));
    return all;
  }();
  return states;
}

}  // namespace bathwright::analysis
