#include "own_plan.hpp"

#include <bathwright/shopfiles/additions_file.hpp>

#include "wanted.hpp"

namespace bathwright::work {

Result<dosing::AdditionSheet> check_own_plan(const Shop& shop, const bath::TankState& now,
                                             const std::string& plan_path) {
  const auto written = shopfiles::read_additions(plan_path);
  if (!written) return written.problems();
  std::vector<dosing::Wanted> wanted;
  Problems problems;
  for (const auto& one : written->additions) {
    auto read = read_wanted(shop, one.amount, one.chemical, one.where);
    if (read)
      wanted.push_back(read->wanted);
    else
      problems.insert(problems.end(), read.problems().begin(), read.problems().end());
  }
  if (!problems.empty()) return problems;
  return dosing::check_plan(shop.tank, shop.chemistry, now, wanted, written->take_out.v);
}

}  // namespace bathwright::work
