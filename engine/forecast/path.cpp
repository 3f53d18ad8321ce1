#include "path.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

namespace bathwright::forecast {
namespace {

using bath::Chemistry;
using bath::TankState;

constexpr double met_volume = 1e-11;  // of the tank: as near as rounding lets the water be found

void add(std::vector<double>& to, const std::vector<double>& more, double times) {
  for (std::size_t i = 0; i < more.size(); ++i) to[i] += times * more[i];
}

Problem no_room() {
  return {Fault::out_of_range, "", "the salts leave no room for water in the tank", "",
          "Bleed more, or add less."};
}

/// Whether a day of the year lies in a season that may run over the turn of the year.
bool within(const WaterSeason& season, std::chrono::month_day day) {
  return season.from <= season.to ? day >= season.from && day <= season.to
                                  : day >= season.from || day <= season.to;
}

}  // namespace

Path::Path(const Prepared& p, const TankState& start, const Draw& draw) : p_(p), state_(start), draw_(draw) {
  const std::size_t n = start.component_mol.size();
  if (!draw.level.empty()) {
    const auto& quantities = p.chemistry.type().quantities;
    for (std::size_t l = 0; l < p.levels.size(); ++l) {
      const double more_mol =
          (draw.level[l] - 1) * p.chemistry.quantity_mol(quantities[p.levels[l]], start.component_mol);
      for (std::size_t i = 0; i < n; ++i)
        state_.component_mol[i] +=
            p.mol_per_level_mol(static_cast<Eigen::Index>(i), static_cast<Eigen::Index>(l)) * more_mol;
    }
    for (std::size_t i = 1; i < n; ++i) state_.component_mol[i] = std::max(0.0, state_.component_mol[i]);
    neutralise(state_.component_mol);
  }
  const std::vector<double> none(n, 0);
  first_ = state_.component_mol;
  first_water_kg_ = state_.water_kg;
  for (auto* all : {&moved_.in, &moved_.out, &moved_.dragged, &moved_.bled, &moved_.decanted, &moved_.frozen,
                    &moved_.returned, &moved_.treated, &moved_.carried, &moved_.drag_in, &moved_.water,
                    &moved_.carbon_dioxide})
    *all = none;
  moved_.by_use.assign(p.compiled.uses.size(), none);
  moved_.feed_kg.assign(p.compiled.feeds.size(), 0);
  moved_.deposited_mol.assign(p.compiled.uses.size(), 0);
  known_.resize(2 * (1 + p.compiled.seasons.size()));
  last_ = &constant_rates(0, false);
  for (const Vessels::Stage& stage : p.vessels.stages) {
    rinse_mol_.push_back(none);
    add(rinse_mol_.back(), last_->water.component_mol, stage.volume_L);
    add(first_, rinse_mol_.back(), 1);
  }
}

void Path::neutralise(std::vector<double>& component_mol) const {
  const std::size_t by_charge = p_.chemistry.found_by_charge();
  double charge = 0;
  for (std::size_t i = 0; i < component_mol.size(); ++i) charge += p_.compiled.charge[i] * component_mol[i];
  double& mol = component_mol[by_charge];
  mol -= charge / p_.compiled.charge[by_charge];
  if (by_charge != 0) mol = std::max(0.0, mol);
}

std::size_t Path::water_of(int day) const {
  const Policy& policy = p_.policy;
  if (policy.seasons.empty()) return 0;
  const auto date = *policy.calendar.date(day);
  for (std::size_t s = 0; s < policy.seasons.size(); ++s)
    if (within(policy.seasons[s], {date.month(), date.day()})) return s + 1;
  return 0;
}

const Rates& Path::constant_rates(int day, bool works) {
  auto& known = known_[2 * water_of(day) + (works ? 1 : 0)];
  if (!known) known = rates(p_.tank, p_.compiled, p_.policy, draw_, works, water_of(day), {});
  return *known;
}

void Path::end(Problems problems) {
  for (Problem& problem : problems)
    problem.where = "day " + std::to_string(day_) + (problem.where.empty() ? "" : " " + problem.where);
  ended_ = std::move(problems);
}

/// What uses by state do in a state: its equilibrium at work, shown to each of them.
Result<EffectsNow> Path::effects(const TankState& state, speciation::Session& rating) {
  const Chemistry& c = p_.chemistry;
  if (Outcome solved = rating.solve_near_last(bath::task_of(state), rated_); !solved)
    return solved.problems();
  std::vector<double> levels;
  const double V = c.volume_L(state);
  for (const bath::Quantity& q : c.type().quantities)
    levels.push_back(c.quantity_mol(q, state.component_mol) * q.formula.molar_mass().v / V);
  activity_.clear();
  for (const double ln : rated_.ln_activity) activity_.push_back(std::exp(ln));
  const bath::IndicatorView view{
      state.temperature.v,    V,         rated_.pH(),      rated_.ionic_strength, levels,
      rated_.molality,        activity_, p_.species_names, rated_.water_kg,       p_.solid_names,
      rated_.saturation_index};
  EffectsNow all(p_.compiled.uses.size());
  for (std::size_t u = 0; u < all.size(); ++u) {
    if (!p_.compiled.uses[u].by_state) continue;
    auto now = p_.compiled.uses[u].use->rate(view);
    if (!now) return now.problems();
    all[u] = *std::move(now);
  }
  return all;
}

Outcome Path::work(int day, double hours, speciation::Session& rating) {
  return stretch(day, hours, true, rating);
}
Outcome Path::rest(int day, double hours, speciation::Session& rating) {
  return stretch(day, hours, false, rating);
}

Outcome Path::stretch(int day, double hours, bool works, speciation::Session& rating) {
  if (!(hours > 0)) return Done{};
  last_ = &constant_rates(day, works);
  if (!p_.compiled.by_state) return step(*last_, hours);
  auto first = effects(state_, rating);
  if (!first) return first.problems();
  const auto with = [&](const EffectsNow& effects) {
    return rates(p_.tank, p_.compiled, p_.policy, draw_, works, water_of(day), effects);
  };
  // Predicted without booking, corrected with the mean of both ends.
  const TankState before = state_;
  const auto rinses_before = rinse_mol_;
  const Moved moved_before = moved_;
  const double sums[] = {cost_, waste_L_, drag_out_L_, top_up_L_, filled_today_L_};
  if (auto done = step(with(*first), hours); !done) return done;
  auto second = effects(state_, rating);
  if (!second) return second.problems();
  state_ = before, rinse_mol_ = rinses_before, moved_ = moved_before;
  cost_ = sums[0], waste_L_ = sums[1], drag_out_L_ = sums[2], top_up_L_ = sums[3], filled_today_L_ = sums[4];
  EffectsNow mean = *std::move(first);
  for (std::size_t u = 0; u < mean.size(); ++u)
    for (std::size_t e = 0; e < mean[u].size(); ++e) mean[u][e] = (mean[u][e] + (*second)[u][e]) / 2;
  return step(with(mean), hours);
}

/// Water in a litre of what fills the tank up: of what the returning rinse holds, less what its salts take.
double Path::return_kg_per_L() const {
  if (p_.vessels.returning == 0) return 1;
  const auto& mol = rinse_mol_[p_.vessels.returning - 1];
  TankState litre{mol, 1, state_.temperature};
  const double volume_L = p_.vessels.stages[p_.vessels.returning - 1].volume_L;
  for (double& one : litre.component_mol) one /= volume_L;
  const TankState pure{std::vector<double>(mol.size(), 0), 1, state_.temperature};
  return std::max(0.1, 1 - (p_.chemistry.volume_L(litre) - p_.chemistry.volume_L(pure)));
}

void Path::end_of(const Rates& r, const Litres& flows, double hours, double tank_L, double fill_kg_per_L,
                  End& end) const {
  const Vessels& v = p_.vessels;
  const std::size_t vessels = v.count(), n = state_.component_mol.size();
  end.passage = passage(exchange(v, p_.policy, tank_L, flows), hours);
  end.mol.resize(vessels);
  for (std::size_t i = 0; i < vessels; ++i) end.mol[i].assign(n, 0);
  for (std::size_t j = 0; j < vessels; ++j) {
    const auto& now = j == 0 ? state_.component_mol : rinse_mol_[j - 1];
    const double water = water_into(v, p_.policy, j, flows);
    for (std::size_t i = 0; i < vessels; ++i) {
      const double stays = end.passage.stays(static_cast<Eigen::Index>(i), static_cast<Eigen::Index>(j)),
                   enters = end.passage.enters(static_cast<Eigen::Index>(i), static_cast<Eigen::Index>(j));
      auto& mol = end.mol[i];
      if (j == 0)
        for (std::size_t c = 0; c < n; ++c)
          mol[c] += stays * now[c] + enters * (r.in.component_mol[c] + water * r.water.component_mol[c] +
                                               flows.fill * r.with_fill.component_mol[c]);
      else
        for (std::size_t c = 0; c < n; ++c)
          mol[c] += stays * now[c] + enters * water * r.water.component_mol[c];
    }
  }
  VesselMatrix alone(1, 1);
  alone(0, 0) = -(flows.drag_out + flows.bleed + flows.overflow) / tank_L;
  const Passage of_water = vessels == 1 ? end.passage : passage(alone, hours);
  const double in_kg = r.in.water_kg + flows.fill * (fill_kg_per_L + r.with_fill.water_kg);
  end.water_kg = of_water.stays(0, 0) * state_.water_kg + of_water.enters(0, 0) * in_kg;
  end.lost_kg = -alone(0, 0) * (of_water.enters(0, 0) * state_.water_kg + of_water.lingers(0, 0) * in_kg);
}

/// The rate at which water must come in so that the tank ends at the mark; none where it ends above it, and
/// what then stands above the freeboard runs over.
Outcome Path::step(const Rates& r, double hours) {
  const double mark = p_.tank.working_volume.v, brim = mark + p_.tank.freeboard.v;
  const double tank_L = std::max(volume_L(), mark);
  const double fill_kg_per_L = return_kg_per_L();
  double& guess = fill_guess_[r.works ? 1 : 0];
  Litres flows{r.drag_out_L, r.bleed_L, 0, guess, r.works};
  const auto above = [&](double level) {
    end_of(r, flows, hours, tank_L, fill_kg_per_L, end_);
    if (!(end_.water_kg > 0)) return -level;
    return p_.chemistry.volume_L({end_.mol[0], end_.water_kg, state_.temperature}) - level;
  };
  constexpr int most_rounds = 60;
  /// Secants on one rate until the tank ends at a level.
  const auto find = [&](double& rate, double level, double slope) -> double {
    double gap = above(level), last_rate = rate, last_gap = gap;
    for (int round = 0; round < most_rounds && std::abs(gap) > met_volume * level; ++round) {
      const double next = std::max(0.0, rate - gap / slope);
      if (next == rate) break;
      last_rate = rate, last_gap = gap;
      rate = next;
      gap = above(level);
      if (gap != last_gap) slope = (gap - last_gap) / (rate - last_rate);
    }
    return gap;
  };
  const double gap = find(flows.fill, mark, hours * rise_);
  guess = flows.fill;
  if (gap > met_volume * mark && mark + gap > brim) find(flows.overflow, brim, -hours);
  if (!(end_.water_kg > 0)) return no_room();
  for (std::size_t i = 1; i < end_.mol[0].size(); ++i) {
    constexpr double rounding = 1e-9;
    if (end_.mol[0][i] < -rounding * std::max(1.0, state_.component_mol[i]))
      return Problem{Fault::out_of_range, p_.chemistry.components()[i],
                     "is used up, and nothing puts enough of it back", "",
                     "Add what replaces it to the policy."};
  }
  book(r, flows, hours, tank_L, fill_kg_per_L, end_);
  return Done{};
}

void Path::book(const Rates& r, const Litres& flows, double hours, double tank_L, double fill_kg_per_L,
                const End& end) {
  const Vessels& v = p_.vessels;
  const std::size_t vessels = v.count(), n = state_.component_mol.size();
  const double bath_water = water_into(v, p_.policy, 0, flows);
  for (std::size_t i = 0; i < vessels; ++i) {
    // Integral of the amounts in this vessel over the stretch.
    std::vector<double>& held = held_;
    held.assign(n, 0);
    for (std::size_t j = 0; j < vessels; ++j) {
      const double enters = end.passage.enters(static_cast<Eigen::Index>(i), static_cast<Eigen::Index>(j)),
                   lingers = end.passage.lingers(static_cast<Eigen::Index>(i), static_cast<Eigen::Index>(j));
      const auto& now = j == 0 ? state_.component_mol : rinse_mol_[j - 1];
      const double water = water_into(v, p_.policy, j, flows);
      for (std::size_t c = 0; c < n; ++c) {
        double in = water * r.water.component_mol[c];
        if (j == 0) in += r.in.component_mol[c] + flows.fill * r.with_fill.component_mol[c];
        held[c] += enters * now[c] + lingers * in;
      }
    }
    const double litres = i == 0 ? tank_L : v.stages[i - 1].volume_L;
    if (i == 0) {
      add(moved_.dragged, held, flows.drag_out / litres);
      add(moved_.bled, held, (flows.bleed + flows.overflow) / litres);
      add(moved_.out, held, (flows.bleed + flows.overflow) / litres);
      add(moved_.in, r.in.component_mol, hours);
      add(moved_.in, r.water.component_mol, bath_water * hours);
      add(moved_.in, r.with_fill.component_mol, flows.fill * hours);
    } else {
      const double treated = to_treatment(v, p_.policy, i, flows);
      add(moved_.treated, held, treated / litres);
      add(moved_.out, held, treated / litres);
      add(moved_.in, r.water.component_mol, water_into(v, p_.policy, i, flows) * hours);
      moved_.rinse_waste_L += treated * hours;
      if (i == v.returning) add(moved_.returned, held, flows.fill / litres);
    }
    if (i + 1 == vessels) {  // on the work, out of the last vessel
      add(moved_.out, held, flows.drag_out / litres);
      if (i > 0) add(moved_.carried, held, flows.drag_out / litres);
    }
  }
  moved_.water_in_kg += hours * (r.in.water_kg + flows.fill * (fill_kg_per_L + r.with_fill.water_kg));
  moved_.water_out_kg += end.lost_kg;
  add(moved_.drag_in, p_.compiled.drag_in.component_mol, r.drag_in_L * hours);
  add(moved_.water, r.water.component_mol, bath_water * hours);
  add(moved_.carbon_dioxide, p_.compiled.carbon_dioxide.component_mol, r.carbon_dioxide_g * hours);
  for (std::size_t u = 0; u < r.by_use.size(); ++u) add(moved_.by_use[u], r.by_use[u].component_mol, hours);
  for (std::size_t f = 0; f < r.feed_kg.size(); ++f)
    moved_.feed_kg[f] += hours * (r.feed_kg[f] + flows.fill * r.feed_kg_per_fill_L[f]);
  add(moved_.deposited_mol, r.deposited_mol, hours);
  moved_.water_cost += p_.compiled.water_price_per_L * flows.fill * hours;
  if (v.returning != 0) moved_.returned_L += flows.fill * hours;
  cost_ += (r.cost + flows.fill * r.cost_per_fill_L) * hours;
  drag_out_L_ += flows.drag_out * hours;
  waste_L_ += (flows.bleed + flows.overflow) * hours;
  top_up_L_ += flows.fill * hours;
  filled_today_L_ += flows.fill * hours;
  state_.component_mol = end.mol[0];
  state_.water_kg = end.water_kg;
  for (std::size_t i = 1; i < vessels; ++i) rinse_mol_[i - 1] = end.mol[i];
}

void Path::take_share(double share, std::vector<double>& into) {
  add(into, state_.component_mol, share);
  add(moved_.out, state_.component_mol, share);
  moved_.water_out_kg += share * state_.water_kg;
  for (double& mol : state_.component_mol) mol *= 1 - share;
  state_.water_kg *= 1 - share;
}

void Path::decants(int day) {
  for (const Decant& decant : p_.policy.decants) {
    if (decant.on_day > 0 ? day + 1 != decant.on_day : (day + 1) % decant.every_days != 0) continue;
    const double volume = volume_L();
    const double litres = std::min(volume, decant.share > 0 ? decant.share * volume : decant.litres);
    take_share(litres / volume, moved_.decanted);
    waste_L_ += litres;
  }
}

void Path::freeze_outs(int day) {
  for (const Compiled::Freeze& freeze : p_.compiled.freezes) {
    if ((day + 1) % freeze.rule->every_days != 0) continue;
    const double held_mol = p_.chemistry.quantity_mol(*freeze.quantity, state_.component_mol) *
                            (freeze.rule->litres / volume_L());
    const double out_mol =
        held_mol - freeze.rule->left_g_per_L * freeze.rule->litres / freeze.quantity->formula.molar_mass().v;
    const double crystals_mol =
        out_mol / p_.chemistry.quantity_mol(*freeze.quantity, freeze.per_mol.component_mol);
    if (!(crystals_mol > 0)) continue;
    add(state_.component_mol, freeze.per_mol.component_mol, -crystals_mol);
    add(moved_.frozen, freeze.per_mol.component_mol, crystals_mol);
    add(moved_.out, freeze.per_mol.component_mol, crystals_mol);
    state_.water_kg -= crystals_mol * freeze.per_mol.water_kg;
    moved_.water_out_kg += crystals_mol * freeze.per_mol.water_kg;
  }
}

void Path::dump_rinses(int day) {
  for (std::size_t s = 0; s < p_.vessels.stages.size(); ++s) {
    const Vessels::Stage& stage = p_.vessels.stages[s];
    const int every = p_.policy.rinses[stage.rinse].dump_every_days;
    if (every == 0 || (day + 1) % every != 0) continue;
    add(moved_.treated, rinse_mol_[s], 1);
    add(moved_.out, rinse_mol_[s], 1);
    moved_.rinse_waste_L += stage.volume_L;
    rinse_mol_[s].assign(rinse_mol_[s].size(), 0);
    add(rinse_mol_[s], last_->water.component_mol, stage.volume_L);
    add(moved_.in, last_->water.component_mol, stage.volume_L);
  }
}

void Path::put(const Compiled::Feed& feed, double kg) {
  if (!(kg > 0)) return;
  add(state_.component_mol, feed.per_kg.component_mol, kg);
  add(moved_.in, feed.per_kg.component_mol, kg);
  state_.water_kg += kg * feed.per_kg.water_kg;
  moved_.water_in_kg += kg * feed.per_kg.water_kg;
  moved_.feed_kg[static_cast<std::size_t>(&feed - p_.compiled.feeds.data())] += kg;
  cost_ += kg * feed.price_per_kg;
}

/// kg of each feed that bring the levels up to their aims, none negative: one feed after the other until none
/// moves.
void Path::meet_levels(const std::vector<const Compiled::Feed*>& due) {
  const double V = std::max(p_.tank.working_volume.v, volume_L());
  const auto held_mol = [&](const Compiled::Feed& feed) {
    return p_.chemistry.quantity_mol(*feed.quantity, state_.component_mol);
  };
  std::vector<const Compiled::Feed*> wanted;
  for (const Compiled::Feed* feed : due) {
    if (!feed->quantity) continue;
    const double M = feed->quantity->formula.molar_mass().v;
    if (!feed->rule->below || held_mol(*feed) * M / V < *feed->rule->below) wanted.push_back(feed);
  }
  constexpr int most_rounds = 40;
  for (int round = 0; round < most_rounds; ++round) {
    double moved = 0;
    for (const Compiled::Feed* feed : wanted) {
      const double M = feed->quantity->formula.molar_mass().v;
      const double missing_mol = feed->aim * V / M - held_mol(*feed);
      const double per_kg = p_.chemistry.quantity_mol(*feed->quantity, feed->per_kg.component_mol);
      if (!(per_kg > 0) || !(missing_mol > 0)) continue;
      put(*feed, missing_mol / per_kg);
      moved = std::max(moved, missing_mol * M / (feed->aim * V));
    }
    if (moved < 1e-12) break;
  }
}

void Path::turnover_feeds() {
  const double now = turnovers();
  for (const Compiled::Feed& feed : p_.compiled.feeds)
    if (feed.rule->by == Replenishment::By::turnover) put(feed, feed.kg_per_unit * (now - turned_over_));
  turned_over_ = now;
}

double Path::deposited_mol(const bath::Quantity& metal) const {
  double mol = 0;
  for (std::size_t u = 0; u < p_.compiled.uses.size(); ++u)
    if (p_.compiled.uses[u].use->deposits == metal.id) mol += moved_.deposited_mol[u];
  return mol;
}

double Path::turnovers() const {
  const Prepared::Metal* metal = counted_metal(p_);
  if (!metal) return 0;
  const bath::Quantity& q = p_.chemistry.type().quantities[metal->quantity];
  double lost = -p_.chemistry.quantity_mol(q, moved_.returned);
  for (const auto* out : {&moved_.dragged, &moved_.bled, &moved_.decanted})
    lost += p_.chemistry.quantity_mol(q, *out);
  return (deposited_mol(q) + lost) / metal->at_aim_mol;
}

void Path::top_up(double litres) {
  const std::size_t r = p_.vessels.returning;
  const double kg = litres * (return_kg_per_L() + last_->with_fill.water_kg);
  add(state_.component_mol, last_->with_fill.component_mol, litres);
  if (r == 0) {
    add(state_.component_mol, last_->water.component_mol, litres);
    add(moved_.water, last_->water.component_mol, litres);
  } else {
    const double share = litres / p_.vessels.stages[r - 1].volume_L;
    add(moved_.returned, rinse_mol_[r - 1], share);
    add(state_.component_mol, rinse_mol_[r - 1], share);
    for (double& mol : rinse_mol_[r - 1]) mol *= 1 - share;
    add(rinse_mol_[r - 1], last_->water.component_mol, litres);
    moved_.returned_L += litres;
  }
  add(moved_.in, last_->water.component_mol, litres);
  add(moved_.in, last_->with_fill.component_mol, litres);
  state_.water_kg += kg;
  moved_.water_in_kg += kg;
  for (std::size_t f = 0; f < moved_.feed_kg.size(); ++f)
    moved_.feed_kg[f] += litres * last_->feed_kg_per_fill_L[f];
  moved_.water_cost += p_.compiled.water_price_per_L * litres;
  cost_ += litres * last_->cost_per_fill_L;
  top_up_L_ += litres;
  filled_today_L_ += litres;
}

Outcome Path::fill_up() {
  constexpr int most_rounds = 60;
  const double mark = p_.tank.working_volume.v;
  double volume = volume_L();
  for (int round = 0; round < most_rounds; ++round) {
    const double missing = std::max((mark - volume) / rise_, -filled_today_L_);
    if (std::abs(missing) < met_volume * mark) break;
    top_up(missing);
    if (!(state_.water_kg > 0)) return no_room();
    const double before = std::exchange(volume, volume_L());
    constexpr double tells = 1e-6;  // below it rounding would be in the slope
    if (std::abs(missing) > tells * mark) rise_ = std::clamp((volume - before) / missing, 0.5, 2.0);
  }
  const double over = volume - (mark + p_.tank.freeboard.v);
  if (over > 0) {
    take_share(over / volume, moved_.bled);
    waste_L_ += over;
  }
  return Done{};
}

Day Path::seen(int day) const {
  const Chemistry& c = p_.chemistry;
  Day seen;
  seen.day = day;
  seen.volume_L = volume_L();
  seen.density_kg_per_L = c.density(state_).v;
  for (const bath::Quantity& q : c.type().quantities)
    seen.quantity_g_per_L.push_back(c.quantity_mol(q, state_.component_mol) * q.formula.molar_mass().v /
                                    seen.volume_L);
  seen.cost = cost_;
  seen.waste_L = waste_L_;
  seen.drag_out_L = drag_out_L_;
  seen.top_up_L = top_up_L_;
  seen.turnovers = turnovers();
  return seen;
}

void Path::judge(Day& day) {
  // What holds for the bath as it stands today is told as indicative; the forecast makes it no worse.
  if (day.day == 0) began_ = day.beyond;
  if (day.beyond == began_) day.beyond = Beyond::no;
  constexpr double most_over = 2;  // log10
  const auto& solids = p_.chemistry.working().system().solids();
  for (std::size_t s = 0; s < day.working_log10.size() && s < day.idle_log10.size(); ++s)
    if (day.beyond == Beyond::no && !solids[p_.watched[s]].slow &&
        (day.working_log10[s] < -most_over || day.idle_log10[s] < -most_over))
      day.beyond = Beyond::solid;
  if (beyond_ == Beyond::no) beyond_ = day.beyond;
  day.beyond = beyond_;
  if (beyond_ == Beyond::no) return;
  day.pH = bath::not_given;
  for (auto* headroom : {&day.working_log10, &day.idle_log10}) std::ranges::fill(*headroom, bath::not_given);
}

std::vector<double> Path::amounts() const {
  std::vector<double> all = state_.component_mol;
  for (const auto& rinse : rinse_mol_) all.insert(all.end(), rinse.begin(), rinse.end());
  return all;
}

Outcome Path::place(const std::vector<double>& amounts) {
  const auto n = static_cast<std::ptrdiff_t>(state_.component_mol.size());
  state_.component_mol.assign(amounts.begin(), amounts.begin() + n);
  neutralise(state_.component_mol);
  for (std::size_t s = 0; s < rinse_mol_.size(); ++s) {
    const auto from = amounts.begin() + n * static_cast<std::ptrdiff_t>(s + 1);
    rinse_mol_[s].assign(from, from + n);
    neutralise(rinse_mol_[s]);
  }
  filled_today_L_ = HUGE_VAL;  // whatever stands above the mark was water
  return fill_up();
}

Balance Path::balance() const {
  Balance balance;
  std::map<std::string, std::pair<double, double>> elements;  // residual and size, mol of atoms
  double charge = 0, ions = 0;
  const auto size_of = [](std::initializer_list<double> values) {
    double size = 1e-300;
    for (const double value : values) size = std::max(size, std::abs(value));
    return size;
  };
  const auto count = [&](const std::string& formula, double residual, double size) {
    const auto parsed = matter::Formula::parse(formula);
    if (!parsed) return;
    for (const matter::Atom& atom : parsed->atoms()) {
      elements[atom.element].first += atom.count * residual;
      elements[atom.element].second += atom.count * size;
    }
  };
  for (std::size_t i = 0; i < first_.size(); ++i) {
    double now = state_.component_mol[i];
    charge += p_.compiled.charge[i] * now;
    ions += std::abs(p_.compiled.charge[i] * now);
    for (const auto& rinse : rinse_mol_) now += rinse[i];
    const double residual = now - first_[i] - moved_.in[i] + moved_.out[i];
    const double size = size_of({first_[i], now, moved_.in[i], moved_.out[i]});
    balance[p_.chemistry.components()[i]] = residual / size;
    count(p_.chemistry.components()[i], residual, size);
  }
  const double water = state_.water_kg - first_water_kg_ - moved_.water_in_kg + moved_.water_out_kg;
  const double water_size =
      size_of({state_.water_kg, first_water_kg_, moved_.water_in_kg, moved_.water_out_kg});
  balance["water"] = water / water_size;
  count("H2O", water / activity::water_kg_per_mol, water_size / activity::water_kg_per_mol);
  balance["charge"] = charge / std::max(ions, 1e-300);
  for (const auto& [element, sums] : elements) balance[element] = sums.first / sums.second;
  return balance;
}

}  // namespace bathwright::forecast
