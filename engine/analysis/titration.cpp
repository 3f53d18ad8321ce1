#include <fmt/format.h>

#include <bathwright/analysis/titration.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>

#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

Problems refusals(const Titration& t) {
  Problems problems;
  const auto refuse = [&](std::string_view key, std::string what, std::string expected, std::string mend) {
    problems.push_back({Fault::bad_input, t.written.where(key, t.where), t.quantity + ": " + std::move(what),
                        std::move(expected), std::move(mend)});
  };
  const auto must_be_positive = [&](std::string_view key, double value, std::string_view called,
                                    const std::string& shown) {
    if (!(value > 0) || !std::isfinite(value))
      refuse(key, fmt::format("{} is {}", called, shown), "more than 0",
             fmt::format("Enter the {} as it was read.", called));
  };
  must_be_positive("sample", t.sample.v, "sample", units::show(t.sample, "mL"));
  must_be_positive("titrant", t.titrant.v, "titrant", units::show(t.titrant));
  must_be_positive("factor", t.factor, "factor of the titrant", units::significant(t.factor));
  must_be_positive("burette", t.burette.v, "burette reading", units::show(t.burette, "mL"));
  if (!(t.blank.v >= 0))
    refuse("blank", "blank is " + units::show(t.blank, "mL"), "0 or more",
           "Enter the blank as it was read, or leave it out.");
  if (!problems.empty()) return problems;

  if (!(t.blank.v < t.burette.v))
    refuse("blank",
           fmt::format("the blank, {}, is not below the reading, {}", units::show(t.blank, "mL"),
                       units::show(t.burette, "mL")),
           "a reading above the blank", "Check which figure is which, or titrate again.");
  if (!u_burette_mL(t.burette.v * 1000))
    refuse("burette", "burette reading is " + units::show(t.burette, "mL"),
           fmt::format("at most {:g} mL, one filling", largest_burette_mL()),
           "Check the unit, or take a smaller sample or a stronger titrant.");
  if (!u_pipette_mL(t.sample.v * 1000))
    refuse("sample", "sample is " + units::show(t.sample, "mL"),
           fmt::format("at most {:g} mL, one pipette", largest_pipette_mL()),
           "Check the unit; state the bath in the flask, not the water it was diluted with.");
  return problems;
}

std::string how_read(const Titration& t, const Method& method) {
  std::string text = fmt::format("{} of {} {}", t.written.text("burette", units::show(t.burette, "mL")),
                                 t.written.text("titrant", units::show(t.titrant)), method.titrant);
  if (t.factor != 1) text += " (factor " + units::significant(t.factor) + ")";
  text += " on " + t.written.text("sample", units::show(t.sample, "mL"));
  if (t.blank.v > 0) text += ", blank " + t.written.text("blank", units::show(t.blank, "mL"));
  return text;
}

}  // namespace

double UncertaintyBudget::relative() const {
  return std::hypot(std::hypot(reading_rel, sample_rel), std::hypot(titrant_rel, sampling_rel));
}

Result<Titrated> work_out(const Titration& t, const Method& method, units::GramsPerMole molar_mass) {
  if (Problems problems = refusals(t); !problems.empty()) return problems;
  const double used_L = t.burette.v - t.blank.v;
  const double value = used_L * t.titrant.v * t.factor * method.mol_per_mol * molar_mass.v / t.sample.v;

  UncertaintyBudget budget;
  const double one_reading_mL = std::hypot(*u_burette_mL(t.burette.v * 1000), method.u_end_point_mL);
  budget.reading_mL = t.blank.v > 0 ? std::sqrt(2) * one_reading_mL : one_reading_mL;
  budget.reading_rel = budget.reading_mL / (used_L * 1000);
  budget.sample_rel = *u_pipette_mL(t.sample.v * 1000) / (t.sample.v * 1000);
  budget.titrant_rel = uncertainty_term("titrant");
  budget.sampling_rel = uncertainty_term("sampling");
  return Titrated{{value}, {value * budget.relative()}, budget, how_read(t, method)};
}

}  // namespace bathwright::analysis
