#include <bathwright/shopfiles/analyses_csv.hpp>
#include <cmath>
#include <set>

#include "promises.hpp"

using namespace bathwright;

namespace {

const shopfiles::AnalysisColumns columns{.decimal_sign = ',',
                                         .dates = shopfiles::DateOrder::day_month_year,
                                         .zone = "Europe/Berlin",
                                         .tank = "Tank",
                                         .sampled = "Sampled",
                                         .pH = "pH",
                                         .temperature = shopfiles::UnitColumn{"Temp", "degC"},
                                         .volume = shopfiles::UnitColumn{"Volume", "L"},
                                         .quantities = {{"Ni g/L", "Ni^2+", "g/L"}, {"Cl", "Cl^-", "mol/L"}}};

fuzz::BrokenPromise in_range(const shopfiles::ImportedAnalysis& analysis) {
  if (analysis.tank.empty() || analysis.tank.size() > 200) return "a tank without a name that fits";
  if (analysis.levels.empty() && !analysis.pH && !analysis.temperature && !analysis.volume)
    return "an analysis of nothing";
  for (const shopfiles::ImportedLevel& level : analysis.levels)
    if (!(level.value.v >= 0) || !std::isfinite(level.value.v)) return "a level that cannot be";
  if (analysis.pH && !(*analysis.pH >= -2 && *analysis.pH <= 16)) return "a pH that cannot be";
  if (analysis.volume && !(analysis.volume->v > 0)) return "a volume that cannot be";
  return {};
}

}  // namespace

fuzz::BrokenPromise fuzz::analyses_csv(std::string_view input) {
  const auto imported = shopfiles::import_analyses_text("file.csv", input, columns);
  if (!imported) return in_words(imported.problems(), "file.csv", input);
  std::set<std::size_t> lines;
  for (const auto& analysis : imported->analyses) {
    lines.insert(analysis.line);
    if (auto broken = in_range(analysis); !broken.empty()) return broken;
  }
  for (const auto& row : imported->rejected) {
    if (!lines.insert(row.line).second) return "a row both taken and rejected";
    if (input.find(row.written) == input.npos) return "a rejected row that is not in the file";
    Problems problems;
    for (const auto& reason : row.reasons) problems.push_back(reason.problem);
    if (auto broken = in_words(problems, "file.csv:", input); !broken.empty()) return broken;
  }
  for (const auto& value : imported->repeated) lines.insert(value.line);
  if (lines.size() != imported->rows) return "a row that is lost";
  return {};
}
