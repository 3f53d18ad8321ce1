// The bath types of this build, as a run of the program finds them. Probed once for all tests.
#pragma once

#include <bathwright/plugin_host/registry.hpp>

inline const bathwright::plugin_host::BathTypes& built_in_types() {
  static const auto types = [] {
    bathwright::plugin_host::Places places = bathwright::plugin_host::built_in_places();
    places.cache = TEST_CACHE;
    return bathwright::plugin_host::BathTypes::discover(places);
  }();
  return types;
}
