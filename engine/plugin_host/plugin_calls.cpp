#include "plugin_calls.hpp"

#include <algorithm>
#include <cmath>

namespace bathwright::plugin_host {
namespace {

/// The solved bath as the interface states it; `state` must outlive it.
class View {
 public:
  explicit View(const bath::IndicatorView& state) {
    names_.reserve(state.species_names.size());
    for (const std::string& name : state.species_names) names_.push_back(name.c_str());
    view_ = {sizeof(bw_view),
             static_cast<std::uint32_t>(state.quantity_g_per_L.size()),
             static_cast<std::uint32_t>(names_.size()),
             0,
             state.temperature_C,
             state.volume_L,
             state.pH,
             state.ionic_strength,
             state.quantity_g_per_L.data(),
             names_.data(),
             state.species_molality.data(),
             state.species_activity.data()};
  }
  [[nodiscard]] const bw_view* get() const { return &view_; }

 private:
  std::vector<const char*> names_;
  bw_view view_{};
};

/// `values` as `function` fills them.
template <class Function>
Result<std::vector<double>> called(const std::string& where, std::size_t count, const Function& function) {
  std::vector<double> values(count, bath::not_given);
  bw_status status = BW_REFUSED;
  try {
    status = function(values.data());
  } catch (...) {
    return Problem{Fault::inconsistent_data, where, "the plugin let out an exception", "a status", ""};
  }
  switch (status) {
    case BW_OK:
      if (std::ranges::all_of(values, [](double value) { return std::isfinite(value); })) return values;
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

std::function<Result<double>(const bath::IndicatorView&)> call_indicator(std::string where, Eval eval) {
  return [where = std::move(where), eval](const bath::IndicatorView& state) -> Result<double> {
    const View view(state);
    const auto values = called(where, 1, [&](double* value) { return eval(view.get(), value); });
    if (!values) return values.problems();
    return values->front();
  };
}

std::function<Result<std::vector<double>>(const bath::IndicatorView&)> call_rate(std::string where, Rate rate,
                                                                                 std::uint32_t count) {
  return [where = std::move(where), rate, count](const bath::IndicatorView& state) {
    const View view(state);
    return called(where, count, [&](double* values) { return rate(view.get(), values, count); });
  };
}

}  // namespace bathwright::plugin_host
