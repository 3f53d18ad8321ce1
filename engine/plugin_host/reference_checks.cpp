#include <algorithm>
#include <bathwright/base/nearest.hpp>
#include <bathwright/matter/stock.hpp>
#include <cmath>
#include <set>

#include "type_checks.hpp"

namespace bathwright::plugin_host {
namespace {

using Names = std::vector<std::string>;

template <class Rows, class Name>
Names names_in(const Rows& rows, Name name) {
  Names names;
  for (const auto& row : rows) names.push_back(row.*name);
  return names;
}

void unique(const char* table, const char* field, const Names& names, Report& report) {
  std::set<std::string> seen;
  for (std::size_t i = 0; i < names.size(); ++i)
    if (!names[i].empty() && !seen.insert(names[i]).second)
      report.add({table, i + 1, field}, "'" + names[i] + "' stands here a second time", "each once");
}

void one_of(const Place& place, const std::string& name, const Names& known, const char* kind,
            Report& report) {
  if (name.empty() || std::ranges::find(known, name) != known.end()) return;
  const auto near = nearest(name, known);
  report.add(place, "'" + name + "' is not " + kind, "", near ? "Did you mean '" + *near + "'?" : "");
}

/// Each limit that is given is at least as large as those before it.
bool rising(std::initializer_list<double> limits) {
  double last = -std::numeric_limits<double>::infinity();
  for (const double limit : limits) {
    if (std::isnan(limit)) continue;
    if (limit < last) return false;
    last = limit;
  }
  return true;
}

void check_incompatibilities(const bath::BathType& type, Report& report) {
  const auto& catalogue = matter::StockCatalogue::built_in();
  Names known = catalogue.ids();
  for (const auto& kind : catalogue.incompatibilities()) known.push_back(kind.id);
  for (std::size_t i = 0; i < type.incompatibilities.size(); ++i)
    one_of({"incompatibilities", i + 1, "with"}, type.incompatibilities[i].with, known,
           "a stock chemical or a kind of incompatibility", report);
}

}  // namespace

void check_references(const bath::BathType& type, Report& report) {
  const Names components = names_in(type.components, &bath::Component::species);
  const Names supplies = names_in(type.additions, &bath::AdditionRule::supply);
  Names levels = names_in(type.quantities, &bath::Quantity::id);
  unique("quantities", "id", levels, report);
  Names measured = levels;
  for (const bath::Indicator& i : type.indicators) measured.push_back(i.id);

  unique("sources", "key", names_in(type.sources, &bath::Source::key), report);
  unique("components", "species", components, report);
  unique("own_species", "name", names_in(type.own_species, &speciation::StatedSpecies::name), report);
  unique("own_solids", "name", names_in(type.own_solids, &speciation::StatedSolid::name), report);
  unique("watched_solids", "name", names_in(type.solids, &bath::WatchedSolid::name), report);
  unique("windows", "subject", names_in(type.windows, &bath::Window::subject), report);
  unique("additions", "supply", supplies, report);
  for (std::size_t i = 0; i < type.indicators.size(); ++i)
    if (std::ranges::count(measured, type.indicators[i].id) > 1)
      report.add({"indicators", i + 1, "id"},
                 "'" + type.indicators[i].id + "' is also another indicator or quantity", "an id of its own");

  for (std::size_t i = 0; i < type.quantities.size(); ++i)
    for (const auto& [component, coefficient] : type.quantities[i].counts)
      one_of({"quantities", i + 1, "counts"}, component, components, "a component", report);
  for (const char* word : {"pH", "temperature", "current-density"}) measured.emplace_back(word);
  for (std::size_t i = 0; i < type.windows.size(); ++i) {
    const bath::Window& w = type.windows[i];
    one_of({"windows", i + 1, "subject"}, w.subject, measured,
           "a quantity, an indicator, 'pH', 'temperature' or 'current-density'", report);
    if (!rising({w.stop_low, w.low, w.aim, w.high, w.stop_high}))
      report.add({"windows", i + 1, ""}, "the limits of '" + w.subject + "' are out of order",
                 "stop_low <= low <= aim <= high <= stop_high");
  }
  check_incompatibilities(type, report);
  levels.insert(levels.end(), supplies.begin(), supplies.end());
  for (std::size_t i = 0; i < type.cautions.size(); ++i)
    one_of({"cautions", i + 1, "subject"}, type.cautions[i].subject, levels,
           "a quantity or a supply of the addition rules", report);
}

}  // namespace bathwright::plugin_host
