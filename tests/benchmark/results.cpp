#include "results.hpp"

#include <cmath>
#include <cstdio>
#include <fstream>

namespace bathwright::benchmark {
namespace {

std::string number(const char* format, double value) {
  if (!std::isfinite(value)) return "-";
  char text[40];
  std::snprintf(text, sizeof text, format, value);
  return text;
}

}  // namespace

std::string write_results(const std::string& file, const std::vector<Row>& rows, const std::string& how) {
  std::ofstream out(file);
  out << "# The engine against general solvers\n\n"
         "Made by `third_party/setup benchmark`; README.md in this folder says what is compared and how.\n\n"
         "Compiler: " COMPILER ", flags `" COMPILER_FLAGS "`.\n\n"
      << how;
  const Row* last = nullptr;
  for (const Row& row : rows) {
    if (!last || last->system != row.system)
      out << "\n## " << row.system << "\n\n"
          << "| model | species, solids | cases | method | us | ratio | failures | worst residual |\n"
          << "|---|---|---|---|---:|---:|---:|---:|\n";
    out << "| " << row.model << " | " << row.species << ", " << row.solids << " | " << row.cases_from << " | "
        << row.method << " | " << number("%.1f", row.time_us) << " | " << number("%.2f", row.ratio) << " | "
        << row.failures << " of " << row.cases << " | "
        << (row.failures == row.cases ? "-" : number("%.0e", row.worst_residual)) << " |\n";
    last = &row;
  }
  out.flush();
  return out ? std::string{} : "cannot write " + file;
}

}  // namespace bathwright::benchmark
