// Scenarios of the trade with figures worked out by hand (figures.csv), each found by the program from files
// a shop would write (files/), by the runs of runs.csv.
#pragma once

#include <nlohmann/json.hpp>
#include <string>
#include <vector>

namespace scenario_table {

/// One figure of a scenario.
struct Figure {
  std::string scenario, key, label, unit;
  double by_hand = 0;
  double tolerance_percent = 0;
  std::string run;    ///< of runs.csv; empty: the program does not say this figure
  std::string where;  ///< in its document: results/quantity=Ni^2+/value
  double times = 1;   ///< what the program's figure is multiplied by to be that of the scenario
  double better =
      0;  ///< by hand where the scenario leaves something out that the program counts; 0: it does not
  std::string note;  ///< why there is no run, or what was left out
  double found = 0;  ///< NaN where it is not there
  [[nodiscard]] double off_percent(double from) const { return 100 * (found / from - 1); }
  [[nodiscard]] bool fits_by_hand() const;
  [[nodiscard]] bool ok() const;  ///< fits the better one; the one by hand where there is none
};

/// Every figure, with what the program finds.
[[nodiscard]] std::vector<Figure> figures();

/// What stands at `where` in a document: keys, numbers of places in a list, or key=value of the one element
/// of a list that has it, with '/' between, "~1" for a '/' of a key; the number of elements behind "#". Null
/// where there is nothing.
[[nodiscard]] nlohmann::json at(const nlohmann::json& document, const std::string& where);

/// The whole as Markdown.
[[nodiscard]] std::string markdown(const std::vector<Figure>& figures);

}  // namespace scenario_table
