#include <bathwright/activity/model.hpp>
#include <cstdlib>

namespace bathwright::activity {

std::string_view name(ModelKind kind) {
  switch (kind) {
    case ModelKind::davies:
      return "davies";
    case ModelKind::debye_huckel:
      return "debye-huckel";
    case ModelKind::pitzer:
      return "pitzer";
  }
  return "";
}

Convention convention(ModelKind kind) {
  return kind == ModelKind::pitzer ? Convention::interaction : Convention::association;
}

int charge_in_name(std::string_view name) {
  const std::size_t caret = name.rfind('^');
  if (caret == std::string_view::npos) return 0;
  const std::string_view charge = name.substr(caret + 1);
  const int size = charge.size() == 1 ? 1 : std::atoi(std::string(charge).c_str());
  return charge.ends_with('-') ? -size : size;
}

double ionic_strength(std::span<const double> molality, std::span<const int> charge) {
  double twice = 0;
  for (std::size_t i = 0; i < molality.size(); ++i) twice += molality[i] * charge[i] * charge[i];
  return twice / 2;
}

}  // namespace bathwright::activity
