#include <bathwright/bath/at_aims.hpp>

namespace bathwright::bath {

Result<TankState> state_at_aims(const Tank& tank, const Chemistry& chemistry) {
  std::map<std::string, double> g_per_L;
  for (const Aim& aim : tank.aims)
    if (aim.quantity != "pH") g_per_L[aim.quantity] = aim.aim;
  const Aim* pH = tank.aim("pH");
  if (!pH && chemistry.type().acid_by_pH())
    return Problem{Fault::bad_input, tank.file + ": target", "has no pH", "an aim for pH",
                   "Add one, or give readings."};
  return chemistry.state_from(g_per_L, pH ? std::optional(pH->aim) : std::nullopt, tank.working_volume,
                              tank.temperature);
}

}  // namespace bathwright::bath
