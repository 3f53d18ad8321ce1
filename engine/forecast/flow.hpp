// A tank and the rinses behind it over hours in which nothing changes but the amounts: one linear system,
// dn/dt = A n + p, the same A for every component, stepped exactly.
#pragma once

#include <Eigen/Core>

#include "balance.hpp"

namespace bathwright::forecast {

inline constexpr int most_vessels = 9;  // the tank and eight rinse stages
using VesselMatrix = Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, 0, most_vessels, most_vessels>;

/// How the rinses of a policy stand behind the tank, which is vessel 0.
struct Vessels {
  struct Stage {
    std::size_t rinse;  ///< of the policy
    bool first, last;   ///< of its rinse
    double volume_L;
  };
  std::vector<Stage> stages;  ///< vessel 1, 2, ...
  std::size_t returning = 0;  ///< vessel that gives back to the tank; 0: none

  static Vessels of(const Policy& policy);
  [[nodiscard]] std::size_t count() const { return stages.size() + 1; }
};

/// Litres an hour between the vessels and out of them.
struct Litres {
  double drag_out = 0, bleed = 0, overflow = 0, fill = 0;
  bool works = false;
};

/// Water that enters a vessel, and rinse water that goes to treatment from it, L/h.
[[nodiscard]] double water_into(const Vessels& v, const Policy& policy, std::size_t vessel,
                                const Litres& flows);
[[nodiscard]] double to_treatment(const Vessels& v, const Policy& policy, std::size_t vessel,
                                  const Litres& flows);

/// A, per hour.
[[nodiscard]] VesselMatrix exchange(const Vessels& v, const Policy& policy, double tank_L,
                                    const Litres& flows);

/// n(t) = stays n(0) + enters p;  integral of n over the hours = enters n(0) + lingers p.
struct Passage {
  VesselMatrix stays, enters, lingers;
};
[[nodiscard]] Passage passage(const VesselMatrix& per_h, double hours);

}  // namespace bathwright::forecast
