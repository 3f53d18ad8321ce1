#include "indicator.hpp"

#include <cmath>

namespace bathwright::plugin_host {
namespace {

Result<double> call(const std::string& where, bw_status (*eval)(const bw_view*, double*),
                    const bath::IndicatorView& state) {
  std::vector<const char*> names;
  names.reserve(state.species_names.size());
  for (const std::string& name : state.species_names) names.push_back(name.c_str());
  const bw_view view = {sizeof(bw_view),
                        static_cast<std::uint32_t>(state.quantity_g_per_L.size()),
                        static_cast<std::uint32_t>(names.size()),
                        0,
                        state.temperature_C,
                        state.volume_L,
                        state.pH,
                        state.ionic_strength,
                        state.quantity_g_per_L.data(),
                        names.data(),
                        state.species_molality.data(),
                        state.species_activity.data()};
  double value = bath::not_given;
  bw_status status = BW_REFUSED;
  try {
    status = eval(&view, &value);
  } catch (...) {
    return Problem{Fault::inconsistent_data, where, "the plugin let out an exception", "a status", ""};
  }
  switch (status) {
    case BW_OK:
      if (std::isfinite(value)) return value;
      return Problem{Fault::inconsistent_data, where, "the plugin gave no finite number", "a finite number",
                     ""};
    case BW_NOT_KNOWN:
      return Problem{Fault::bad_input, where, "something it needs is not known", "", ""};
    case BW_OUT_OF_RANGE:
      return Problem{Fault::out_of_range, where, "the bath lies outside what it is good for", "", ""};
    default:
      return Problem{Fault::inconsistent_data, where, "the plugin gave status " + std::to_string(status),
                     "BW_OK, BW_NOT_KNOWN or BW_OUT_OF_RANGE", ""};
  }
}

}  // namespace

std::function<Result<double>(const bath::IndicatorView&)> call_indicator(std::string where,
                                                                         bw_status (*eval)(const bw_view*,
                                                                                           double*)) {
  return
      [where = std::move(where), eval](const bath::IndicatorView& state) { return call(where, eval, state); };
}

}  // namespace bathwright::plugin_host
