// Writes the table of bath types to the file named on the command line.
#include <cstdio>
#include <fstream>

#include "bath_table.hpp"

int main(int count, char** arguments) {
  if (count != 2) {
    std::fputs("bath_report FILE: where the table goes\n", stderr);
    return 2;
  }
  std::ofstream file(arguments[1]);
  file << bath_table::markdown(bath_table::demonstration_tanks());
  return file.flush() ? 0 : 3;
}
