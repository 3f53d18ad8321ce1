// A bath type of this build by its id, compiled or described.
#pragma once

#include <bathwright/described/bath_type_file.hpp>
#include <filesystem>
#include <map>
#include <stdexcept>

#include "built_in_types.hpp"

inline const bathwright::bath::BathType& bath_type_named(const std::string& id) {
  static std::map<std::string, bathwright::bath::BathType> described;
  if (const auto* compiled = built_in_types().find(id)) return *compiled;
  if (const auto known = described.find(id); known != described.end()) return known->second;
  auto read =
      bathwright::described::read_bath_type_file(PROJECT_DIR "/plugins/" + id + "/" + id + ".bathtype.toml");
  if (!read) throw std::runtime_error(bathwright::text(read.problems()));
  return described.emplace(id, *std::move(read)).first->second;
}
