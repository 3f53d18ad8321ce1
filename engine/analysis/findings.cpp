#include "findings.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/analysis/titration.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/bath/quantity_meant.hpp>
#include <bathwright/matter/concentration.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "titrants.hpp"
#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

using units::show;

std::string did_you_mean(std::string_view word, const std::vector<std::string>& candidates) {
  const auto close = nearest(word, candidates);
  return close ? fmt::format("Did you mean {}?", *close) : "";
}

// The quantity of this id, if a person can find it: what counts protons follows from the pH.
Result<const bath::Quantity*> quantity_to_find(const bath::BathType& type, const std::string& id,
                                               const std::string& where) {
  const bath::Quantity* quantity = type.quantity(id);
  if (!quantity) {
    std::vector<std::string> ids;
    for (const bath::Quantity& q : type.quantities) ids.push_back(q.id);
    const auto meant = bath::quantity_meant(type, id);
    return Problem{Fault::bad_input, where, fmt::format("\"{}\" is not a quantity of {}", id, type.name),
                   fmt::format("one of {}", fmt::join(ids, ", ")),
                   meant ? fmt::format("Did you mean {}?", *meant) : ""};
  }
  for (const bath::Component& component : type.components) {
    if (component.found_by == bath::FoundBy::pH && quantity->counts.contains(component.species))
      return Problem{Fault::bad_input, where, id + " follows from the pH in this bath type", "",
                     "Leave it out and give the pH."};
  }
  return quantity;
}

/// Free and total are told apart by what a quantity counts: the total a single component, the free what its
/// complexes leave of it.
bool wrong_share(const Method& method, const bath::Quantity& quantity, const bath::BathType& type) {
  const auto is_free = [](const bath::Quantity& q) { return q.counts.size() > 1; };
  if (method.share == Share::total) return is_free(quantity);
  return method.share == Share::free && !is_free(quantity) &&
         std::ranges::any_of(type.quantities, [&](const bath::Quantity& other) {
           return is_free(other) && quantity_per_analyte(method, other);
         });
}

Result<const Method*> method_that_finds(const bath::Quantity& quantity, const bath::BathType& type,
                                        const std::string& id, const std::string& where) {
  const auto fitting = methods_for(quantity);
  const std::string mend = fitting.empty()
                               ? "No titration in the table finds it: state it as a concentration found."
                               : fmt::format("Use {}.", fmt::join(fitting, " or "));
  const Method* known = method(id);
  if (!known) {
    std::vector<std::string> ids;
    for (const Method& m : methods()) ids.push_back(m.id);
    return Problem{Fault::bad_input, where, fmt::format("there is no method \"{}\"", id),
                   "a method for " + quantity.id, nearest(id, ids) ? did_you_mean(id, ids) : mend};
  }
  if (!quantity_per_analyte(*known, quantity))
    return Problem{Fault::bad_input, where, fmt::format("{} does not find {}", known->id, quantity.id),
                   "a method for " + quantity.id, mend};
  if (wrong_share(*known, quantity, type))
    return Problem{Fault::bad_input, where,
                   fmt::format("{} finds the {} amount, {} is the {}", known->id,
                               known->share == Share::free ? "free" : "total", quantity.id,
                               known->share == Share::free ? "total" : "free"),
                   "a method and a quantity that mean the same",
                   "Name the other quantity or the other method."};
  return known;
}

/// A result that its own uncertainty could make from nothing: within 3 of them of 0 (common practice).
void note_below_detection(const Titrated& result, const std::string& quantity,
                          std::vector<std::string>& notes) {
  const units::GramsPerLitre least{3 * result.standard_uncertainty.v};
  if (result.value < least)
    notes.push_back(
        fmt::format("{}: {} is below what the method tells from nothing, {} (3 standard uncertainties)",
                    quantity, show(result.value), show(least)));
}

Result<Finding> finding_of(Titration& titration, const Titrants& titrants, const bath::BathType& type,
                           std::vector<std::string>& notes) {
  const auto quantity = quantity_to_find(type, titration.quantity, titration.where);
  if (!quantity) return quantity.problems();
  const auto chosen = method_that_finds(**quantity, type, titration.method,
                                        titration.written.where("method", titration.where));
  if (!chosen) return chosen.problems();
  const Method& method = **chosen;
  auto as_done = titrants.filled_in(titration, method);
  if (!as_done) return as_done.problems();
  titration = *std::move(as_done);
  const auto result = work_out(titration, method,
                               *quantity_per_analyte(method, **quantity) * (*quantity)->formula.molar_mass());
  if (!result) return result.problems();
  note_below_detection(*result, titration.quantity, notes);
  return Finding{*quantity,
                 result->value.v,
                 result->standard_uncertainty.v,
                 Origin::titration,
                 result->how,
                 titration.where,
                 method.interferences,
                 titration.titrant_lot,
                 titration.titrated_by};
}

Result<Finding> finding_of(const Found& found, const bath::BathType& type,
                           const std::optional<units::KilogramsPerLitre>& density,
                           std::vector<std::string>& notes) {
  const auto quantity = quantity_to_find(type, found.quantity, found.where);
  if (!quantity) return quantity.problems();
  const matter::ConcentrationBasis basis{.molar_mass = (*quantity)->formula.molar_mass(),
                                         .solution_density = density};
  const auto in_grams_per_litre = [&](const units::Concentration& c,
                                      std::string_view what) -> Result<double> {
    const auto converted = matter::grams_per_litre(c, basis, found.where);
    if (!converted) return converted.problems();
    if (!(converted->v >= 0) || !std::isfinite(converted->v))
      return Problem{Fault::bad_input, found.where,
                     fmt::format("{}: {} is {}", found.quantity, what, show(c)), "0 or more",
                     "Enter it as it was reported."};
    return converted->v;
  };
  const auto value = in_grams_per_litre(found.value, "the concentration");
  if (!value) return value.problems();
  Finding finding{*quantity, *value, 0, Origin::found, show(found.value) + " found", found.where};
  const Method* by = nullptr;
  if (!found.method.empty()) {
    const auto chosen = method_that_finds(**quantity, type, found.method, found.method_where);
    if (!chosen) return chosen.problems();
    by = *chosen;
    finding.how += " by " + by->id;
    finding.interferences = by->interferences;
  }
  if (found.uncertainty) {
    const auto u = in_grams_per_litre(*found.uncertainty, "its uncertainty");
    if (!u) return u.problems();
    finding.u_g_per_L = *u;
  } else {
    const double relative = by ? by->u_method_rel : uncertainty_term("found");
    finding.u_g_per_L = relative * *value;
    notes.push_back(fmt::format("{} was found without an uncertainty: {:g} % taken ({})", found.quantity,
                                100 * relative, by ? "repeatability of the method" : "common practice"));
  }
  return finding;
}

/// Those of `texts` that say something, each once.
std::string joined(const std::vector<Finding>& findings, std::string Finding::*text) {
  std::vector<std::string_view> different;
  for (const Finding& f : findings) {
    if (!(f.*text).empty() && std::ranges::count(different, f.*text) == 0) different.push_back(f.*text);
  }
  return fmt::format("{}", fmt::join(different, "; "));
}

Finding mean_of(const std::vector<Finding>& same) {
  const auto n = static_cast<double>(same.size());
  Finding mean = same.front();
  double sum = 0, sum_of_u2 = 0, sum_of_squares = 0;
  std::vector<std::string_view> hows;
  for (const Finding& f : same) {
    sum += f.g_per_L;
    sum_of_u2 += f.u_g_per_L * f.u_g_per_L;
    mean.from = std::max(mean.from, f.from);
    hows.push_back(f.how);
  }
  mean.g_per_L = sum / n;
  for (const Finding& f : same) sum_of_squares += std::pow(f.g_per_L - mean.g_per_L, 2);
  mean.u_g_per_L = std::sqrt(std::max(sum_of_u2 / n, sum_of_squares / (n - 1)));
  mean.how = fmt::format("mean of {}: {}", same.size(), fmt::join(hows, "; "));
  for (auto text : {&Finding::interferences, &Finding::titrant_lot, &Finding::titrated_by})
    mean.*text = joined(same, text);
  return mean;
}

}  // namespace

bool disagree(double a, double u_a, double b, double u_b) {
  return std::abs(a - b) > 3 * std::hypot(u_a, u_b);
}

Result<Findings> findings_of(const Readings& readings, const bath::BathType& type) {
  Findings findings;
  Problems problems;
  const auto keep = [&](const Result<Finding>& finding) {
    if (finding)
      findings.all.push_back(*finding);
    else
      problems.insert(problems.end(), finding.problems().begin(), finding.problems().end());
  };
  const auto titrants = Titrants::of(readings.standardised);
  if (!titrants) return titrants.problems();
  findings.notes = titrants->notes();
  findings.titrations = readings.titrations;
  for (Titration& titration : findings.titrations)
    keep(finding_of(titration, *titrants, type, findings.notes));
  for (const Found& found : readings.found) keep(finding_of(found, type, readings.density, findings.notes));
  if (!problems.empty()) return problems;
  return findings;
}

std::vector<Finding> united(const std::vector<Finding>& findings, std::vector<Suspect>& suspects) {
  std::map<std::string, std::vector<Finding>> by_quantity;
  for (const Finding& f : findings) by_quantity[f.quantity->id].push_back(f);
  std::vector<Finding> one_each;
  for (const auto& [quantity, same] : by_quantity) {
    if (same.size() == 1) {
      one_each.push_back(same.front());
      continue;
    }
    const auto [low, high] = std::ranges::minmax_element(same, {}, &Finding::g_per_L);
    if (disagree(low->g_per_L, low->u_g_per_L, high->g_per_L, high->u_g_per_L)) {
      suspects.push_back(
          {quantity,
           fmt::format(
               "results from {} to {} differ by more than 3 standard uncertainties; their mean is used",
               show(units::GramsPerLitre{low->g_per_L}), show(units::GramsPerLitre{high->g_per_L})),
           "Titrate a third time and leave the wrong one out."});
    }
    one_each.push_back(mean_of(same));
  }
  return one_each;
}

}  // namespace bathwright::analysis
