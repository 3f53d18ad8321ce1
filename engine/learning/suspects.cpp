#include "suspects.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <functional>
#include <ranges>

namespace bathwright::learning {
namespace {

using Index = Eigen::Index;
using units::significant;

/// The size of something that may have happened, and how sure it is.
struct Scored {
  double size = 0, u = 0;
  [[nodiscard]] double misfit() const { return u > 0 ? size / u : 0; }
};
Scored scored(double score, double information) {
  return information > 0 ? Scored{score / information, 1 / std::sqrt(information)} : Scored{};
}

/// What one more unknown, with slope `column`, would be, with the learned figures free to follow.
Scored one_more(const Estimate& e, const Vec& column) {
  const Vec shared = e.slopes.transpose() * column;
  const double information = column.squaredNorm() - shared.dot(e.covariance * shared);
  return information > 1e-9 * column.squaredNorm() ? scored(-column.dot(e.whitened), information) : Scored{};
}

std::string figure(double value) { return significant(value, 3); }

/// Where several explain as much, the one that is met most often comes first.
enum class Preferred : std::uint8_t { missing, twice, extra_usual, level, loss, extra, single };

/// A candidate explanation.
struct Candidate {
  Preferred preferred;
  Happening happening;
  Suspect suspect;
  std::function<bool(const Scored&)> fits;
  std::function<std::string(const Scored&)> words;
  double at_first = 0;  ///< misfit with the learned figures held
  Scored scored;
};

class Search {
 public:
  Search(const Course& course, const Factors& factors, const Estimate& estimate, double limit)
      : c_(course), factors_(factors), e_(estimate), limit_(limit) {}

  std::optional<Oddity> run() {
    const auto last = static_cast<std::ptrdiff_t>(e_.followed.size()) - 1;
    added_between();
    Vec r = Vec::Zero(c_.states());
    Mat N = Mat::Zero(c_.states(), c_.states());
    for (std::ptrdiff_t k = last; k >= 0; --k) {
      const Update& up = e_.followed[static_cast<std::size_t>(k)];
      if (k < last) {
        const Vec& kept = e_.followed[static_cast<std::size_t>(k + 1)].kept;
        r = kept.cwiseProduct(r);
        N = kept.asDiagonal() * N * kept.asDiagonal();
      }
      const Vec e = up.found - up.predicted;
      const Vec u = up.S_inverse * e - up.gain.transpose() * r;
      const Mat D = up.S_inverse + up.gain.transpose() * N * up.gain;
      const Mat left = Mat::Identity(c_.states(), c_.states()) - up.gain * up.H;
      r += up.H.transpose() * u;
      N = (left.transpose() * N * left + up.H.transpose() * up.S_inverse * up.H).eval();
      levels(static_cast<std::size_t>(k), u, D, k == last);
      if (k > 0) shocks(static_cast<std::size_t>(k), r, N, k == last);
    }
    return choose();
  }

 private:
  /// Which additions lie between an update and the one before.
  void added_between() {
    added_.assign(e_.followed.size() + 1, {});
    std::size_t k = 0;
    for (const Leg& leg : c_.legs) {
      if (leg.then == Then::added) added_[k].push_back(leg.index);
      if (leg.then == Then::analysis && k < e_.followed.size() && e_.followed[k].analysis == leg.index) ++k;
    }
  }

  void offer(Candidate candidate, const Scored& at_first) {
    // The learned figures have bent towards it: it may well be twice as strong as it looks.
    candidate.at_first = std::abs(at_first.misfit());
    if (candidate.at_first > limit_ / 2) candidates_.push_back(std::move(candidate));
  }

  void levels(std::size_t k, const Vec& u, const Mat& D, bool last) {
    const Update& up = e_.followed[k];
    for (std::size_t row = 0; row < up.rows.size(); ++row) {
      const auto i = static_cast<Index>(row);
      if (up.first[row]) continue;
      const bool volume = up.rows[row] == c_.volume_at();
      Suspect suspect;
      suspect.kind = SuspectKind::analysis;
      suspect.when = c_.history->analyses[up.analysis].when;
      suspect.from_h = suspect.when.at_h;
      const bath::Quantity* quantity = volume ? nullptr : c_.followed[static_cast<std::size_t>(up.rows[row])];
      suspect.subject = volume ? "" : quantity->id;
      suspect.try_this = last     ? "Analyse it again before anything is added."
                         : volume ? "Look at how the level was read."
                                  : "Look at its burette reading and titrant.";
      const std::string label = volume ? "level" : quantity->label, unit = volume ? "L" : "g/L";
      const double found = up.found(i);
      offer({Preferred::level,
             {k, {}, row},
             std::move(suspect),
             [](const Scored&) { return true; },
             [=](const Scored& s) {
               return fmt::format("{} {} {} found; the analyses {} and what was logged give {}.", label,
                                  figure(found), unit, last ? "before it" : "before and after it",
                                  figure(found - s.size));
             },
             0,
             {}},
            scored(u(i), D(i, i)));
    }
  }

  void shock(Preferred preferred, std::size_t k, const Vec& direction, const Vec& r, const Mat& N,
             Suspect suspect, std::function<std::string(const Scored&)> words,
             std::function<bool(const Scored&)> fits) {
    if (direction.squaredNorm() > 0)
      offer({preferred, {k, direction}, std::move(suspect), std::move(fits), std::move(words), 0, {}},
            scored(direction.dot(r), direction.dot(N * direction)));
  }

  void shocks(std::size_t k, const Vec& r, const Mat& N, bool last) {
    const Update& up = e_.followed[k];
    const auto& analyses = c_.history->analyses;
    Suspect between;
    between.when = analyses[up.analysis].when;
    between.from_h = analyses[e_.followed[k - 1].analysis].when.at_h;
    const std::string repeat = last ? "Analyse again first: one analysis alone says so. " : "";
    const auto positive = [](const Scored& s) { return s.size > 0; };
    for (const std::size_t j : added_[k]) {
      const Added& added = c_.history->added[j];
      const Vec direction = added.kg * c_.added_per_kg[j];
      Suspect suspect = between;
      suspect.kind = SuspectKind::addition_missing;
      suspect.when = added.when;
      suspect.subject = added.stock;
      suspect.try_this = repeat + "Ask whether it went in whole, into this tank, and dissolved.";
      constexpr double most = -0.5, least = -1.5;  // of what was logged
      shock(
          Preferred::missing, k, direction, r, N, suspect,
          [=](const Scored& s) {
            return fmt::format("{} kg {} logged; the analyses after it see {} kg of it.", figure(added.kg),
                               added.stock, figure(std::max(0.0, 1 + s.size) * added.kg));
          },
          [=](const Scored& s) { return s.size < most && s.size > least; });
      suspect.kind = SuspectKind::addition_extra;
      suspect.try_this = repeat + "Ask the shift: was it added twice, or was more weighed out?";
      constexpr double again_least = 0.7, again_most = 1.3;
      shock(
          Preferred::twice, k, direction, r, N, suspect,
          [=](const Scored& s) {
            return fmt::format("{} kg {} logged; the analyses after it see {} kg.", figure(added.kg),
                               added.stock, figure((1 + s.size) * added.kg));
          },
          [=](const Scored& s) { return s.size > again_least && s.size < again_most; });
    }
    for (const Course::OnShelf& shelf : c_.shelf) {
      if (shelf.per_kg.isZero()) continue;
      Suspect suspect = between;
      suspect.kind = SuspectKind::addition_extra;
      suspect.subject = shelf.item->stock.id;
      suspect.try_this = repeat + "Ask the shift for an addition that was not logged.";
      shock(
          shelf.ever_added ? Preferred::extra_usual : Preferred::extra, k, shelf.per_kg, r, N, suspect,
          [id = shelf.item->stock.id](const Scored& s) {
            return fmt::format("some {} kg {} more are in the tank than was logged.", figure(s.size), id);
          },
          positive);
    }
    Vec loss = Vec::Zero(c_.states());  // and filled up again, or the level would show it
    loss.head(c_.quantities()) = -up.state.head(c_.quantities()) / c_.mark_L;
    Suspect lost = between;
    lost.kind = SuspectKind::loss;
    lost.try_this = repeat + "Look for a leak, an unlogged bleed or dump, water left running.";
    shock(
        Preferred::loss, k, loss, r, N, lost,
        [=](const Scored& s) {
          return fmt::format("all levels fell together as if {} L had been lost and replaced by water.",
                             figure(s.size));
        },
        positive);
    for (std::size_t q = 0; q < c_.followed.size(); ++q) {
      Vec direction = Vec::Zero(c_.states());
      direction(static_cast<Index>(q)) = -1000;
      Suspect single = between;
      single.kind = SuspectKind::loss;
      single.subject = c_.followed[q]->id;
      single.try_this =
          repeat + "Look for crystals, a filter or anode bag that holds it, or a wrong stock entry.";
      shock(
          Preferred::single, k, direction, r, N, single,
          [label = c_.followed[q]->label](const Scored& s) {
            return fmt::format("{} kg {} less are in the tank than was logged.", figure(s.size), label);
          },
          positive);
    }
  }

  /// The strongest with the learned figures free to follow; of those that explain nearly as much the one that
  /// is met most often.
  std::optional<Oddity> choose() {
    constexpr std::size_t looked_at = 40;
    std::ranges::stable_sort(candidates_, std::greater{}, &Candidate::at_first);
    if (candidates_.size() > looked_at) candidates_.erase(candidates_.begin() + looked_at, candidates_.end());
    for (Candidate& c : candidates_)
      c.scored = one_more(e_, innovations(c_, factors_, e_.followed, &c.happening) - e_.whitened);
    const auto strength = [](const Candidate& c) { return std::abs(c.scored.misfit()); };
    std::erase_if(candidates_,
                  [&](const Candidate& c) { return strength(c) <= limit_ || !c.fits(c.scored); });
    if (candidates_.empty()) return std::nullopt;
    constexpr double nearly = 0.93;
    const double most = std::ranges::max(candidates_ | std::views::transform(strength));
    std::erase_if(candidates_, [&](const Candidate& c) { return strength(c) < nearly * most; });
    Candidate& best = *std::ranges::min_element(
        candidates_, {}, [&](const Candidate& c) { return std::pair(c.preferred, -strength(c)); });
    Oddity oddity{std::move(best.suspect), std::nullopt, std::nullopt};
    oddity.suspect.amount = best.scored.size;
    oddity.suspect.u_amount = best.scored.u;
    oddity.suspect.misfit = best.scored.misfit();
    oddity.suspect.words = best.words(best.scored);
    const Update& up = e_.followed[best.happening.update];
    if (best.happening.came_in.size() > 0)
      oddity.shock = {up.analysis, best.happening.came_in};
    else
      oddity.level = {up.analysis, up.rows[best.happening.level]};
    return oddity;
  }

  const Course& c_;
  const Factors& factors_;
  const Estimate& e_;
  double limit_;
  std::vector<std::vector<std::size_t>> added_;
  std::vector<Candidate> candidates_;
};

Suspect drift_of(const Course& course, std::size_t q, const Scored& s) {
  const std::string& label = course.followed[q]->label;
  Suspect suspect;
  suspect.kind = SuspectKind::drift;
  suspect.when = course.history->analyses.back().when;
  suspect.subject = course.followed[q]->id;
  suspect.amount = s.size, suspect.u_amount = s.u, suspect.misfit = s.misfit();
  suspect.words = fmt::format("{} {} by {} g a day all the time, beyond what anything logged explains.",
                              label, s.size > 0 ? "rises" : "falls", figure(std::abs(s.size)));
  suspect.try_this = s.size > 0 ? "Look for it in the water, in drag-in and in what is added."
                                : "Look for a leak, a loss with the work, a deposit on filter and anodes.";
  return suspect;
}

std::string check_of(What what) {
  switch (what) {
    case What::work:
      return "Check the meter: a reset unnoticed, another tank on it, strike hours mixed in.";
    case What::drag_out:
      return "Weigh a wet rack, look at drain times, and for a leak or an unlogged bleed.";
    case What::evaporation:
    case What::idle_evaporation:
      return "Check the water meter, the lid, the exhaust and the bath's temperature.";
    case What::water:
      return "Have the water analysed.";
    case What::drag_in:
      return "Look at the rinse before.";
    case What::efficiency:
      return "Compare with thickness on the work; check the ampere-hour meter.";
    case What::effects:
      return "Compare with the deposit; check how the work is counted.";
  }
  return "";
}

}  // namespace

std::optional<Oddity> strongest_oddity(const Course& course, const std::vector<Prior>& priors,
                                       const Estimate& estimate, double limit) {
  return Search(course, factors_of(course, priors, estimate.z), estimate, limit).run();
}

std::optional<Changed> strongest_change(const Course& course, const std::vector<Prior>& priors,
                                        const Estimate& e, double limit) {
  constexpr double worth_saying = 0.1;
  std::optional<Changed> strongest;
  Factors factors = factors_of(course, priors, e.z);
  for (std::size_t j = 0; j < priors.size(); ++j) {
    const Prior& prior = priors[j];
    const bool may_change =
        prior.what == What::work || prior.what == What::drag_out || prior.what == What::evaporation;
    if (!may_change || prior.until_h) continue;
    const std::size_t n = e.followed.size(), tried = 64, stride = 1 + n / tried;
    for (std::size_t k = std::max<std::size_t>(1, n / 8); k < n - n / 8;
         k += stride) {  // nearer an end one odd level looks the same
      const double until_h = course.history->analyses[e.followed[k].analysis].when.at_h, step = 1e-4;
      factors.changes.push_back({prior.what, prior.use, until_h, std::exp(step)});
      const Vec column = (innovations(course, factors, e.followed) - e.whitened) / step;
      factors.changes.pop_back();
      const Scored s = one_more(e, column);
      if (std::abs(s.misfit()) <= limit || std::abs(s.size) < worth_saying) continue;
      if (strongest && std::abs(s.misfit()) <= std::abs(strongest->suspect.misfit)) continue;
      strongest.emplace();
      strongest->prior = prior;
      strongest->prior.u = 1;  // as good as nothing is known of it
      strongest->prior.until_h = course.history->analyses[e.followed[k].analysis].when.at_h;
      Suspect& suspect = strongest->suspect;
      suspect.kind = SuspectKind::change;
      suspect.when = course.history->analyses[e.followed[k].analysis].when;
      suspect.from_h = suspect.when.at_h;
      suspect.subject = prior.label;
      suspect.misfit = -s.misfit();
      suspect.try_this = check_of(prior.what);
    }
  }
  return strongest;
}

void tell_change(Suspect& suspect, double ln_before, double u) {
  suspect.amount = std::exp(-ln_before);
  suspect.u_amount = suspect.amount * u;
  suspect.words = fmt::format("from about here on {} looks {} times what the same log told before.",
                              suspect.subject, figure(suspect.amount));
}

std::vector<Suspect> lasting(const Course& course, const std::vector<Prior>& priors, const Estimate& e,
                             double limit) {
  std::vector<Suspect> all;
  Factors factors = factors_of(course, priors, e.z);
  for (std::size_t q = 0; q < course.followed.size(); ++q) {
    factors.drift_g_per_h = Vec::Zero(course.states());
    factors.drift_g_per_h(static_cast<Index>(q)) = 1;
    const Vec column = (innovations(course, factors, e.followed) - e.whitened) / 24;  // of 1 g a day
    if (const Scored s = one_more(e, column); std::abs(s.misfit()) > limit)
      all.push_back(drift_of(course, q, s));
  }

  constexpr double far_outside = 2.5;
  for (std::size_t j = 0; j < priors.size(); ++j) {
    const auto at = static_cast<Index>(j);
    const double away = e.z(at) / priors[j].u;
    if (priors[j].until_h || std::abs(away) < far_outside) continue;
    Suspect suspect;
    suspect.kind = SuspectKind::figure;
    suspect.when = course.history->analyses.back().when;
    suspect.subject = priors[j].label;
    suspect.amount = std::exp(priors[j].ln_factor(e.z(at)));
    suspect.u_amount = suspect.amount * std::sqrt(e.covariance(at, at));
    suspect.misfit = away;
    suspect.words = fmt::format(
        "{} comes out at {} {}, {} times what is stated: far outside of its uncertainty.", priors[j].label,
        figure(priors[j].figure(e.z(at))), priors[j].unit, figure(suspect.amount));
    suspect.try_this = check_of(priors[j].what);
    all.push_back(std::move(suspect));
  }
  return all;
}

std::string_view name(SuspectKind kind) {
  switch (kind) {
    case SuspectKind::analysis:
      return "analysis";
    case SuspectKind::addition_missing:
      return "addition not seen";
    case SuspectKind::addition_extra:
      return "addition not logged";
    case SuspectKind::loss:
      return "loss not logged";
    case SuspectKind::drift:
      return "drift";
    case SuspectKind::change:
      return "change";
    case SuspectKind::figure:
      return "figure";
  }
  return "";
}

}  // namespace bathwright::learning
