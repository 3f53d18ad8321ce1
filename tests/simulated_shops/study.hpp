// What learning finds in simulated shops against their truth.
#pragma once

#include <bathwright/learning/learn.hpp>
#include <functional>

#include "shop.hpp"

namespace simulated_shops {

/// The tank of a kind of shop as its files have it.
struct Bench {
  bathwright::bath::Tank tank;
  bathwright::bath::Chemistry chemistry;
};
using BenchOf = std::function<const Bench&(const Kind&)>;

/// One figure over many shops.
struct Row {
  std::string label;
  int shops = 0, covered = 0;     ///< truth within the 90 % interval
  double bias = 0;                ///< mean of ln(learned/true)
  double rms = 0, rms_prior = 0;  ///< of ln(learned/true), ln(stated/true)
  double half_width = 0;          ///< median of half the 90 % interval, relative
};

struct Study {
  std::vector<Row> rows;
  double false_suspects = 0;                               ///< per log, of a log without a fault
  double rms_by_policy = 0, rms_learned = 0, seconds = 0;  ///< mean per log
  int failed = 0;
};
Study study(const Kind& kind, const Bench& bench, int weeks, int shops, unsigned seed, double wide = 1);

/// Whether a planted fault is named: right kind, right thing, within the analyses around it.
struct Named {
  int planted = 0, named = 0, otherwise = 0;  ///< otherwise: something was named there, but another thing
  double share = 0;                           ///< of additions: mean size, of what the tank holds
};
Named named(const Kind& kind, const Bench& bench, int weeks, int shops, unsigned seed, Fault fault);

}  // namespace simulated_shops
