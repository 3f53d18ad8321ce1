// Sorts solutes into the kinds that a model cannot tell apart.
#pragma once

#include <bathwright/activity/model.hpp>
#include <map>
#include <utility>

namespace bathwright::activity {

struct Kinds {
  std::vector<std::uint16_t> of;       ///< per solute
  std::vector<std::uint32_t> example;  ///< a solute of each kind
  std::vector<int> charge;             ///< of each kind

  [[nodiscard]] std::size_t size() const { return charge.size(); }
};

/// One kind for each different key, in the order of the keys.
///   key  per solute: its charge and whatever else the model knows of it
template <class Key>
Kinds kinds_by(std::span<const Solute> solutes, const std::vector<Key>& key) {
  std::map<Key, std::vector<std::uint32_t>> groups;
  for (std::uint32_t i = 0; i < solutes.size(); ++i) groups[key[i]].push_back(i);
  Kinds kinds;
  kinds.of.resize(solutes.size());
  for (const auto& [unused, members] : groups) {
    for (const std::uint32_t i : members) kinds.of[i] = static_cast<std::uint16_t>(kinds.size());
    kinds.example.push_back(members.front());
    kinds.charge.push_back(solutes[members.front()].charge);
  }
  return kinds;
}

}  // namespace bathwright::activity
