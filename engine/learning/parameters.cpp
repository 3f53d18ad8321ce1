#include "parameters.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <ranges>

namespace bathwright::learning {
namespace {

using bath::CountedIn;

double logit(double share) { return std::log(share / (1 - share)); }
double share_of(double logit) { return 1 / (1 + std::exp(-logit)); }

/// Of a lognormal with relative standard deviation u.
double u_ln(double u_rel) { return std::sqrt(std::log1p(u_rel * u_rel)); }

double stated_or(double u, double otherwise) { return u > 0 ? u : otherwise; }  // NaN and 0: not stated

const char* unit_of(CountedIn counted_in) {
  switch (counted_in) {
    case CountedIn::ampere_hour:
      return "Ah";
    case CountedIn::gram_deposited:
      return "g";
    case CountedIn::m2_of_work:
      return "m2";
    case CountedIn::hour:
      return "h";
    case CountedIn::m2_surface_hour:
      return "m2 h";
  }
  return "";
}

/// Its name, and where its factor stands: one for the tank, or one for each use.
struct Kind {
  What what;
  std::string_view name;
  double Factors::*of_tank;
  std::vector<double> Factors::*of_use;
};
constexpr std::array kinds = {
    Kind{What::drag_out, "drag-out", &Factors::drag_out, nullptr},
    Kind{What::drag_in, "drag-in", &Factors::drag_in, nullptr},
    Kind{What::evaporation, "evaporation", &Factors::evaporation, nullptr},
    Kind{What::idle_evaporation, "idle evaporation", &Factors::idle_evaporation, nullptr},
    Kind{What::water, "water", &Factors::water, nullptr},
    Kind{What::work, "work", nullptr, &Factors::work},
    Kind{What::efficiency, "efficiency", nullptr, &Factors::efficiency},
    Kind{What::effects, "effects", nullptr, &Factors::effects}};

const Kind& kind_of(What what) { return *std::ranges::find(kinds, what, &Kind::what); }

class Priors {
 public:
  Priors(const Course& course, const Assumed& assumed)
      : course_(course), policy_(*course.policy), assumed_(assumed) {}

  std::vector<Prior> run() {
    constexpr double mL_dm2_per_L_m2 = 10;
    const double film = policy_.drag_out_L_per_m2.value;
    if (film > 0 && course_.area_m2 > 0) {
      double u = stated_or(policy_.drag_out_L_per_m2.u_rel, assumed_.drag_out);
      if (!course_.area_logged) u = std::hypot(u, stated_or(policy_.area_m2_per_shift.u_rel, assumed_.load));
      add(What::drag_out, u, film * mL_dm2_per_L_m2, "drag-out", "mL/dm2");
    }
    const double film_in = policy_.drag_in_L_per_m2.value;
    if (film_in > 0 && course_.area_m2 > 0 && (course_.follows_volume || !course_.drag_in.isZero()))
      add(What::drag_in, stated_or(policy_.drag_in_L_per_m2.u_rel, assumed_.drag_out),
          film_in * mL_dm2_per_L_m2, "drag-in", "mL/dm2");
    const bool water_seen = !course_.water.isZero();
    if (policy_.evaporation_L_per_h.value > 0 && course_.worked_h > 0 &&
        (course_.follows_volume || water_seen))
      add(What::evaporation, stated_or(policy_.evaporation_L_per_h.u_rel, assumed_.evaporation),
          policy_.evaporation_L_per_h.value, "evaporation", "L/h");
    if (policy_.idle_evaporation_L_per_h > 0 && course_.hours > course_.worked_h &&
        (course_.follows_volume || water_seen))
      add(What::idle_evaporation, assumed_.evaporation, policy_.idle_evaporation_L_per_h,
          "evaporation at rest", "L/h");
    if (water_seen) {
      Eigen::Index most = 0;
      course_.water.maxCoeff(&most);
      add(What::water, stated_or(policy_.u_water_rel, assumed_.water), 1000 * course_.water(most),
          course_.followed[static_cast<std::size_t>(most)]->label + " in the water", "mg/L");
    }
    for (std::size_t u = 0; u < course_.uses.size(); ++u) add_use(u);
    return std::move(out_);
  }

 private:
  void add(What what, double u_rel, double stated, std::string label, std::string unit, std::size_t use = 0) {
    out_.push_back({what, use, u_ln(u_rel), stated, false, std::move(label), std::move(unit), std::nullopt});
  }

  void add_use(std::size_t at) {
    const UseInGrams& use = course_.uses[at];
    const bath::Use& stated = *use.compiled->use;
    const bool acts = !use.effects.isZero();
    if (!(use.total > 0) || !(use.plates || acts)) return;
    const bool by_current = stated.counted_in == CountedIn::ampere_hour;
    if (!use.always) {
      double u = by_current ? assumed_.meter_Ah : assumed_.meter_other;
      if (!use.logged) {
        u = assumed_.load;
        for (const forecast::Work& work : policy_.work)
          if (work.use == stated.id) u = stated_or(work.per_shift.u_rel, u);
      }
      add(What::work, u, use.per_shift, "work: " + stated.id,
          std::string(unit_of(stated.counted_in)) + " a shift", at);
    }
    // The shop's own figure where its policy has one.
    if (const double share = use.compiled->cathode.value; use.plates && by_current && share < 1) {
      const double u = stated_or(share * use.compiled->cathode.u_rel, assumed_.efficiency);
      out_.push_back({What::efficiency, at, u / (share * (1 - share)), 100 * share, true,
                      "efficiency of " + stated.id, "%", std::nullopt});
    }
    if (acts) {
      // Named by the first effect that is stated and followed; acid and alkali come by the charge.
      Eigen::Index first = 0;
      use.effects.cwiseAbs().maxCoeff(&first);
      for (const auto& effect : std::views::reverse(stated.effects))
        first = course_.position(effect.quantity).value_or(first);
      add(What::effects, stated_or(use.compiled->effects_u_rel, assumed_.effects), use.effects(first),
          course_.followed[static_cast<std::size_t>(first)]->label + " by " + stated.id,
          std::string("g/") + unit_of(stated.counted_in), at);
    }
  }

  const Course& course_;
  const forecast::Policy& policy_;
  const Assumed& assumed_;
  std::vector<Prior> out_;
};

}  // namespace

std::string_view name(What what) { return kind_of(what).name; }

double Prior::figure(double z) const {
  return is_fraction ? 100 * share_of(logit(stated / 100) + z) : stated * std::exp(z);
}

double Prior::ln_factor(double z) const { return std::log(figure(z) / stated); }

std::vector<Prior> priors_of(const Course& course, const Assumed& assumed) {
  return Priors(course, assumed).run();
}

Factors factors_of(const Course& course, const std::vector<Prior>& priors, const Vec& z) {
  Factors f;
  f.work.assign(course.uses.size(), 1);
  f.effects.assign(course.uses.size(), 1);
  f.efficiency.assign(course.uses.size(), 1);
  for (std::size_t j = 0; j < priors.size(); ++j) {
    const Prior& prior = priors[j];
    const double at = z(static_cast<Eigen::Index>(j));
    if (prior.until_h) {
      f.changes.push_back({prior.what, prior.use, *prior.until_h, std::exp(at)});
      continue;
    }
    const Kind& kind = kind_of(prior.what);
    (kind.of_tank ? f.*kind.of_tank : (f.*kind.of_use)[prior.use]) = std::exp(prior.ln_factor(at));
  }
  return f;
}

}  // namespace bathwright::learning
