#include "charge_models.hpp"

#include <algorithm>
#include <bathwright/activity/debye_huckel_slope.hpp>
#include <bathwright/data/tables.hpp>
#include <cmath>
#include <numeric>

namespace bathwright::activity {
namespace {

Kinds kinds_by_charge(std::span<const Solute> solutes) {
  std::vector<int> charge;
  for (const Solute& solute : solutes) charge.push_back(solute.charge);
  return kinds_by(solutes, charge);
}

Kinds kinds_by_charge_and_size(std::span<const Solute> solutes, const std::vector<double>& size_pm) {
  std::vector<std::pair<int, double>> key;
  for (std::size_t i = 0; i < solutes.size(); ++i) key.emplace_back(solutes[i].charge, size_pm[i]);
  return kinds_by(solutes, key);
}

/// f(I) of ln g = z^2 f, with its derivative and integral from 0 to I.
struct DaviesTerm {
  double value, slope, integral;
};

DaviesTerm davies(double slope_ln, double I) {
  constexpr double linear = 0.3, held_above = 1.0;
  const auto value = [](double i) { return std::sqrt(i) / (1 + std::sqrt(i)) - linear * i; };
  const auto integral = [](double i) {
    return i - 2 * std::sqrt(i) + 2 * std::log1p(std::sqrt(i)) - linear / 2 * i * i;
  };
  if (I > held_above) {
    const double f = value(held_above);
    return {-slope_ln * f, 0, -slope_ln * (integral(held_above) + f * (I - held_above))};
  }
  const double s = std::sqrt(std::max(I, 1e-30));
  return {-slope_ln * value(I), -slope_ln * (1 / (2 * s * (1 + s) * (1 + s)) - linear),
          -slope_ln * integral(I)};
}

/// (1 + x - 1/(1+x) - 2 ln(1+x)) 3/x^3, the osmotic counterpart of 1/(1+x); -> 1 for x -> 0.
double sigma(double x) {
  if (x < 0.02) return 1 - 1.5 * x + 1.8 * x * x;
  return 3 / (x * x * x) * (1 + x - 1 / (1 + x) - 2 * std::log1p(x));
}

}  // namespace

std::vector<InteractionNote> specific_interaction_left_out(std::span<const Solute> solutes) {
  constexpr double u_per_molal = 0.25;
  std::vector<InteractionNote> notes;
  for (std::uint32_t i = 0; i < solutes.size(); ++i)
    for (std::uint32_t j = 0; j < solutes.size(); ++j) {
      if (solutes[i].charge <= 0 || solutes[j].charge >= 0) continue;
      InteractionNote& note = notes.emplace_back();
      note.kind = InteractionNote::Kind::accuracy;
      note.solutes = {i, j};
      note.text = "the specific interaction of " + solutes[i].name + " - " + solutes[j].name +
                  ", which the model leaves out";
      note.u_ln_gamma = -u_per_molal * solutes[i].charge * solutes[j].charge;
    }
  return notes;
}

DaviesModel::DaviesModel(std::span<const Solute> solutes, units::Celsius t)
    : DaviesModel(kinds_by_charge(solutes), t) {
  notes_ = specific_interaction_left_out(solutes);
}

DaviesModel::DaviesModel(Kinds kinds, units::Celsius t)
    : ActivityModel(std::move(kinds.of)), charge_(std::move(kinds.charge)), slope_ln_(3 * osmotic_slope(t)) {}

double DaviesModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const {
  const double I = ionic_strength(molality, charge_);
  const DaviesTerm f = davies(slope_ln_, I);
  for (std::size_t i = 0; i < charge_.size(); ++i) ln_gamma[i] = charge_[i] * charge_[i] * f.value;
  const double total = std::accumulate(molality.begin(), molality.end(), 0.0);
  return -water_kg_per_mol * (total + 2 * I * f.value - 2 * f.integral);
}

double DaviesModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                                   std::span<double> derivative) const {
  const double slope = davies(slope_ln_, ionic_strength(molality, charge_)).slope;
  std::size_t at = 0;
  for (const int z : charge_)
    for (const int y : charge_) derivative[at++] = slope * z * z * y * y / 2;
  return evaluate_kinds(molality, ln_gamma);
}

DebyeHueckelModel::DebyeHueckelModel(std::span<const Solute> solutes, units::Celsius t)
    : DebyeHueckelModel(kinds_by_charge_and_size(solutes, sizes(solutes).pm), sizes(solutes), t) {
  for (InteractionNote& note : specific_interaction_left_out(solutes)) notes_.push_back(std::move(note));
}

DebyeHueckelModel::DebyeHueckelModel(const Kinds& kinds, Sizes sizes, units::Celsius t)
    : ActivityModel(kinds.of),
      charge_(kinds.charge),
      slope_ln_(3 * osmotic_slope(t)),
      notes_(std::move(sizes.notes)) {
  const double b = size_slope_per_pm(t);
  for (const std::uint32_t solute : kinds.example) ba_.push_back(b * sizes.pm[solute]);
}

DebyeHueckelModel::Sizes DebyeHueckelModel::sizes(std::span<const Solute> solutes) {
  constexpr double default_size_pm = 400;  // near the mean of Kielland's table
  const data::CsvTable table = data::built_in_table("activity/ion_size.csv", {"size_pm"});
  Sizes found;
  for (std::size_t i = 0; i < solutes.size(); ++i) {
    double size = std::nan("");
    for (std::size_t row = 0; row < table.size() && std::isnan(size); ++row)
      if (table[row]["ion"] == solutes[i].name) size = table[row].number("size_pm");
    if (std::isnan(size)) {
      size = default_size_pm;
      if (solutes[i].charge != 0)
        found.notes.push_back({InteractionNote::Kind::missing,
                               {static_cast<std::uint32_t>(i)},
                               0,
                               solutes[i].name + ": no ion size published; 400 pm taken"});
    }
    found.pm.push_back(size);
  }
  return found;
}

double DebyeHueckelModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma) const {
  const double s = std::sqrt(ionic_strength(molality, charge_));
  double osmotic = 0;
  for (std::size_t i = 0; i < charge_.size(); ++i) {
    const double z2 = charge_[i] * charge_[i];
    ln_gamma[i] = -slope_ln_ * z2 * s / (1 + ba_[i] * s);
    osmotic += molality[i] * (1 - slope_ln_ / 3 * z2 * s * sigma(ba_[i] * s));
  }
  return -water_kg_per_mol * osmotic;
}

double DebyeHueckelModel::evaluate_kinds(std::span<const double> molality, std::span<double> ln_gamma,
                                         std::span<double> derivative) const {
  const double s = std::sqrt(std::max(ionic_strength(molality, charge_), 1e-30));
  std::size_t at = 0;
  for (std::size_t i = 0; i < charge_.size(); ++i) {
    const double slope = -slope_ln_ * charge_[i] * charge_[i] / (2 * s * (1 + ba_[i] * s) * (1 + ba_[i] * s));
    for (const int y : charge_) derivative[at++] = slope * y * y / 2;
  }
  return evaluate_kinds(molality, ln_gamma);
}

}  // namespace bathwright::activity
