// disturbed_report FILE [TANK.toml ...]: pushes every demonstration tank, or those named, and writes the
// table.
#include <cstdio>
#include <fstream>

#include "disturbed_tanks.hpp"

int main(int count, char** arguments) {
  if (count < 2) {
    std::fputs("disturbed_report FILE [TANK.toml ...]: where the table goes, which tanks\n", stderr);
    return 2;
  }
  std::ofstream file(arguments[1]);
  file << disturbed::report(disturbed::push_all({arguments + 2, arguments + count}));
  return file.flush() ? 0 : 3;
}
