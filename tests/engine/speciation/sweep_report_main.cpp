// sweep_report [file [cases]]: writes SWEEP.md, by default into the current folder, of 100000 cases a row.
#include <cstdlib>
#include <fstream>
#include <iostream>

#include "sweep.hpp"

using namespace bathwright::speciation;

int main(int argc, char** argv) {
  const std::string path = argc > 1 ? argv[1] : "SWEEP.md";
  const long cases = argc > 2 ? std::atol(argv[2]) : 100000;
  if (cases <= 0) {
    std::cerr << argv[2] << ": expected a number of cases above 0\n";
    return 1;
  }
  constexpr unsigned seed = 20260918;  // as the long test
  const auto rows = sweep_all(seed, static_cast<std::size_t>(cases), 2);
  std::ofstream file(path);
  file
      << "# The solver from random totals\n\n"
         "Made by the target `sweep_report` (`cmake --build --preset release --target sweep_report`), seed "
      << seed << ", " << cases
      << " cases a row.\n\n"
         "A case is a cold solve, a warm solve from its answer with one total moved by 2 %, and a cold solve "
         "of the moved task\nto compare with; answers and refusals are counted of the first two. The cases "
         "take in turn 5, 25, 60 and 90 degC, and\ntotals near the usual bath (halved to doubled), wild "
         "totals (1e-12 to 8 mol/kg, one in eight absent) with the bath's own\nsolids free to form, and wild "
         "totals with every solid free. In brackets: of these near the usual bath.\n\n"
         "- Failure: no answer and no reason; a residual above its tolerance (DEVELOPERS.md, Numerics); a "
         "charge out of balance by\n  1e-10 mol/kg; a warm answer called valid that differs from the cold one "
         "by 1e-9 relative in a species above 1e-12 mol/kg.\n"
         "- Not stable: answers marked as not to be believed because the Gibbs energy does not curve upward.\n"
         "- Several equilibria: warm and cold start led to two answers, neither of which is called valid.\n"
         "- Times are medians of one thread of two; `tests/benchmark` measures them properly.\n\n"
      << markdown(rows);
  bool failed = false;
  for (const SweepRow& row : rows)
    for (const std::string& failure : row.failures) {
      if (!failed) file << "\n## Failures\n\n```\n";
      failed = true;
      file << failure << "\n";
    }
  if (failed) file << "```\n";
  file.close();
  if (!file) {
    std::cerr << path << ": cannot be written\n";
    return 1;
  }
}
