// A sheet of paper as dots, for a screen.
#pragma once

#include <cstdint>
#include <vector>

namespace bathwright::sheets {

struct Picture {
  int width = 0, height = 0;
  std::vector<std::uint8_t> rgba;  ///< red, green, blue, opacity of each dot, row after row from the top
};

}  // namespace bathwright::sheets
