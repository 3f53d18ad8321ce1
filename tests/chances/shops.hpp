// Shops whose tanks differ from their readings as the stated uncertainties say: what they were told, and
// where they ended.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

namespace shops {

struct Shop {
  double told = 0;      ///< chance of ending inside every window
  bool inside = false;  ///< where its tank really ended
};

/// Each reads a Watts nickel tank (baths/n-07.toml, its windows narrowed at random so that every chance comes
/// up), plans, is told the chance and doses a true tank drawn around the readings: levels, volume, pH, assays
/// and weighing. The truth is drawn, dosed and solved without anything the chance is computed with but the
/// solver. Empty, with `problem` set, where a shop could not be worked out.
std::vector<Shop> open_shops(int count, int samples, std::uint32_t seed, std::string& problem);

/// A tenth of the chances told: how many shops were told it, what they were told on average, how many ended
/// inside and how many standard errors lie between.
struct Row {
  int shops = 0;
  double told = 0, found = 0, standard_errors = 0;
};
std::vector<Row> reliability(const std::vector<Shop>& shops);

}  // namespace shops
