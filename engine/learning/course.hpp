// A history in the terms of the filter: which quantities are followed, and the legs between one entry and the
// next.
#pragma once

#include <Eigen/Dense>
#include <bathwright/forecast/compiled.hpp>
#include <bathwright/learning/learn.hpp>

namespace bathwright::learning {

using Vec = Eigen::VectorXd;
using Mat = Eigen::MatrixXd;

/// A use of the bath type as the history has it.
struct UseInGrams {
  const forecast::CompiledUse* compiled = nullptr;
  Vec effects;          ///< g per unit, as the bath type states them
  Vec fed;              ///< g per unit, by the policy's rules for chemicals that are never logged
  bool plates = false;  ///< takes a followed metal out
  bool logged = false, always = false;
  double total = 0;      ///< units over the whole history
  double per_shift = 0;  ///< units in a shift that works, on average
};

enum class Then : std::uint8_t { analysis, added, watered, dumped, nothing };

/// A stretch in which everything goes evenly, and the entry at its end.
struct Leg {
  double from_h = 0, hours = 0, worked_h = 0;
  std::vector<double> units;  ///< per use
  double area_m2 = 0;
  Then then = Then::nothing;
  std::size_t index = 0;  ///< in the history's list of its kind
};

/// Vectors are over the states of the filter: grams of the followed quantities; where water was logged, the
/// volume in L; the relative error that the analyses of each quantity have for the time being.
struct Course {
  const History* history = nullptr;
  const forecast::Policy* policy = nullptr;
  std::vector<const bath::Quantity*> followed;
  std::string
      tracer;         ///< label of a quantity that only drag-out and bleed take away and that is not followed
  Mat grams_per_mol;  ///< (states, components)
  bool follows_volume = false;
  double mark_L = 0;
  double titrant_h = 0;  ///< time over which an error of analysis fades
  std::vector<UseInGrams> uses;
  Vec water, drag_in;             ///< g per litre
  Vec fed_per_h;                  ///< as UseInGrams::fed, by the hour
  std::vector<Vec> added_per_kg;  ///< per History::added; the volume among them
  struct OnShelf {
    const bath::ShelfItem* item = nullptr;
    Vec per_kg;
    bool ever_added = false;
  };
  std::vector<OnShelf> shelf;  ///< what raises a followed quantity
  bool area_logged = false, area_by_work = false;
  double area_m2 = 0, area_per_shift_m2 = 0, worked_h = 0, hours = 0;
  std::vector<Leg> legs;

  [[nodiscard]] Eigen::Index quantities() const { return static_cast<Eigen::Index>(followed.size()); }
  [[nodiscard]] Eigen::Index states() const { return 2 * quantities() + (follows_volume ? 1 : 0); }
  [[nodiscard]] Eigen::Index volume_at() const { return follows_volume ? quantities() : -1; }
  [[nodiscard]] Eigen::Index error_at(Eigen::Index quantity) const {
    return quantities() + (follows_volume ? 1 : 0) + quantity;
  }
  [[nodiscard]] Vec grams(const forecast::Amounts& amounts) const {
    return grams_per_mol * Eigen::Map<const Vec>(amounts.component_mol.data(),
                                                 static_cast<Eigen::Index>(amounts.component_mol.size()));
  }
  /// Position of a quantity among the followed; nothing where it is not.
  [[nodiscard]] std::optional<Eigen::Index> position(const std::string& quantity) const;
};

/// `compiled` is of `policy`; all but the return value must outlive it. Fails as learn().
Result<Course> course_of(const bath::Tank& tank, const bath::Chemistry& chemistry,
                         const forecast::Policy& policy, const forecast::Compiled& compiled,
                         const History& history, const Assumed& assumed);

}  // namespace bathwright::learning
