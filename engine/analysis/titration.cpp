#include <fmt/format.h>

#include <bathwright/analysis/titration.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <random>

#include "uncertainty_terms.hpp"

namespace bathwright::analysis {
namespace {

using units::show;

constexpr double mL = 1000;  // of a litre

/// The figures of one titration; one flask's or, where the method has two, the second's beside them.
struct Figures {
  double burette_L, second_L, blank_L, titrant_mol_per_L;
  double excess_L, excess_mol_per_L;
  double weighed_g;
  double sample_L, flask_L, aliquot_L, second_sample_L, second_aliquot_L;
  double sampling = 1;  ///< concentration in the flask over that in the tank
};

Figures figures_of(const Titration& t) {
  return {.burette_L = t.burette.v,
          .second_L = t.second_burette.v,
          .blank_L = t.blank.v,
          .titrant_mol_per_L = t.titrant.v * t.factor,
          .excess_L = t.excess.v,
          .excess_mol_per_L = t.excess_strength.v,
          .weighed_g = t.weighed.v * 1000,
          .sample_L = t.sample.v,
          .flask_L = t.diluted_to.v,
          .aliquot_L = t.aliquot.v,
          .second_sample_L = t.sample.v,
          .second_aliquot_L = t.aliquot.v};
}

bool diluted(const Titration& t) { return t.diluted_to.v > 0; }

double weighed_molar_mass(const Method& method) {
  return matter::Formula::parse(method.titrant)->molar_mass().v;  // a test reads every formula of the table
}

/// mol of analyte per litre of bath.
double mol_per_L(const Figures& x, const Method& m) {
  const auto bath_L = [&](double sample, double aliquot) {
    return x.flask_L > 0 ? sample * aliquot / x.flask_L : sample;
  };
  const double first_L = bath_L(x.sample_L, x.aliquot_L);
  const double first_mol = (x.burette_L - x.blank_L) * x.titrant_mol_per_L;
  double per_litre = 0;
  switch (m.kind) {
    case Kind::direct:
      per_litre = first_mol / first_L;
      break;
    case Kind::back:
      per_litre = (x.excess_L * x.excess_mol_per_L - m.reagent_per_back * first_mol) / first_L;
      break;
    case Kind::difference: {
      const double second_L = m.two_flasks ? bath_L(x.second_sample_L, x.second_aliquot_L) : first_L;
      const double second_mol = (x.second_L - x.blank_L) * x.titrant_mol_per_L;
      per_litre = m.times_burette * first_mol / first_L + m.times_second * second_mol / second_L;
      break;
    }
    case Kind::weighed:
      per_litre = x.weighed_g / weighed_molar_mass(m) / first_L;
      break;
    case Kind::stated:
      break;
  }
  return per_litre * m.mol_per_mol * x.sampling;
}

class Refusals {
 public:
  Refusals(const Titration& titration, const Method& method) : t_(titration), method_(method) {}

  Problems all() {
    if (method_.kind == Kind::stated) {
      refuse("method", method_.id + " has no burette or balance: its result is stated as it is",
             "a concentration found",
             fmt::format("Write it under [[found]] with method = \"{}\".", method_.id));
      return problems_;
    }
    each_figure();
    if (!problems_.empty()) return problems_;
    fits_its_glass();
    return problems_;
  }

 private:
  void refuse(std::string_view key, std::string what, std::string expected, std::string mend) {
    problems_.push_back({Fault::bad_input, t_.written.where(key, t_.where),
                         t_.quantity + ": " + std::move(what), std::move(expected), std::move(mend)});
  }
  void positive(std::string_view key, double value, std::string_view called, const std::string& shown) {
    if (!(value > 0) || !std::isfinite(value))
      refuse(key, fmt::format("{} is {}", called, shown), "more than 0",
             fmt::format("Enter the {} as it was read.", called));
  }
  void used_only_by(bool used, std::string_view key, double value, std::string_view called,
                    const std::string& shown) {
    if (used)
      positive(key, value, called, shown);
    else if (value != 0)
      refuse(key, fmt::format("{} does not use a {}", method_.id, called), "no such figure",
             "Leave it out, or name the method that was used.");
  }

  void each_figure() {
    const bool titrated = method_.kind != Kind::weighed;
    positive("sample", t_.sample.v, "sample", show(t_.sample, "mL"));
    used_only_by(titrated, "titrant", t_.titrant.v, "titrant", show(t_.titrant));
    positive("factor", t_.factor, "factor of the titrant", units::significant(t_.factor));
    used_only_by(titrated, "burette", t_.burette.v, "burette reading", show(t_.burette, "mL"));
    if (!(t_.blank.v >= 0))
      refuse("blank", "blank is " + show(t_.blank, "mL"), "0 or more",
             "Enter the blank as it was read, or leave it out.");
    const bool back = method_.kind == Kind::back;
    used_only_by(back, "excess", t_.excess.v, "volume of reagent added", show(t_.excess, "mL"));
    used_only_by(back, "excess_strength", t_.excess_strength.v, "strength of the reagent added",
                 show(t_.excess_strength));
    used_only_by(method_.kind == Kind::difference, "second_burette", t_.second_burette.v,
                 "second burette reading", show(t_.second_burette, "mL"));
    used_only_by(!titrated, "weighed", t_.weighed.v, "mass of " + method_.titrant, show(t_.weighed, "g"));
    if (t_.diluted_to.v != 0 || t_.aliquot.v != 0) {
      positive("diluted_to", t_.diluted_to.v, "flask the sample was made up in", show(t_.diluted_to, "mL"));
      positive("aliquot", t_.aliquot.v, "aliquot", show(t_.aliquot, "mL"));
    }
  }

  void fits(std::string_view key, units::Litres volume, std::string_view called,
            std::optional<double> (*u)(double), double largest_mL, std::string_view glass,
            std::string_view mend) {
    if (volume.v > 0 && !u(volume.v * mL))
      refuse(key, fmt::format("{} is {}", called, show(volume, "mL")),
             fmt::format("at most {:g} mL, {}", largest_mL, glass), std::string(mend));
  }

  void fits_its_glass() {
    for (const auto& [key, reading] :
         {std::pair("burette", t_.burette), std::pair("second_burette", t_.second_burette)}) {
      const bool read = reading.v > 0;
      if (read && !(t_.blank.v < reading.v))
        refuse("blank",
               fmt::format("the blank, {}, is not below the reading, {}", show(t_.blank, "mL"),
                           show(reading, "mL")),
               "a reading above the blank", "Check which figure is which, or titrate again.");
      fits(key, reading, "burette reading", u_burette_mL, largest_burette_mL(), "one filling",
           "Check the unit, or take a smaller sample or a stronger titrant.");
    }
    fits("sample", t_.sample, "sample", u_pipette_mL, largest_pipette_mL(), "one pipette",
         "Check the unit; state the bath in the flask, not the water it was diluted with.");
    fits("aliquot", t_.aliquot, "aliquot", u_pipette_mL, largest_pipette_mL(), "one pipette",
         "Check the unit.");
    fits("excess", t_.excess, "volume of reagent added", u_pipette_mL, largest_pipette_mL(), "one pipette",
         "Check the unit, or take a smaller sample.");
    fits("diluted_to", t_.diluted_to, "flask the sample was made up in", u_flask_mL, largest_flask_mL(),
         "one flask", "Check the unit.");
    if (diluted(t_) && t_.diluted_to < std::max(t_.sample, t_.aliquot))
      refuse("diluted_to",
             fmt::format("{} of sample and {} of aliquot do not fit a flask of {}", show(t_.sample, "mL"),
                         show(t_.aliquot, "mL"), show(t_.diluted_to, "mL")),
             "a flask larger than both", "Check which figure is which.");
    const double found = problems_.empty() ? mol_per_L(figures_of(t_), method_) : 1;
    if (found > 0) return;
    const bool difference = method_.kind == Kind::difference;
    refuse("burette",
           fmt::format("{} leave {} of it",
                       difference
                           ? fmt::format("{} and {}", show(t_.burette, "mL"), show(t_.second_burette, "mL"))
                           : "the readings",
                       found < 0 ? "less than nothing" : "nothing"),
           "a result above 0",
           difference
               ? "Check which figure is which; if both are right, there is less than the method can tell."
               : "Check which figure is which, and the strengths.");
  }

  const Titration& t_;
  const Method& method_;
  Problems problems_;
};

std::string how_read(const Titration& t, const Method& method) {
  const auto written = [&](std::string_view key, units::Litres volume) {
    return t.written.text(key, show(volume, "mL"));
  };
  std::string text;
  if (method.kind == Kind::weighed) {
    text = t.written.text("weighed", show(t.weighed, "g")) + " of " + method.titrant;
  } else {
    if (method.kind == Kind::back)
      text = fmt::format("{} of {} {} less ", written("excess", t.excess),
                         t.written.text("excess_strength", show(t.excess_strength)), method.titrant);
    text += written("burette", t.burette);
    if (method.kind == Kind::difference) text += " and " + written("second_burette", t.second_burette);
    text += fmt::format(" of {}{} {}", t.written.text("titrant", show(t.titrant)),
                        t.equivalents > 0 ? " = " + show(t.titrant) : "",
                        method.kind == Kind::back ? method.back_titrant : method.titrant);
  }
  if (t.factor != 1) text += " (factor " + units::significant(t.factor) + ")";
  text += " on " + written(diluted(t) ? "aliquot" : "sample", diluted(t) ? t.aliquot : t.sample);
  if (diluted(t))
    text +=
        fmt::format(" of {} diluted to {}", written("sample", t.sample), written("diluted_to", t.diluted_to));
  if (t.blank.v > 0) text += ", blank " + written("blank", t.blank);
  return text;
}

double square(double x) { return x * x; }

double u_strength(double stated_rel) { return stated_rel > 0 ? stated_rel : uncertainty_term("titrant"); }

/// First-order terms. Volumes of back titration are counted in mL of reagent.
UncertaintyBudget budget_of(const Titration& t, const Method& m) {
  const double u_titrant = u_strength(t.u_titrant_rel);
  const auto pipette_rel = [](units::Litres volume) {
    return volume.v > 0 ? *u_pipette_mL(volume.v * mL) / (volume.v * mL) : 0;
  };
  const auto reading_mL = [&](units::Litres reading) {
    return std::hypot(*u_burette_mL(reading.v * mL), m.u_end_point_mL);
  };

  UncertaintyBudget budget;
  budget.sampling_rel = uncertainty_term("sampling");
  // What every reading shares, and the last pipetting, which two flasks have each on its own.
  const double last_rel = pipette_rel(diluted(t) ? t.aliquot : t.sample);
  const double shared_rel =
      diluted(t) ? std::hypot(pipette_rel(t.sample), *u_flask_mL(t.diluted_to.v * mL) / (t.diluted_to.v * mL))
                 : 0;
  budget.sample_rel = std::hypot(shared_rel, last_rel);
  if (m.kind == Kind::weighed) {
    budget.reading_rel = uncertainty_term("balance") / (t.weighed.v * 1000);
    budget.method_rel = m.u_method_rel;
    return budget;
  }

  const double used_mL = (t.burette.v - t.blank.v) * mL;
  const double one_mL = reading_mL(t.burette);
  double net_mL = used_mL;
  double u2 = square(one_mL), blank_weight = 1, titrant_rel = u_titrant;
  if (m.kind == Kind::difference) {
    const double second_mL = (t.second_burette.v - t.blank.v) * mL;
    net_mL = m.times_burette * used_mL + m.times_second * second_mL;
    u2 = square(m.times_burette * one_mL) + square(m.times_second * reading_mL(t.second_burette));
    blank_weight = m.times_burette + m.times_second;
    if (m.two_flasks)
      budget.sample_rel = std::hypot(
          shared_rel, last_rel * std::hypot(m.times_burette * used_mL, m.times_second * second_mL) / net_mL);
  } else if (m.kind == Kind::back) {
    const double reagent_per_mL = m.reagent_per_back * t.titrant.v * t.factor / t.excess_strength.v;
    const double excess_mL = t.excess.v * mL;
    net_mL = excess_mL - reagent_per_mL * used_mL;
    u2 = square(*u_pipette_mL(excess_mL)) + square(reagent_per_mL * one_mL);
    blank_weight = reagent_per_mL;
    titrant_rel =
        std::hypot(u_strength(t.u_excess_rel) * excess_mL, u_titrant * reagent_per_mL * used_mL) / net_mL;
  }
  if (t.blank.v > 0) u2 += square(blank_weight * one_mL);
  budget.reading_mL = std::sqrt(u2);
  budget.reading_rel = budget.reading_mL / net_mL;
  budget.titrant_rel = titrant_rel;
  return budget;
}

}  // namespace

double UncertaintyBudget::relative() const {
  return std::hypot(std::hypot(reading_rel, sample_rel, method_rel), titrant_rel, sampling_rel);
}

double monte_carlo_uncertainty(const Titration& t, const Method& m, units::GramsPerMole molar_mass, int draws,
                               std::uint32_t seed) {
  std::mt19937 random(seed);
  std::normal_distribution<double> normal;
  std::uniform_real_distribution<double> uniform(-0.5, 0.5);
  // The sum of two uniform numbers is triangular, with the half width of class A glass: u * sqrt 6.
  const auto glass = [&](double& volume_L, std::optional<double> (*u_mL)(double)) {
    if (volume_L > 0)
      volume_L += *u_mL(volume_L * mL) / mL * std::sqrt(6) * (uniform(random) + uniform(random));
  };
  const auto reading = [&](double& volume_L, double of_L) {
    if (!(volume_L > 0)) return;
    const double u = *u_burette_mL(of_L * mL);
    volume_L +=
        (u * std::sqrt(6) * (uniform(random) + uniform(random)) + m.u_end_point_mL * normal(random)) / mL;
  };
  const auto relative = [&](double& value, double u) { value *= 1 + u * normal(random); };

  double mean = 0, sum_of_squares = 0;
  for (int i = 1; i <= draws; ++i) {
    Figures x = figures_of(t);
    reading(x.burette_L, t.burette.v);
    reading(x.second_L, t.second_burette.v);
    reading(x.blank_L, t.burette.v);
    relative(x.titrant_mol_per_L, u_strength(t.u_titrant_rel));
    relative(x.excess_mol_per_L, u_strength(t.u_excess_rel));
    glass(x.excess_L, u_pipette_mL);
    glass(x.flask_L, u_flask_mL);
    glass(x.sample_L, u_pipette_mL);
    glass(x.aliquot_L, u_pipette_mL);
    if (diluted(t)) {
      x.second_sample_L = x.sample_L;
      glass(x.second_aliquot_L, u_pipette_mL);
    } else {
      glass(x.second_sample_L, u_pipette_mL);
    }
    x.weighed_g += uncertainty_term("balance") * normal(random);
    relative(x.sampling, uncertainty_term("sampling"));
    if (m.kind == Kind::weighed) relative(x.sampling, m.u_method_rel);
    const double c = mol_per_L(x, m) * molar_mass.v;
    const double step = c - mean;  // Welford's running mean and sum of squares
    mean += step / i;
    sum_of_squares += step * (c - mean);
  }
  return std::sqrt(sum_of_squares / (draws - 1));
}

Result<Titrated> work_out(const Titration& t, const Method& method, units::GramsPerMole molar_mass) {
  if (Problems problems = Refusals(t, method).all(); !problems.empty()) return problems;
  const double value = mol_per_L(figures_of(t), method) * molar_mass.v;
  const UncertaintyBudget budget = budget_of(t, method);
  constexpr double straight = 0.01;  // the second-order term of a quotient is then 1e-4 of it
  const double u = budget.sample_rel > straight ? monte_carlo_uncertainty(t, method, molar_mass)
                                                : value * budget.relative();
  return Titrated{{value}, {u}, budget, how_read(t, method)};
}

}  // namespace bathwright::analysis
