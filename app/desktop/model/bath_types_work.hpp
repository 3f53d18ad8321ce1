// The bath types at hand, and one plugin looked at before it is allowed: both start child processes and take
// a while.
#pragma once

#include <functional>

#include "../panels/view.hpp"
#include "work/allowed_plugins.hpp"

namespace bathwright::desktop {

struct BathTypesQuestion {
  work::Session session;
  std::filesystem::path examine;  ///< a plugin to look at besides; empty: none
};

struct Examination {
  std::filesystem::path file;
  Result<plugin_host::Examined> found;
};

struct BathTypesAnswer {
  std::vector<BathTypeRow> rows;
  std::optional<Examination> examination;
};

/// The list first, then with what was looked at.
void read_bath_types(const BathTypesQuestion& question, const std::function<void(BathTypesAnswer)>& give);

[[nodiscard]] ExaminedView examined_view(const Examination& examination);

}  // namespace bathwright::desktop
