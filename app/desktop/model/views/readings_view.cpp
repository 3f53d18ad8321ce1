#include <algorithm>
#include <bathwright/sheets/names.hpp>
#include <bathwright/units/show.hpp>

#include "views.hpp"
#include "words.hpp"

namespace bathwright::desktop {
namespace {

using sheets::figure;
using sheets::pretty;

/// The line a problem of the typed readings names; 0 where it names none.
int line_of(const Problem& problem) {
  const std::size_t colon = problem.where.find(':');
  return colon == std::string::npos ? 0 : std::atoi(problem.where.c_str() + colon + 1);
}

/// The row whose block holds a line; -1 for none.
int row_at(int line, const std::vector<int>& line_of_row) {
  int found = -1;
  for (std::size_t row = 0; row < line_of_row.size(); ++row)
    if (line_of_row[row] > 0 && line_of_row[row] <= line) found = static_cast<int>(row);
  return found;
}

std::string without_place(const Problem& problem) {
  Problem told = problem;
  const std::size_t last = problem.where.rfind(' ');
  told.where = last == std::string::npos ? "" : problem.where.substr(last + 1);
  return told.text();
}

/// "edta nickel" of the id "edta-nickel".
std::string method_words(std::string id) {
  if (id.empty()) return "a concentration";
  std::ranges::replace(id, '-', ' ');
  return id;
}

}  // namespace

ReadingsView readings_view(const Draft& draft, const std::vector<int>& line_of_row, const Worked* worked,
                           const Units& units) {
  ReadingsView view;
  view.sampled = draft.sampled.substr(0, draft.sampled.rfind(':'));
  std::ranges::replace(view.sampled, 'T', ' ');
  view.volume = draft.volume;
  view.temperature = draft.temperature;
  view.pH = draft.pH;
  for (const DraftRow& row : draft.rows) {
    ReadingRow shown;
    shown.quantity = pretty(row.quantity);
    for (const std::string& method : row.methods) shown.methods.push_back(method_words(method));
    shown.method = row.method;
    shown.sample = row.sample;
    shown.titrant = row.titrant;
    shown.burette = row.burette;
    shown.value = row.value;
    shown.is_value = row.is_value();
    shown.value_unit = "g/L";
    if (const bath::Quantity* quantity =
            worked && worked->shop ? worked->shop->type().quantity(row.quantity) : nullptr)
      shown.value_unit = units.typed(*quantity);
    view.rows.push_back(std::move(shown));
  }
  if (!worked) return view;
  if (worked->analysed) {
    const sheets::Medium in = medium_of(*worked, units);
    for (std::size_t i = 0; i < draft.rows.size(); ++i) {
      if (draft.rows[i].is_empty()) continue;
      for (const auto& level : worked->analysed->analysis.results)
        if (const bath::Quantity* quantity = worked->shop->type().quantity(level.quantity);
            quantity && level.quantity == draft.rows[i].quantity) {
          const LevelUnit unit = units.level(*quantity, in);
          view.rows[i].result = figure(unit.of(level.value.v)) + " ± " +
                                units::significant(unit.of(level.standard_uncertainty.v), 2) + " " +
                                unit.symbol;
        }
    }
  }
  for (const Problem& problem : worked->problems) {
    const int row = row_at(line_of(problem), line_of_row);
    if (row >= 0)
      view.rows[static_cast<std::size_t>(row)].fault = without_place(problem);
    else
      view.faults.push_back(problem.text());
  }
  if (worked->analysed) {
    for (const auto& suspect : worked->analysed->analysis.suspects)
      view.suspects.push_back(pretty_words(suspect.what + ": " + suspect.reason + " " + suspect.try_this));
    for (const std::string& change : worked->analysed->changed_since) view.suspects.push_back(change);
  }
  return view;
}

}  // namespace bathwright::desktop
