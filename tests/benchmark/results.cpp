#include "results.hpp"

#include <cmath>
#include <cstdio>
#include <fstream>

#include "judge.hpp"

namespace bathwright::benchmark {
namespace {

std::string number(const char* format, double value) {
  if (!std::isfinite(value)) return "-";
  char text[40];
  std::snprintf(text, sizeof text, format, value);
  return text;
}

}  // namespace

std::string write_results(const std::string& file, const std::vector<Row>& rows, double spread,
                          unsigned seed) {
  std::ofstream out(file);
  out << "# The engine against general solvers\n\n"
         "Written by `third_party/setup benchmark`; README.md in this folder says what is compared and how.\n\n"
      << "Compiler: " COMPILER ", flags `" COMPILER_FLAGS "`. One thread, 25 degC.\n"
      << "Cases: the usual bath with every amount multiplied by a random factor between 1/" << spread
      << " and " << spread << ", seed " << seed << ".\n"
      << "Time: median over the cases a method solved, the better of three runs each. Ratio: of medians, to the "
         "engine.\n"
      << "Failure: not converged, or an answer further off than " << number("%.0e", accepted)
      << " by the common judge. Residual: the worst that judge found among\nthe answers that count.\n";
  const Row* last = nullptr;
  for (const Row& row : rows) {
    if (!last || last->system != row.system)
      out << "\n## " << row.system << "\n\n"
          << "| model | species, solids | totals | method | median us | ratio | failures | worst residual |\n"
          << "|---|---|---|---|---:|---:|---:|---:|\n";
    out << "| " << row.model << " | " << row.species << ", " << row.solids << " | " << row.totals << " | "
        << row.method << " | " << number("%.1f", row.median_us) << " | " << number("%.2f", row.ratio) << " | "
        << row.failures << " of " << row.cases << " | "
        << (row.failures == row.cases ? "-" : number("%.1e", row.worst_residual)) << " |\n";
    last = &row;
  }
  out.flush();
  return out ? std::string{} : "cannot write " + file;
}

}  // namespace bathwright::benchmark
