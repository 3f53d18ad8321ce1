#include "parking.hpp"

#include <time.h>

#include <algorithm>
#include <atomic>
#include <memory>

namespace bathwright::plugin_host {
namespace {

/// `function`, counted; a plugin's own fault is told by its kind (plugin_calls.hpp).
template <class Value>
auto counted(std::function<Result<Value>(const bath::IndicatorView&)> function, std::string where,
             std::shared_ptr<std::atomic<int>> faults) {
  return [function = std::move(function), where = std::move(where),
          faults = std::move(faults)](const bath::IndicatorView& state) -> Result<Value> {
    if (*faults >= most_faults)
      return Problem{Fault::inconsistent_data, where,
                     "the plugin is parked after " + std::to_string(most_faults) + " faults", "",
                     "Report it to the plugin's author; it is tried again when the program next starts."};
    const double begun_s = thread_time_s();
    auto value = function(state);
    const bool late = thread_time_s() - begun_s > longest_call_s;
    const auto is_fault = [](const Problem& p) { return p.kind == Fault::inconsistent_data; };
    if (late || (!value && std::ranges::any_of(value.problems(), is_fault))) ++*faults;
    return value;
  };
}

}  // namespace

double thread_time_s() {
  timespec now{};
  ::clock_gettime(CLOCK_THREAD_CPUTIME_ID, &now);
  return static_cast<double>(now.tv_sec) + 1e-9 * static_cast<double>(now.tv_nsec);
}

void park_after_faults(std::vector<bath::BathType>& types) {
  const auto faults = std::make_shared<std::atomic<int>>(0);
  for (bath::BathType& type : types) {
    for (bath::Indicator& indicator : type.indicators)
      indicator.evaluate =
          counted<double>(std::move(indicator.evaluate), type.id + ' ' + indicator.id, faults);
    for (bath::Use& use : type.uses)
      if (use.rate)
        use.rate = counted<std::vector<double>>(std::move(use.rate), type.id + ' ' + use.id, faults);
  }
}

}  // namespace bathwright::plugin_host
