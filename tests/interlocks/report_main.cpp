// interlock_report FILE: tries every case and writes the table.
#include <fmt/format.h>

#include <fstream>

#include "interlock_table.hpp"

int main(int argc, char** argv) {
  if (argc != 2) return 2;
  std::string report =
      "# The interlocks, case by case\n\nWritten by the target `interlock_table` from `cases.csv`; do not edit. Each case was tried on "
      "a demonstration tank at its aims.\n\n| rule | tank | added, kg | expected | outcome | what was said |\n"
      "|---|---|---|---|---|---|\n";
  bool all = true;
  for (const auto& one : interlock_table::read_cases()) {
    std::string added;
    for (const auto& [id, kg] : one.additions)
      added += fmt::format("{}{} {:g}", added.empty() ? "" : ", ", id, kg);
    const auto got = interlock_table::try_case(one);
    report += fmt::format("| {} | {} | {} | {} {} | {}{} | {} |\n", one.rule, one.tank, added, one.expect,
                          one.by, got.as_expected ? "" : "NOT AS EXPECTED: ", got.got, got.said);
    all = all && got.as_expected;
  }
  report +=
      "\n## Own additions\n\nOne portion of each chemical on the shelf of each demonstration tank, at its aims, as large as the "
      "rule of addition allows (0.5 or 1 g/L where there is none): none may be kept out by an interlock.\n\n"
      "| tank | chemicals | kept out |\n|---|---|---|\n";
  for (const std::string& tank : interlock_table::demonstration_tanks()) {
    std::string kept_out;
    const auto own = interlock_table::own_additions(tank);
    for (const auto& one : own)
      if (!one.stopped_by.empty()) kept_out += one.chemical + ": " + one.stopped_by + " ";
    report += fmt::format("| {} | {} | {} |\n", tank, own.size(), kept_out.empty() ? "none" : kept_out);
    all = all && kept_out.empty();
  }
  report +=
      "\n## Gases over the tanks at their aims\n\nAt equilibrium, over still liquid, in ppm of 1 bar. Normal baths exceed the "
      "caution level: that is why a step is judged by what it adds to this.\n\n| tank | gas | ppm | caution level | no plan passes "
      "above |\n|---|---|---|---|---|\n";
  for (const std::string& tank : interlock_table::demonstration_tanks())
    for (const auto& one : interlock_table::normal_gases(tank))
      report += fmt::format("| {} | {} | {:.2g} | {:g} | {:g} |\n", one.tank, one.gas, one.ppm,
                            one.caution_ppm, one.never_ppm);
  std::ofstream(argv[1]) << report;
  return all ? 0 : 1;
}
