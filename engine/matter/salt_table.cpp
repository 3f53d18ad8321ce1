#include "salt_table.hpp"

#include <bathwright/data/tables.hpp>
#include <cassert>
#include <vector>

namespace bathwright::matter {
namespace {

template <class Value>
struct Entry {
  Formula substance;
  Value value;
};

Formula formula_of(const data::CsvRow& row) {
  auto formula = Formula::parse(row["formula"], row.where());
  assert(formula);  // a test reads every built-in table
  return *std::move(formula);
}

std::vector<Entry<SaltCoefficients>> read_salts() {
  const auto table =
      data::built_in_table("matter/laliberte_density.csv",
                           {"c0", "c1", "c2", "c3", "c4", "lowest_C", "highest_C", "highest_mass_fraction"});
  std::vector<Entry<SaltCoefficients>> salts;
  for (std::size_t i = 0; i < table.size(); ++i) {
    const auto row = table[i];
    salts.push_back(
        {formula_of(row),
         {row.number("c0"), row.number("c1"), row.number("c2"), row.number("c3"), row.number("c4"),
          row.number("lowest_C"), row.number("highest_C"), row.number("highest_mass_fraction")}});
  }
  return salts;
}

std::vector<Entry<double>> read_volumes() {
  const auto table = data::built_in_table("matter/apparent_volume.csv", {"cm3_per_mol"});
  std::vector<Entry<double>> volumes;
  for (std::size_t i = 0; i < table.size(); ++i) {
    volumes.push_back({formula_of(table[i]), table[i].number("cm3_per_mol")});
  }
  return volumes;
}

template <class Value>
const Value* find(const std::vector<Entry<Value>>& entries, const Formula& substance) {
  for (const Entry<Value>& entry : entries) {
    if (same_composition(entry.substance, substance)) return &entry.value;
  }
  return nullptr;
}

}  // namespace

const SaltCoefficients* find_salt(const Formula& substance) {
  static const auto salts = read_salts();
  return find(salts, substance);
}

std::optional<double> apparent_volume_cm3_per_mol(const Formula& substance) {
  static const auto volumes = read_volumes();
  const double* found = find(volumes, substance);
  return found ? std::optional(*found) : std::nullopt;
}

}  // namespace bathwright::matter
