// Paths that go through the same days together, so that the equilibria of a day are solved side by side.
#pragma once

#include "path.hpp"

namespace bathwright::forecast {

/// Equilibria of many states with one solver. One state alone starts from its last answer.
class Equilibria {
 public:
  explicit Equilibria(const speciation::Solver& solver) : solver_(&solver), session_(solver) {}

  /// `answer` holds during the call; amounts in it are to be multiplied by `scale`. A path without an answer
  /// ends with what stood in the way; the others go on.
  using Visit = std::function<void(std::size_t at, const speciation::Equilibrium& answer, double scale)>;
  void each(const std::vector<Path*>& paths, const std::optional<speciation::HeldPh>& pH, const Visit& visit);

 private:
  const speciation::Solver* solver_;
  speciation::Session session_;
  speciation::Equilibrium alone_;
  std::vector<speciation::Variant> variants_;
};

class Block {
 public:
  Block(const Prepared& p, const bath::TankState& start, const std::vector<Draw>& draws);

  /// The days to `last_day`, day 0 among them: `see` is given those of every path until it ends. `go_on` is
  /// asked after each day; where it says no, the run ends there.
  void run(int last_day, const std::function<void(std::size_t path, Day day)>& see,
           const std::function<bool(int day)>& go_on = {});
  /// Amounts alone, without looking at them.
  void pass(int first_day, int days);
  /// Path::place of the only path.
  Outcome place(const std::vector<double>& amounts) { return paths_.front().place(amounts); }

  /// Of the only path: the first day on which its equilibrium was no valid answer, and why.
  [[nodiscard]] const std::optional<FromDay>& indicative() const { return indicative_; }

  [[nodiscard]] const Path& path(std::size_t at) const { return paths_[at]; }

 private:
  void live(int day);
  void additions(const std::vector<const Compiled::Feed*>& due);
  void meet_pH(const Compiled::Feed& feed);
  void look(int day, const std::function<void(std::size_t path, Day day)>& see);
  void look_closer(int day, const speciation::Equilibrium& answer);
  /// Does something with every path that has not ended; one that fails ends.
  template <class Act>
  void each(const Act& act) {
    for (Path& path : paths_)
      if (!path.ended())
        if (Outcome done = act(path); !done) path.end(done.problems());
  }
  [[nodiscard]] std::vector<Path*> living();

  const Prepared& p_;
  std::vector<Path> paths_;
  Equilibria working_, idle_, holding_;
  speciation::Session rating_;
  int shifts_worked_ = 0;
  std::optional<FromDay> indicative_;
};

}  // namespace bathwright::forecast
