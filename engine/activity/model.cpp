#include <algorithm>
#include <array>
#include <bathwright/activity/model.hpp>
#include <cstdlib>

namespace bathwright::activity {

std::string_view name(ModelKind kind) {
  switch (kind) {
    case ModelKind::davies:
      return "davies";
    case ModelKind::debye_huckel:
      return "debye-huckel";
    case ModelKind::sit:
      return "sit";
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

ActivityModel::ActivityModel(std::vector<std::uint16_t> kind_of)
    : kind_of_(std::move(kind_of)),
      kinds_(kind_of_.empty() ? 0 : *std::max_element(kind_of_.begin(), kind_of_.end()) + 1u) {}

double ActivityModel::evaluate(std::span<const double> molality, std::span<double> ln_gamma) const {
  std::array<double, max_solutes> sum{}, ln_gamma_of_kind;
  for (std::size_t i = 0; i < kind_of_.size(); ++i) sum[kind_of_[i]] += molality[i];
  const double ln_water = evaluate_kinds({sum.data(), kinds_}, {ln_gamma_of_kind.data(), kinds_});
  for (std::size_t i = 0; i < kind_of_.size(); ++i) ln_gamma[i] = ln_gamma_of_kind[kind_of_[i]];
  return ln_water;
}

double ionic_strength(std::span<const double> molality, std::span<const int> charge) {
  double twice = 0;
  for (std::size_t i = 0; i < molality.size(); ++i) twice += molality[i] * charge[i] * charge[i];
  return twice / 2;
}

}  // namespace bathwright::activity
