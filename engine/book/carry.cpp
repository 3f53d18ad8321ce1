#include <fmt/format.h>

#include <Eigen/Dense>
#include <algorithm>
#include <bathwright/book/book.hpp>
#include <bathwright/forecast/compiled.hpp>
#include <cmath>
#include <set>

#include "book_terms.hpp"

namespace bathwright::book {
namespace {

using analysis::BookTerm;
using analysis::Carried;
using bath::Chemistry;

class Carrying {
 public:
  Carrying(const Start& start, double hours, const bath::Tank& tank, const Chemistry& chemistry)
      : tank_(tank), chemistry_(chemistry), hours_(hours), state_(start.state) {
    carried_.found_last = start.found;
    doubts_of(start);
    // No policy: only what the bath type's uses come to in amounts.
    if (auto compiled = forecast::compile(tank_, chemistry_, policy_)) compiled_ = *std::move(compiled);
  }

  Carried run(const std::vector<Movement>& movements) {
    for (const Movement& movement : movements)
      std::visit([&](const auto& of) { take(of, movement); }, movement.of);
    pass_time();
    carried_.component_mol = state_.component_mol;
    carried_.volume_L = chemistry_.volume_L(state_);
    return std::move(carried_);
  }

 private:
  void doubt_of(std::string what, std::optional<std::int64_t> entry, std::vector<double> component_mol,
                double volume_L = 0) {
    carried_.terms.push_back({std::move(what), entry, std::move(component_mol), volume_L});
  }
  void counted(const Movement& movement) { carried_.counted.push_back(named(movement)); }
  void not_counted(const Movement& movement, const std::string& why) {
    carried_.not_counted.push_back(named(movement) + ": " + why);
  }
  static std::string named(const Movement& movement) {
    return movement.entry ? fmt::format("{} (entry {})", movement.what, *movement.entry) : movement.what;
  }

  /// The principal axes of the covariance, each a doubt of its own.
  void doubts_of(const Start& start) {
    const auto n = static_cast<Eigen::Index>(state_.component_mol.size());
    const Eigen::Map<const Eigen::MatrixXd> covariance(start.covariance.data(), n, n);
    const Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd> axes(covariance);
    for (Eigen::Index k = 0; k < n; ++k) {
      const double variance = axes.eigenvalues()(k);
      if (!(variance > 0)) continue;
      const Eigen::VectorXd axis = std::sqrt(variance) * axes.eigenvectors().col(k);
      doubt_of(start.what, start.entry, {axis.begin(), axis.end()});
    }
    doubt_of("water", std::nullopt, std::vector<double>(state_.component_mol.size(), 0),
             doubt("water") * chemistry_.volume_L(state_));
  }

  static std::vector<double> times(const std::vector<double>& amounts, double factor) {
    std::vector<double> scaled = amounts;
    for (double& mol : scaled) mol *= factor;
    return scaled;
  }

  void take(const Addition& addition, const Movement& movement) {
    const bath::ShelfItem* item = tank_.on_shelf(addition.chemical);
    if (!item) return not_counted(movement, "not on the shelf of this tank");
    const auto brings = chemistry_.brings(item->stock);
    if (!brings) return not_counted(movement, text(brings.problems()));
    const double before_L = chemistry_.volume_L(state_);
    state_ = Chemistry::after(std::move(state_), *brings, addition.kg);
    const double rise_L = chemistry_.volume_L(state_) - before_L;
    counted(movement);
    const std::vector<double> brought = times(brings->component_mol, addition.kg);
    if (std::ranges::all_of(brought, [](double mol) { return mol == 0; })) return;  // water
    doubt_of(named(movement), movement.entry, times(brought, doubt("addition")), doubt("addition") * rise_L);
    carried_.additions.push_back(
        {movement.what, movement.entry.value_or(0), addition.chemical, addition.kg, brought, rise_L});
  }

  void take(const Dumped& dumped, const Movement& movement) {
    const double volume_L = chemistry_.volume_L(state_);
    const double share = dumped.L / volume_L;
    if (!(share < 1)) return not_counted(movement, fmt::format("the tank held {:.0f} L", volume_L));
    keep(1 - share);
    counted(movement);
    doubt_of(named(movement), movement.entry,
             times(state_.component_mol, doubt("dump") * share / (1 - share)));
    fill_to(volume_L);
  }

  void take(const StoodAt& level, const Movement& movement) {
    fill_to(level.L);
    counted(movement);
  }

  void take(const Worked& worked, const Movement& movement) {
    const auto use =
        std::ranges::find_if(compiled_.uses, [&](const auto& u) { return u.use->id == worked.use; });
    if (use == compiled_.uses.end()) return not_counted(movement, "the bath type does not say what it does");
    const forecast::Amounts per_unit = forecast::per_unit(*use, 1, 1);
    put(per_unit, worked.units);
    logged_uses_.insert(worked.use);
    counted(movement);
    const double u =
        std::isnan(use->use->u_cathode_efficiency) ? doubt("work") : use->use->u_cathode_efficiency;
    const double u_effects = std::isnan(use->use->effects_u_rel) ? doubt("work") : use->use->effects_u_rel;
    doubt_of(named(movement), movement.entry, difference(*use, 1, 1 - u, worked.units));
    if (!use->use->effects.empty())
      doubt_of(named(movement), movement.entry, difference(*use, 1 + u_effects, 1, worked.units));
  }

  /// What other factors on effects and efficiency come to.
  static std::vector<double> difference(const forecast::CompiledUse& use, double effects, double efficiency,
                                        double units) {
    forecast::Amounts other = forecast::per_unit(use, effects, efficiency);
    forecast::add(other, forecast::per_unit(use, 1, 1), -1);
    return times(other.component_mol, units);
  }

  void put(const forecast::Amounts& amounts, double units) {
    for (std::size_t i = 0; i < state_.component_mol.size(); ++i)
      state_.component_mol[i] += units * amounts.component_mol[i];
    state_.water_kg += units * amounts.water_kg;
  }

  /// This share of everything stays, doubts included.
  void keep(double share) {
    state_.component_mol = times(state_.component_mol, share);
    state_.water_kg *= share;
    for (BookTerm& term : carried_.terms) term.component_mol = times(term.component_mol, share);
  }

  void fill_to(double volume_L) {
    constexpr int steps = 8;  // the gap falls by a hundred in each
    for (int step = 0; step < steps; ++step) state_.water_kg += volume_L - chemistry_.volume_L(state_);
  }

  /// What goes on by itself.
  void pass_time() {
    const double days = std::max(hours_, 0.0) / 24;
    if (!(days > 0)) return;
    const double volume_L = chemistry_.volume_L(state_);
    for (const std::size_t at : compiled_.always) by_the_hour(compiled_.uses[at]);
    for (const forecast::CompiledUse& use : compiled_.uses) nobody_logged(use, days);
    const double dragged_out = -std::expm1(-doubt("drag-out") * days);
    keep(1 - dragged_out);
    fill_to(volume_L);
    doubt_of("drag-out", std::nullopt, times(state_.component_mol, -dragged_out));
    const double ageing = doubt("ageing") * std::sqrt(days);
    for (std::size_t i = 0; i < state_.component_mol.size(); ++i) {
      std::vector<double> one(state_.component_mol.size(), 0);
      one[i] = ageing * state_.component_mol[i];
      if (one[i] != 0)
        doubt_of("what nobody logs of " + chemistry_.components()[i], std::nullopt, std::move(one));
    }
  }

  void by_the_hour(const forecast::CompiledUse& use) {
    const double surface_m2 = tank_.surface ? tank_.surface->v / 100 : 0;
    const double units = hours_ * (use.use->counted_in == bath::CountedIn::hour ? 1 : surface_m2);
    put(forecast::per_unit(use, 1, 1), units);
    const double u = std::isnan(use.use->effects_u_rel) ? 0.5 : use.use->effects_u_rel;
    doubt_of(use.use->label, std::nullopt, difference(use, 1 + u, 1, units));
  }

  /// As much of the use as consumes a usual share of what it consumes fastest.
  void nobody_logged(const forecast::CompiledUse& use, double days) {
    using bath::CountedIn;
    if (logged_uses_.contains(use.use->id) || use.use->counted_in == CountedIn::hour ||
        use.use->counted_in == CountedIn::m2_surface_hour)
      return;
    const std::vector<double> per_unit = forecast::per_unit(use, 1, 1).component_mol;
    double fastest = 0;
    for (std::size_t i = 1; i < per_unit.size(); ++i)  // H^+ apart: what is left of it says nothing
      if (state_.component_mol[i] > 0) fastest = std::max(fastest, -per_unit[i] / state_.component_mol[i]);
    if (!(fastest > 0)) return;
    doubt_of(use.use->label + ", not logged", std::nullopt,
             times(per_unit, doubt("work-not-logged") * days / fastest));
  }

  const bath::Tank& tank_;
  const Chemistry& chemistry_;
  const double hours_;
  const forecast::Policy policy_{};
  forecast::Compiled compiled_;
  bath::TankState state_;
  std::set<std::string> logged_uses_;
  Carried carried_;
};

}  // namespace

Carried carry(const Start& start, const std::vector<Movement>& movements, double hours,
              const bath::Tank& tank, const Chemistry& chemistry) {
  return Carrying(start, hours, tank, chemistry).run(movements);
}

}  // namespace bathwright::book
