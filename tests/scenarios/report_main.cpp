// Writes the table of scenarios to the file named on the command line.
#include <cstdio>
#include <fstream>

#include "scenario_table.hpp"

int main(int count, char** arguments) {
  if (count != 2) {
    std::fputs("scenario_report FILE: where the table goes\n", stderr);
    return 2;
  }
  std::ofstream file(arguments[1]);
  file << scenario_table::markdown(scenario_table::figures());
  return file.flush() ? 0 : 3;
}
