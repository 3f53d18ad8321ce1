#include "elements.hpp"

#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/data/tables.hpp>
#include <vector>

namespace bathwright::matter {
namespace {

std::vector<Element> read_elements() {
  const auto table = data::built_in_table("matter/atomic_weights.csv", {"atomic_number", "atomic_weight"});
  std::vector<Element> all;
  for (std::size_t i = 0; i < table.size(); ++i) {
    const auto row = table[i];
    all.push_back({std::string(row["element"]), static_cast<int>(row.number("atomic_number")),
                   row.number("atomic_weight")});
  }
  return all;
}

std::vector<Ligand> read_ligands() {
  const auto table = data::built_in_table("matter/ligands.csv", {"charge"});
  std::vector<Ligand> all;
  for (std::size_t i = 0; i < table.size(); ++i) {
    all.push_back({std::string(table[i]["token"]), std::string(table[i]["formula"])});
  }
  return all;
}

}  // namespace

std::span<const Element> elements() {
  static const std::vector<Element> all = read_elements();
  return all;
}

std::span<const Ligand> ligands() {
  static const std::vector<Ligand> all = read_ligands();
  return all;
}

const Element* find_element(std::string_view symbol) {
  const auto found = std::ranges::find(elements(), symbol, &Element::symbol);
  return found == elements().end() ? nullptr : &*found;
}

const Ligand* find_ligand(std::string_view token) {
  const auto found = std::ranges::find(ligands(), token, &Ligand::token);
  return found == ligands().end() ? nullptr : &*found;
}

std::string nearest_element(std::string_view symbol) {
  std::string look_alike(symbol);  // l and i are one stroke in many typefaces: Nl is Ni
  std::ranges::replace(look_alike, 'l', 'i');
  if (find_element(look_alike)) return look_alike;
  std::vector<std::string> symbols;
  for (const Element& element : elements()) symbols.push_back(element.symbol);
  return nearest(symbol, symbols).value_or("");
}

std::string nearest_ligand(std::string_view token) {
  std::vector<std::string> tokens;
  for (const Ligand& ligand : ligands()) tokens.push_back(ligand.token);
  return nearest(token, tokens).value_or("");
}

}  // namespace bathwright::matter
