#include <bathwright/bath/taken_out.hpp>

namespace bathwright::bath {

TankState without(TankState state, double share) {
  for (double& mol : state.component_mol) mol *= 1 - share;
  state.water_kg *= 1 - share;
  return state;
}

}  // namespace bathwright::bath
