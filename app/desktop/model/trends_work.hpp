// The trends page of a tank, from the log.
#pragma once

#include <bathwright/bath/tank.hpp>

#include "../panels/view.hpp"
#include "work/session.hpp"

namespace bathwright::desktop {

struct TrendsQuestion {
  work::Session session;
  bath::Tank tank;
};

struct TrendsAnswer {
  std::string tank;  ///< its name
  TrendsView view;
};

[[nodiscard]] TrendsAnswer read_trends(const TrendsQuestion& question);

}  // namespace bathwright::desktop
