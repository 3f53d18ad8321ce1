// The demonstration tank of a kind of shop with its real bath type.
#pragma once

#include <bathwright/described/bath_type_file.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <cstdio>
#include <cstdlib>
#include <filesystem>

#include "../support/built_in_types.hpp"
#include "study.hpp"

namespace simulated_shops {

/// Ends the program where one of the project's own files cannot be used.
template <class T>
T must_have(bathwright::Result<T> result) {
  if (result) return *std::move(result);
  std::fputs((bathwright::text(result.problems()) + "\n").c_str(), stderr);
  std::exit(1);
}

inline bathwright::bath::BathType bath_type_of(const Kind& kind) {
  const std::string described =
      PROJECT_DIR "/plugins/" + kind.bath_type + "/" + kind.bath_type + ".bathtype.toml";
  if (std::filesystem::exists(described))
    return must_have(bathwright::described::read_bath_type_file(described));
  if (const auto* type = built_in_types().find(kind.bath_type)) return *type;
  std::fprintf(stderr, "%s is not in this build\n", kind.bath_type.c_str());
  std::exit(1);
}

inline Bench bench_of(const Kind& kind) {
  auto tank = must_have(bathwright::shopfiles::read_tank(PROJECT_DIR "/baths/" + kind.tank_file,
                                                         bathwright::matter::StockCatalogue::built_in()));
  auto chemistry = must_have(
      bathwright::bath::Chemistry::prepare(bath_type_of(kind), tank.temperature, tank.idle_temperature));
  return {std::move(tank), std::move(chemistry)};
}

}  // namespace simulated_shops
