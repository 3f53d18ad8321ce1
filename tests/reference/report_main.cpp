// reference_report [file]: writes REPORT.md, by default into the current folder.
#include <fstream>
#include <iostream>

#include "report.hpp"

int main(int argc, char** argv) {
  const std::string path = argc > 1 ? argv[1] : "REPORT.md";
  std::ofstream file(path);
  file << bathwright::reference::markdown(bathwright::reference::compare_all());
  file.close();
  if (!file) {
    std::cerr << path << ": cannot be written\n";
    return 1;
  }
}
