// The trends page of a tank, from the log.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <bathwright/sheets/trends_sheet.hpp>

#include "work/session.hpp"

namespace bathwright::desktop {

struct TrendsQuestion {
  work::Session session;
  bath::Tank tank;
};

struct TrendsAnswer {
  std::string tank;   ///< its name
  std::string empty;  ///< why there is nothing to show
  std::optional<sheets::Trends> trends;
  std::vector<std::string> findings;
};

[[nodiscard]] TrendsAnswer read_trends(const TrendsQuestion& question);

}  // namespace bathwright::desktop
