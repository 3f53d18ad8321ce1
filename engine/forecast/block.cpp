#include "block.hpp"

#include <bathwright/speciation/coverage.hpp>
#include <cmath>

namespace bathwright::forecast {
void Equilibria::each(const std::vector<Path*>& paths, const std::optional<speciation::HeldPh>& pH,
                      const Visit& visit) {
  if (paths.empty()) return;
  speciation::Task task = bath::task_of(paths.front()->state());
  task.pH = pH;
  if (paths.size() == 1) {
    if (Outcome solved = session_.solve_near_last(task, alone_); solved)
      visit(0, alone_, 1);
    else
      paths.front()->end(solved.problems());
    return;
  }
  // Variants share the water of their task: every state is scaled to it.
  while (variants_.size() < paths.size()) variants_.push_back({{}, solver_->ln_K()});
  for (std::size_t i = 0; i < paths.size(); ++i) {
    variants_[i].component_mol = paths[i]->state().component_mol;
    for (double& mol : variants_[i].component_mol) mol *= task.water_kg / paths[i]->state().water_kg;
  }
  const Outcome solved = session_.solve_variants_near_last(
      task, std::span(variants_).first(paths.size()),
      [&](std::size_t at, const Outcome& found, const speciation::Equilibrium& answer) {
        if (found)
          visit(at, answer, paths[at]->state().water_kg / task.water_kg);
        else
          paths[at]->end(found.problems());
      });
  if (solved) return;
  // The first has no answer: without it.
  paths.front()->end(solved.problems());
  each({paths.begin() + 1, paths.end()}, pH,
       [&](std::size_t at, const speciation::Equilibrium& answer, double scale) {
         visit(at + 1, answer, scale);
       });
}

Block::Block(const Prepared& p, const bath::TankState& start, const std::vector<Draw>& draws)
    : p_(p),
      working_(p.chemistry.working()),
      idle_(p.chemistry.idle()),
      holding_(p.chemistry.working()),
      rating_(p.chemistry.working()) {
  paths_.reserve(draws.size());
  for (const Draw& draw : draws) paths_.emplace_back(p, start, draw);
}

std::vector<Path*> Block::living() {
  std::vector<Path*> all;
  for (Path& path : paths_)
    if (!path.ended()) all.push_back(&path);
  return all;
}

void Block::run(int last_day, const std::function<void(std::size_t, Day)>& see,
                const std::function<bool(int)>& go_on) {
  look(0, see);
  for (int day = 0; day < last_day && !living().empty(); ++day) {
    if (go_on && !go_on(day)) return;
    live(day);
    look(day + 1, see);
  }
}

void Block::pass(int first_day, int days) {
  for (int day = first_day; day < first_day + days; ++day) live(day);
}

void Block::live(int day) {
  const Calendar& calendar = p_.policy.calendar;
  for (Path& path : paths_) path.begin_day(day);
  double worked_h = 0;
  if (calendar.works_on(day)) {
    worked_h = calendar.worked_h_per_day();
    const int stretches = p_.compiled.by_shift ? calendar.shifts_per_day : 1;
    for (int stretch = 0; stretch < stretches; ++stretch) {
      each([&](Path& path) { return path.work(day, worked_h / stretches, rating_); });
      if (!p_.compiled.by_shift) continue;
      ++shifts_worked_;
      std::vector<const Compiled::Feed*> due;
      for (const Compiled::Feed& feed : p_.compiled.feeds)
        if (feed.rule->by == Replenishment::By::analysis && feed.rule->every_shifts > 0 &&
            shifts_worked_ % feed.rule->every_shifts == 0)
          due.push_back(&feed);
      additions(due);
      each([](Path& path) { return path.fill_up(); });
    }
  }
  each([&](Path& path) -> Outcome {
    if (Outcome done = path.rest(day, 24 - worked_h, rating_); !done) return done;
    path.decants(day);
    path.freeze_outs(day);
    path.dump_rinses(day);
    path.turnover_feeds();
    return Done{};
  });
  std::vector<const Compiled::Feed*> due;
  for (const Compiled::Feed& feed : p_.compiled.feeds)
    if (feed.rule->by == Replenishment::By::analysis && feed.rule->every_shifts == 0 &&
        (day + 1) % feed.rule->every_days == 0)
      due.push_back(&feed);
  additions(due);
  each([](Path& path) { return path.fill_up(); });
}

/// Levels first; the pH last, by the acid or alkali that its equilibrium asks for with the tank at its mark.
void Block::additions(const std::vector<const Compiled::Feed*>& due) {
  if (due.empty()) return;
  // From the mark, as the tank will stand in the end: what was put in earlier takes the place of water.
  each([&](Path& path) -> Outcome {
    if (Outcome filled = path.fill_up(); !filled) return filled.problems();
    path.meet_levels(due);
    return Done{};
  });
  for (const Compiled::Feed* feed : due)
    if (!feed->quantity) meet_pH(*feed);
  each([](Path& path) { return path.fill_up(); });
}

void Block::meet_pH(const Compiled::Feed& feed) {
  const double acid_per_kg = feed.per_kg.component_mol[0];
  if (acid_per_kg == 0) return;
  constexpr int most_rounds = 6;
  constexpr double least_kg_per_L = 1e-8, shrinks = 0.1;
  const double least_kg = least_kg_per_L * p_.tank.working_volume.v;
  const speciation::HeldPh held{feed.aim, p_.chemistry.counter_ion()};
  std::vector<Path*> open = living();
  std::vector<double> last_kg(open.size(), 0);
  for (int round = 0; round < most_rounds && !open.empty(); ++round) {
    each([](Path& path) { return path.fill_up(); });
    std::vector<double> kg(open.size(), 0);
    holding_.each(open, held, [&](std::size_t at, const speciation::Equilibrium& answer, double scale) {
      kg[at] = answer.held_ph_mol * scale / acid_per_kg;
    });
    std::vector<Path*> still;
    std::vector<double> put_kg;
    for (std::size_t i = 0; i < open.size(); ++i) {
      // Nothing, or the other way: this feed cannot help.
      if (open[i]->ended() || !(kg[i] > least_kg)) continue;
      // What the feed changes beside the acid asks for a little more each time, in a steady proportion: all
      // of the rest at once, to the second order.
      const double proportion = last_kg[i] > 0 ? kg[i] / last_kg[i] : 1;
      const bool foreseen = proportion < shrinks;
      open[i]->put(feed, foreseen ? kg[i] / (1 - proportion) : kg[i]);
      if (foreseen && kg[i] * proportion * proportion < least_kg) continue;
      still.push_back(open[i]);
      put_kg.push_back(kg[i]);
    }
    open = std::move(still);
    last_kg = std::move(put_kg);
  }
}

void Block::look_closer(int day, const speciation::Equilibrium& answer) {
  const speciation::Solver& solver = p_.chemistry.working();
  const auto covered = speciation::coverage(solver, answer);
  if (covered.valid) return;
  indicative_ = FromDay{day, !answer.stable ? "the activity model is outside its range"
                             : answer.ionic_strength > solver.model().trusted_ionic_strength()
                                 ? "the ionic strength is beyond what the model is trusted to"
                             : covered.u_ln_gamma > speciation::most_u_ln_gamma
                                 ? "an activity coefficient that matters is too uncertain"
                                 : "there is more of a salt than its parameters were fitted to"};
}

void Block::look(int day, const std::function<void(std::size_t, Day)>& see) {
  std::vector<Path*> paths = living();
  std::vector<Day> days;
  days.reserve(paths.size());
  for (const Path* path : paths) days.push_back(path->seen(day));
  const auto room = [&](const speciation::Solver& solver, const speciation::Equilibrium& answer,
                        std::size_t k) {
    return solver.covers(k) && std::isfinite(answer.saturation_index[k]) ? -answer.saturation_index[k]
                                                                         : bath::not_given;
  };
  const bath::Chemistry& c = p_.chemistry;
  working_.each(paths, std::nullopt,
                [&](std::size_t at, const speciation::Equilibrium& answer, double scale) {
                  days[at].pH = answer.pH();
                  days[at].water_kg_per_L = answer.water_kg * scale / days[at].volume_L;
                  if (!answer.stable)
                    days[at].beyond = Beyond::curvature;
                  else if (answer.ionic_strength > p_.most_ionic_strength)
                    days[at].beyond = Beyond::ionic_strength;
                  if (paths_.size() == 1 && !indicative_) look_closer(day, answer);
                  for (const std::size_t k : p_.watched)
                    days[at].working_log10.push_back(room(c.working(), answer, k));
                });
  idle_.each(paths, std::nullopt, [&](std::size_t at, const speciation::Equilibrium& answer, double) {
    for (const std::size_t k : p_.watched) days[at].idle_log10.push_back(room(c.idle(), answer, k));
  });
  for (std::size_t i = 0; i < days.size(); ++i) paths[i]->judge(days[i]);
  for (std::size_t i = 0; i < days.size(); ++i)
    if (!paths[i]->ended()) see(static_cast<std::size_t>(paths[i] - paths_.data()), std::move(days[i]));
}

}  // namespace bathwright::forecast
