#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <functional>
#include <tuple>

#include "suspects.hpp"

namespace bathwright::learning {
namespace {

using Index = Eigen::Index;

constexpr double in_90_percent = 1.6448536269514722;  // standard normal deviate, 5 % on each side

/// Variance of the whitened innovations by their median: a few odd ones do not matter.
double robust_noise(const Estimate& e) {
  std::vector<double> sizes;
  for (const Index row : predicted_rows(e.followed)) sizes.push_back(std::abs(e.whitened(row)));
  if (sizes.empty()) return e.noise;
  const auto middle = sizes.begin() + static_cast<std::ptrdiff_t>(sizes.size() / 2);
  std::ranges::nth_element(sizes, middle);
  constexpr double median_of_normal = 0.6744897501960817;
  return std::max(1.0, e.noise * std::pow(*middle / median_of_normal, 2));
}

class Learner {
 public:
  Learner(const Course& course, const Assumed& assumed, double suspect_at)
      : course_(course), assumed_(assumed), suspect_at_(suspect_at), priors_(priors_of(course, assumed)) {}

  Learned run() {
    fit();
    out_.analyses = course_.history->analyses.size();
    out_.days =
        (course_.history->analyses.back().when.at_h - course_.history->analyses.front().when.at_h) / 24;
    figures();
    compare();
    std::ranges::copy(lasting(course_, priors_, e_, suspect_at_), std::back_inserter(out_.suspects));
    std::ranges::stable_sort(out_.suspects, std::greater{},
                             [](const Suspect& s) { return std::abs(s.misfit); });
    say_what_was_assumed();
    say_what_cannot_be_told();
    return std::move(out_);
  }

 private:
  void fit() {
    e_ = estimate(course_, priors_, assumed_, aside_, 1, Vec::Zero(static_cast<Index>(priors_.size())));
    const std::size_t most_oddities = 2 + course_.history->analyses.size() / 8;
    for (std::size_t round = 0; round < most_oddities; ++round) {
      if (const double noise = robust_noise(e_); std::abs(noise / e_.noise - 1) > 0.05) learn_again(noise);
      const auto odd = strongest_oddity(course_, priors_, e_, suspect_at_);
      auto changed = strongest_change(course_, priors_, e_, suspect_at_);
      if (changed && (!odd || std::abs(changed->suspect.misfit) > std::abs(odd->suspect.misfit))) {
        changes_.push_back(std::move(changed->suspect));
        priors_.push_back(std::move(changed->prior));
        e_.z.conservativeResize(e_.z.size() + 1);
        e_.z(e_.z.size() - 1) = 0;
        learn_again(e_.noise);
        continue;
      }
      if (!odd) break;
      if (odd->level) aside_.levels.push_back(*odd->level);
      if (odd->shock) aside_.shocks.push_back(*odd->shock);
      out_.suspects.push_back(odd->suspect);
      learn_again(e_.noise);
    }
    const auto rows = predicted_rows(e_.followed);
    double chi2 = 0;
    for (const Index row : rows) chi2 += e_.noise * e_.whitened(row) * e_.whitened(row);
    double free = static_cast<double>(rows.size()) - static_cast<double>(aside_.shocks.size());
    for (std::size_t j = 0; j < priors_.size(); ++j) free -= told(j);
    out_.reduced_chi2 = free > 0 ? chi2 / free : 1;
    learn_again(std::max(1.0, out_.reduced_chi2));
    out_.levels = rows.size();
    for (std::size_t c = 0; c < changes_.size(); ++c) {
      const auto at = static_cast<Index>(figures_learned() + c);
      tell_change(changes_[c], e_.z(at), std::sqrt(e_.covariance(at, at)));
      out_.suspects.push_back(changes_[c]);
    }
  }
  /// Those that were stated; behind them stand changes that were found.
  [[nodiscard]] std::size_t figures_learned() const { return priors_.size() - changes_.size(); }
  void learn_again(double noise) { e_ = estimate(course_, priors_, assumed_, aside_, noise, e_.z); }

  [[nodiscard]] double told(std::size_t j) const {
    return 1 - e_.covariance(static_cast<Index>(j), static_cast<Index>(j)) / (priors_[j].u * priors_[j].u);
  }

  void figures() {
    const std::size_t n = figures_learned();
    Vec slope(static_cast<Index>(n));  // of the logarithm of the figure with z
    for (std::size_t j = 0; j < n; ++j) {
      const Prior& prior = priors_[j];
      const double z = e_.z(static_cast<Index>(j));
      const double u = std::sqrt(e_.covariance(static_cast<Index>(j), static_cast<Index>(j)));
      slope(static_cast<Index>(j)) = (prior.ln_factor(z + 1e-5) - prior.ln_factor(z - 1e-5)) / 2e-5;
      Parameter p;
      p.what = prior.what;
      const bool of_use = p.what == What::work || p.what == What::efficiency || p.what == What::effects;
      if (of_use) p.use = course_.uses[prior.use].compiled->use->id;
      p.label = prior.label;
      p.unit = prior.unit;
      p.prior = prior.stated;
      std::tie(p.prior_p05, p.prior_p95) =
          std::minmax(prior.figure(-in_90_percent * prior.u), prior.figure(in_90_percent * prior.u));
      p.value = prior.figure(z);
      std::tie(p.p05, p.p95) =
          std::minmax(prior.figure(z - in_90_percent * u), prior.figure(z + in_90_percent * u));
      p.told = std::max(0.0, told(j));
      p.ln_factor = prior.ln_factor(z);
      p.u_ln = u * slope(static_cast<Index>(j));
      out_.parameters.push_back(std::move(p));
    }
    const Mat covariance =
        slope.asDiagonal() * e_.covariance.topLeftCorner(slope.size(), slope.size()) * slope.asDiagonal();
    out_.covariance.assign(covariance.data(), covariance.data() + covariance.size());
  }

  void compare() {
    const Factors learned = factors_of(course_, priors_, e_.z);
    const Factors stated = factors_of(course_, priors_, Vec::Zero(e_.z.size()));
    const auto ahead_learned = ahead(course_, learned, e_.followed),
               ahead_stated = ahead(course_, stated, e_.followed);
    double squares_learned = 0, squares_stated = 0;
    int count = 0;
    for (std::size_t k = 0; k < e_.followed.size(); ++k) {
      const Update& up = e_.followed[k];
      for (std::size_t r = 0; r < up.rows.size(); ++r) {
        if (up.rows[r] == course_.volume_at() || up.first[r]) continue;
        const auto i = static_cast<Index>(r);
        Compared c;
        c.when = course_.history->analyses[up.analysis].when;
        c.quantity = course_.followed[static_cast<std::size_t>(up.rows[r])]->id;
        c.predicted = up.predicted(i);
        c.found = up.found(i);
        c.u_found = std::hypot(up.u_found(i), assumed_.volume * up.found(i));
        c.u_predicted = std::sqrt(std::max(0.0, up.S(i, i) - e_.noise * c.u_found * c.u_found));
        c.misfit = (c.found - c.predicted) / std::sqrt(up.S(i, i));
        c.ahead = ahead_learned[k](i), c.ahead_by_policy = ahead_stated[k](i);
        if (c.found > 0) {
          squares_learned += std::pow(c.ahead / c.found - 1, 2);
          squares_stated += std::pow(c.ahead_by_policy / c.found - 1, 2);
          ++count;
        }
        out_.compared.push_back(std::move(c));
      }
    }
    for (const auto& [analysis, row] : aside_.levels) set_aside(analysis, row);
    std::ranges::stable_sort(out_.compared, {}, [](const Compared& c) { return c.when.at_h; });
    if (count > 0) {
      out_.rms_learned = std::sqrt(squares_learned / count);
      out_.rms_by_policy = std::sqrt(squares_stated / count);
    }
  }

  void set_aside(std::size_t analysis, Index row) {
    if (row == course_.volume_at()) return;
    const Analysed& analysed = course_.history->analyses[analysis];
    const std::string& id = course_.followed[static_cast<std::size_t>(row)]->id;
    for (const Suspect& s : out_.suspects) {
      if (s.kind != SuspectKind::analysis || s.subject != id || s.when.entry != analysed.when.entry ||
          s.when.at_h != analysed.when.at_h)
        continue;
      Compared c;
      c.when = analysed.when;
      c.quantity = id;
      c.found = std::ranges::find(analysed.levels, id, &Level::quantity)->g_per_L;
      c.predicted = c.found - s.amount;
      c.u_predicted = c.u_found = s.u_amount;
      c.misfit = s.misfit;
      c.ahead = c.ahead_by_policy = c.predicted;
      c.set_aside = true;
      out_.compared.push_back(std::move(c));
      return;
    }
  }

  void say_what_was_assumed() {
    for (const UseInGrams& use : course_.uses)
      if (!use.always && !use.logged && use.total > 0)
        out_.notes.push_back(
            "Work (" + use.compiled->use->id +
            ") is not logged: it is taken as the policy says. Log the meter, and more can be told.");
    if (course_.area_m2 > 0 && !course_.area_logged)
      out_.notes.push_back(course_.area_by_work
                               ? "Area is not logged: it is taken in the policy's proportion to the work."
                               : "Area is not logged: it is taken as the policy says.");
    if (!course_.follows_volume && course_.policy->evaporation_L_per_h.value > 0)
      out_.notes.push_back(
          "Top-up water is not logged: the tank is taken as kept at its mark, and evaporation shows only by what the "
          "water brings.");
    if (!(course_.policy->drag_out_L_per_m2.value > 0))
      out_.notes.push_back(
          "The policy states no drag-out, so none is learned: state a film, however roughly.");
  }

  void say_what_cannot_be_told() {
    constexpr double alike = 0.85, little = 0.5;
    bool drag_out_unclear = false;
    for (std::size_t i = 0; i < figures_learned(); ++i) {
      const auto a = static_cast<Index>(i);
      drag_out_unclear |= priors_[i].what == What::drag_out && told(i) < little;
      for (std::size_t j = 0; j < i; ++j) {
        const auto b = static_cast<Index>(j);
        const double r = e_.covariance(a, b) / std::sqrt(e_.covariance(a, a) * e_.covariance(b, b));
        if (std::abs(r) < alike) continue;
        drag_out_unclear |= priors_[i].what == What::drag_out || priors_[j].what == What::drag_out;
        out_.notes.push_back(fmt::format("This log hardly tells {} from {}: it knows them together.",
                                         priors_[j].label, priors_[i].label));
      }
    }
    if (drag_out_unclear && !course_.tracer.empty())
      out_.notes.push_back("Nothing but drag-out and bleed takes " + course_.tracer +
                           " away: analyse it regularly, and drag-out is told from the rest.");
  }

  const Course& course_;
  const Assumed& assumed_;
  double suspect_at_;
  std::vector<Prior> priors_;
  std::vector<Suspect> changes_;  ///< each with its unknown at the end of priors_
  SetAside aside_;
  Estimate e_;
  Learned out_;
};

}  // namespace

Result<Learned> learn(const bath::Tank& tank, const bath::Chemistry& chemistry,
                      const forecast::Policy& policy, const History& history, const Assumed& assumed,
                      double suspect_at) {
  const auto compiled = forecast::compile(tank, chemistry, policy);
  if (!compiled) return compiled.problems();
  const auto course = course_of(tank, chemistry, policy, *compiled, history, assumed);
  if (!course) return course.problems();
  return Learner(*course, assumed, suspect_at).run();
}

}  // namespace bathwright::learning
