#include "filter.hpp"

#include <algorithm>
#include <cmath>

namespace bathwright::learning {
namespace {

using Index = Eigen::Index;

/// What the factors make of the course's rates.
class Rates {
 public:
  Rates(const Course& course, const Factors& factors) : c_(course), f_(factors) {
    for (std::size_t u = 0; u < c_.uses.size(); ++u) {
      Vec per_unit = c_.grams(forecast::per_unit(*c_.uses[u].compiled, f_.effects[u], f_.efficiency[u]));
      per_unit += c_.uses[u].fed;
      per_unit_.push_back(f_.work[u] * per_unit);
    }
  }

  [[nodiscard]] double volume(const Vec& x) const {
    return c_.follows_volume ? x(c_.volume_at()) : c_.mark_L;
  }
  [[nodiscard]] const Vec& per_unit(std::size_t use) const { return per_unit_[use]; }
  [[nodiscard]] double drag_out_L(const Leg& leg) const {
    return leg.area_m2 * c_.policy->drag_out_L_per_m2.value * f_.drag_out * changed(What::drag_out, 0, leg);
  }

  /// The leg's stretch: the state at its end, and what share of each was kept.
  Vec advance(Vec& x, const Leg& leg) const {
    const double drag_out = drag_out_L(leg);
    const double drag_in = leg.area_m2 * c_.policy->drag_in_L_per_m2.value * f_.drag_in;
    const double bleed = c_.policy->bleed_L_per_h(true) * leg.worked_h +
                         c_.policy->bleed_L_per_h(false) * (leg.hours - leg.worked_h);
    const double evaporation =
        c_.policy->evaporation_L_per_h.value * f_.evaporation * changed(What::evaporation, 0, leg) *
            leg.worked_h +
        c_.policy->idle_evaporation_L_per_h * f_.idle_evaporation * (leg.hours - leg.worked_h);
    Vec in = drag_in * c_.drag_in + leg.hours * c_.fed_per_h;
    for (std::size_t u = 0; u < c_.uses.size(); ++u)
      if (leg.units[u] != 0) in += leg.units[u] * changed(What::work, u, leg) * per_unit_[u];
    if (f_.drift_g_per_h.size() > 0) in += leg.hours * f_.drift_g_per_h;
    if (!c_.follows_volume)
      in += std::max(0.0, evaporation + drag_out + bleed - drag_in) * f_.water * c_.water;
    const double kt = (drag_out + bleed) / volume(x), kept = std::exp(-kt);
    in *= kt > 1e-9 ? -std::expm1(-kt) / kt : 1 - kt / 2;
    Vec share = Vec::Constant(x.size(), kept);
    if (c_.follows_volume) {
      in(c_.volume_at()) = drag_in - evaporation - drag_out - bleed;
      share(c_.volume_at()) = 1;
    }
    share.tail(c_.quantities()).setConstant(std::exp(-leg.hours / c_.titrant_h));
    x = share.cwiseProduct(x) + in;
    return share;
  }

  /// The entry at the leg's end, where it is none of the laboratory's.
  void then(Vec& x, const Leg& leg, Vec& share) const {
    if (leg.then == Then::added) {
      x += c_.history->added[leg.index].kg * c_.added_per_kg[leg.index];
    } else if (leg.then == Then::watered) {
      const double litres = c_.history->watered[leg.index].litres;
      x += litres * f_.water * c_.water;
      if (c_.follows_volume) x(c_.volume_at()) += litres;
    } else if (leg.then == Then::dumped) {
      const double litres = c_.history->dumped[leg.index].litres,
                   left = std::max(0.0, 1 - litres / volume(x));
      x.head(c_.quantities()) *= left;
      share.head(c_.quantities()) *= left;
      if (c_.follows_volume)
        x(c_.volume_at()) -= litres;
      else
        x += litres * f_.water * c_.water;  // and filled up again
    }
  }

 private:
  [[nodiscard]] double changed(What what, std::size_t use, const Leg& leg) const {
    double factor = 1;
    for (const Factors::Change& change : f_.changes)
      if (change.what == what && change.use == use && leg.from_h < change.until_h) factor *= change.factor;
    return factor;
  }
  const Course& c_;
  const Factors& f_;
  std::vector<Vec> per_unit_;
};

/// Before anything is known: each level as it is first found, the tank at its mark.
Vec start_of(const Course& course) {
  Vec x = Vec::Zero(course.states());
  if (course.follows_volume) x(course.volume_at()) = course.mark_L;
  for (const Analysed& a : course.history->analyses)
    for (const Level& level : a.levels)
      if (const auto q = course.position(level.quantity); q && x(*q) == 0)
        x(*q) = level.g_per_L * a.volume_L.value_or(course.mark_L);
  return x;
}

class Follower {
 public:
  Follower(const Course& course, const Factors& factors, const Assumed& assumed, const SetAside& aside,
           double noise)
      : c_(course), f_(factors), a_(assumed), aside_(aside), noise_(noise), rates_(course, factors) {}

  Followed run() {
    start();
    kept_ = Vec::Ones(c_.states());
    for (const Leg& leg : c_.legs) {
      stretch(leg);
      if (leg.then == Then::analysis)
        analysis(leg.index);
      else
        entry(leg);
    }
    return std::move(out_);
  }

 private:
  void start() {
    constexpr double as_good_as_unknown = 10, level_till_it_is_read = 0.1;
    x_ = start_of(c_);
    Vec u = as_good_as_unknown * x_.cwiseAbs() + 1e-6 * c_.mark_L * Vec::Ones(x_.size());
    if (c_.follows_volume) u(c_.volume_at()) = level_till_it_is_read * c_.mark_L;
    u.tail(c_.quantities()).setConstant(a_.titrant * std::sqrt(noise_));
    P_ = u.cwiseAbs2().asDiagonal();
    seen_.assign(static_cast<std::size_t>(c_.states()), false);
  }

  /// g/L of each followed quantity.
  [[nodiscard]] Vec concentrations() const {
    Vec all = Vec::Zero(c_.states());
    all.head(c_.quantities()) = x_.head(c_.quantities()) / rates_.volume(x_);
    return all;
  }

  void along(const Vec& direction, double variance) {
    if (variance > 0) P_ += noise_ * variance * direction * direction.transpose();
  }

  void stretch(const Leg& leg) {
    const Vec share = rates_.advance(x_, leg);
    P_ = share.asDiagonal() * P_ * share.asDiagonal();
    kept_ = kept_.cwiseProduct(share);
    // A shift's amount varies by u from shift to shift: over many its variance grows with their number.
    for (std::size_t u = 0; u < c_.uses.size(); ++u) {
      const UseInGrams& use = c_.uses[u];
      if (use.always) continue;
      const double by_shift = use.logged ? a_.work_by_shift : a_.unlogged_by_shift;
      along(rates_.per_unit(u), by_shift * by_shift * leg.units[u] * use.per_shift);
    }
    const double film = c_.policy->drag_out_L_per_m2.value * f_.drag_out;
    const double by_shift =
        std::hypot(a_.film_by_shift, c_.area_logged || c_.area_by_work ? 0 : a_.unlogged_by_shift);
    Vec lost = concentrations();
    if (c_.follows_volume) lost(c_.volume_at()) = 1;
    along(lost, by_shift * by_shift * film * leg.area_m2 * film * c_.area_per_shift_m2);
    const Index n = c_.quantities();
    P_.diagonal().head(n) +=
        noise_ * a_.other_by_day * a_.other_by_day * leg.hours / 24 * x_.head(n).cwiseAbs2();
    P_.diagonal().tail(n).array() +=
        noise_ * a_.titrant * a_.titrant * -std::expm1(-2 * leg.hours / c_.titrant_h);
  }

  void entry(const Leg& leg) {
    Vec share = Vec::Ones(c_.states());
    rates_.then(x_, leg, share);
    P_ = share.asDiagonal() * P_ * share.asDiagonal();
    kept_ = kept_.cwiseProduct(share);
    if (leg.then == Then::added)
      along(c_.added_per_kg[leg.index], std::pow(a_.addition * c_.history->added[leg.index].kg, 2));
    else if (leg.then == Then::watered && c_.follows_volume)
      P_(c_.volume_at(), c_.volume_at()) +=
          noise_ * std::pow(a_.addition * c_.history->watered[leg.index].litres, 2);
    else if (leg.then == Then::dumped)
      along(concentrations(),
            std::pow(0.05 * c_.history->dumped[leg.index].litres, 2));  // as litres are judged
  }

  [[nodiscard]] bool is_aside(std::size_t analysis, Index row) const {
    return std::ranges::find(aside_.levels, std::pair(analysis, row)) != aside_.levels.end();
  }

  void analysis(std::size_t index) {
    for (const auto& [at, direction] : aside_.shocks)  // as large as all that is in the tank
      if (at == index) P_ += x_.squaredNorm() / direction.squaredNorm() * direction * direction.transpose();
    const Analysed& analysed = c_.history->analyses[index];
    Update up;
    up.analysis = index;
    up.state = x_;
    up.kept = kept_;
    kept_ = Vec::Ones(c_.states());
    const double volume = analysed.volume_L.value_or(c_.follows_volume ? x_(c_.volume_at()) : c_.mark_L);
    std::vector<double> found, u, slope;
    const auto take = [&](Index row, double value, double u_value, double per_state) {
      if (is_aside(index, row)) return;
      up.rows.push_back(row);
      found.push_back(value);
      u.push_back(u_value);
      slope.push_back(per_state);
      up.first.push_back(!seen_[static_cast<std::size_t>(row)]);
      seen_[static_cast<std::size_t>(row)] = true;
    };
    for (const Level& level : analysed.levels)
      if (const auto q = c_.position(level.quantity))
        take(*q, level.g_per_L, level.u_g_per_L > 0 ? level.u_g_per_L : a_.level * level.g_per_L, 1 / volume);
    if (c_.follows_volume && analysed.volume_L)
      take(c_.volume_at(), *analysed.volume_L, a_.volume * c_.mark_L, 1);
    const auto n = static_cast<Index>(up.rows.size());
    if (n == 0) {
      // Nothing followed was found: the time since the analysis before goes on.
      kept_ = up.kept;
      return;
    }
    up.found = Eigen::Map<Vec>(found.data(), n);
    up.u_found = Eigen::Map<Vec>(u.data(), n);
    up.H = Mat::Zero(n, c_.states());
    Vec common = Vec::Zero(n);  // the level is read once for all
    for (Index r = 0; r < n; ++r) {
      const Index row = up.rows[static_cast<std::size_t>(r)];
      up.H(r, row) = slope[static_cast<std::size_t>(r)];
      if (row == c_.volume_at()) continue;
      up.H(r, c_.error_at(row)) = up.found(r);
      common(r) = a_.volume * up.found(r);
    }
    up.predicted = up.H * x_;
    const Mat PHt = P_ * up.H.transpose();
    up.S = up.H * PHt + noise_ * (common * common.transpose());
    up.S.diagonal() += noise_ * up.u_found.cwiseAbs2();
    const Eigen::LLT<Mat> factor(up.S);
    up.S_inverse = factor.solve(Mat::Identity(n, n));
    up.whitener = factor.matrixL().solve(Mat::Identity(n, n));
    up.gain = PHt * up.S_inverse;
    x_ += up.gain * (up.found - up.predicted);
    P_ -= up.gain * PHt.transpose();
    P_ = (P_ + P_.transpose()) / 2;
    out_.push_back(std::move(up));
  }

  const Course& c_;
  const Factors& f_;
  const Assumed& a_;
  const SetAside& aside_;
  double noise_;
  Rates rates_;
  Vec x_, kept_;
  Mat P_;
  std::vector<bool> seen_;
  Followed out_;
};

/// The states through the course with gains already known; `at` sees each update's prediction and may move
/// the state.
template <class At>
void pass(const Course& course, const Factors& factors, const Followed& followed, Vec x, const At& at) {
  const Rates rates(course, factors);
  std::size_t next = 0;
  Vec share = Vec::Ones(course.states());
  for (const Leg& leg : course.legs) {
    (void)rates.advance(x, leg);
    if (leg.then != Then::analysis)
      rates.then(x, leg, share);
    else if (next < followed.size() && followed[next].analysis == leg.index)
      at(next++, x);
  }
}

}  // namespace

Followed follow(const Course& course, const Factors& factors, const Assumed& assumed, const SetAside& aside,
                double noise) {
  return Follower(course, factors, assumed, aside, noise).run();
}

Vec innovations(const Course& course, const Factors& factors, const Followed& followed,
                const Happening* more) {
  Index rows = 0;
  for (const Update& up : followed) rows += up.found.size();
  Vec all(rows);
  Index filled = 0;
  pass(course, factors, followed, start_of(course), [&](std::size_t k, Vec& x) {
    const Update& up = followed[k];
    const bool here = more && more->update == k;
    if (here && more->came_in.size() > 0) x += more->came_in;
    Vec e = up.found - up.H * x;
    if (here && more->came_in.size() == 0) e(static_cast<Index>(more->level)) -= 1;
    all.segment(filled, e.size()) = up.whitener * e;
    filled += e.size();
    x += up.gain * e;
  });
  return all;
}

std::vector<Vec> ahead(const Course& course, const Factors& factors, const Followed& followed) {
  std::vector<Vec> all(followed.size());
  pass(course, factors, followed, Vec::Zero(course.states()), [&](std::size_t k, Vec& x) {
    const Update& up = followed[k];
    for (std::size_t r = 0; r < up.rows.size(); ++r)
      if (const auto i = static_cast<Index>(r); up.first[r] || up.rows[r] == course.volume_at())
        x(up.rows[r]) = up.found(i) / up.H(i, up.rows[r]);  // the level is kept by hand, not foretold
    all[k] = up.H * x;
  });
  return all;
}

}  // namespace bathwright::learning
