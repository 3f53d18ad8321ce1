// What of a history does not fit, and where: a level, an addition, a loss, a figure that changed.
#pragma once

#include "estimate.hpp"

namespace bathwright::learning {

/// A single thing that happened or was misread, and how it is set aside.
struct Oddity {
  Suspect suspect;
  std::optional<std::pair<std::size_t, Eigen::Index>> level;
  std::optional<std::pair<std::size_t, Vec>> shock;
};

/// The strongest oddity beyond `limit` standard uncertainties; nothing where all fits.
std::optional<Oddity> strongest_oddity(const Course& course, const std::vector<Prior>& priors,
                                       const Estimate& estimate, double limit);

/// A figure that was another before some day, and the unknown that allows for it.
struct Changed {
  Suspect suspect;
  Prior prior;
};
std::optional<Changed> strongest_change(const Course& course, const std::vector<Prior>& priors,
                                        const Estimate& estimate, double limit);
/// Its size and words, once that unknown is learned.
void tell_change(Suspect& suspect, double ln_before, double u);

/// What goes on all the time, and figures far outside of what was stated.
std::vector<Suspect> lasting(const Course& course, const std::vector<Prior>& priors, const Estimate& estimate,
                             double limit);

}  // namespace bathwright::learning
