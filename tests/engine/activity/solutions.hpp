// Solutions to try the activity models on.
#pragma once

#include <bathwright/activity/make_model.hpp>
#include <catch2/catch.hpp>
#include <cmath>
#include <memory>
#include <numeric>
#include <random>
#include <string>
#include <vector>

namespace bathwright::activity {

inline constexpr units::Celsius room{25};
inline constexpr ModelKind all_models[] = {ModelKind::davies, ModelKind::debye_huckel, ModelKind::sit,
                                           ModelKind::pitzer};

using Names = std::vector<std::string>;
using Numbers = std::vector<double>;
using Model = std::unique_ptr<const ActivityModel>;

inline Model model_of(ModelKind kind, const Names& names, units::Celsius t = room,
                      AcidSet acid_set = AcidSet::sulfate) {
  std::vector<Solute> solutes;
  for (const std::string& name : names) solutes.push_back({name, charge_in_name(name)});
  auto model = make_model(kind, solutes, t, {acid_set, ZincSet::dilute});
  REQUIRE(model);
  return *std::move(model);
}

struct Coefficients {
  Numbers ln_gamma;
  double ln_water;
};

inline Coefficients coefficients(const ActivityModel& model, const Numbers& molality) {
  Coefficients found{Numbers(molality.size()), 0};
  found.ln_water = model.evaluate(molality, found.ln_gamma);
  return found;
}

/// d ln gamma_i / d m_j of solutes, n x n, row by row.
inline Numbers derivatives(const ActivityModel& model, const Numbers& molality) {
  const auto kind = model.kind_of();
  Numbers in_kind(model.kinds(), 0), ln_gamma(model.kinds()), by_kind(model.kinds() * model.kinds());
  for (std::size_t i = 0; i < kind.size(); ++i) in_kind[kind[i]] += molality[i];
  model.evaluate_kinds(in_kind, ln_gamma, by_kind);
  Numbers derivative;
  for (const std::uint16_t k : kind)
    for (const std::uint16_t l : kind) derivative.push_back(by_kind[k * model.kinds() + l]);
  return derivative;
}

/// ln of the mean activity coefficient of a salt of nu_cation cations (the first solute) and nu_anion anions.
inline double ln_mean(const ActivityModel& model, double salt_molality, double nu_cation, double nu_anion) {
  const Numbers ln_gamma =
      coefficients(model, {nu_cation * salt_molality, nu_anion * salt_molality}).ln_gamma;
  return (nu_cation * ln_gamma[0] + nu_anion * ln_gamma[1]) / (nu_cation + nu_anion);
}

/// phi = -ln a_w / (M_w sum m).
inline double osmotic_coefficient(const ActivityModel& model, const Numbers& molality) {
  return -coefficients(model, molality).ln_water /
         (water_kg_per_mol * std::accumulate(molality.begin(), molality.end(), 0.0));
}

/// Molalities of random size between `low` and `high`, mol/kg, evenly spread in their logarithm.
inline Numbers random_molality(std::size_t n, double low, double high, std::mt19937& random) {
  std::uniform_real_distribution<double> spread(std::log(low), std::log(high));
  Numbers molality(n);
  for (double& m : molality) m = std::exp(spread(random));
  return molality;
}

/// f'(0) from central differences of step h and 2 h (the error falls with the fourth power of h).
template <class Function>
double slope_at_zero(Function f, double h) {
  return (8 * (f(h) - f(-h)) - (f(2 * h) - f(-2 * h))) / (12 * h);
}

}  // namespace bathwright::activity
