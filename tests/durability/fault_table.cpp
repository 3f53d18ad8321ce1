#include "fault_table.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include "trials.hpp"

namespace faults {

std::vector<FaultRow> make_all(const Extent& extent, unsigned seed) {
  std::mt19937 random(seed);
  std::vector<FaultRow> rows{killed_writers(extent, random)};
  for (auto& more : {power_cuts(extent, random), full_disks(extent), surroundings(), writers_at_once(extent),
                     damaged_pages(extent, random)})
    rows.insert(rows.end(), more.begin(), more.end());
  return rows;
}

std::string markdown(const std::vector<FaultRow>& rows, unsigned seed) {
  std::string text = fmt::format(
      "# The shift log under faults\n\n"
      "Measured by `cmake --build <build> --target fault_table` (seed {}); nothing here is written by hand.\n\n"
      "*Acknowledged* counts the entries whose append had returned, summed over all runs; *found* those of them that\n"
      "were read back afterwards with their hash. *Broken* counts runs in which a promise did not hold: an acknowledged\n"
      "entry missing, one turned up that was refused, verify not content, the next entry not taken, no message or a wrong\n"
      "one. It must be 0 but for the negative controls, whose disks lie: they show that the trial can see a loss. Of\n"
      "damaged pages, *found* is what `salvage` gave back, and *broken* a wrong entry read without a word or an entry\n"
      "of undamaged pages that was not given back.\n\n"
      "| fault | how it was made | runs | acknowledged | found | broken | message shown | figures |\n"
      "|---|---|---:|---:|---:|---:|---|---|\n",
      seed);
  for (const FaultRow& row : rows)
    text +=
        fmt::format("| {} | {} | {} | {} | {} | {} | {} | {} |\n", row.fault, row.made, row.runs,
                    row.acknowledged, row.found, row.broken.size(),
                    row.messages.empty() ? "-" : fmt::format("{}", fmt::join(row.messages, "; ")), row.note);
  return text;
}

std::vector<std::string> failures(const std::vector<FaultRow>& rows) {
  std::vector<std::string> lines;
  for (const FaultRow& row : rows) {
    if (row.losses_expected && row.found == row.acknowledged) lines.push_back(row.fault + ": saw no loss");
    if (!row.losses_expected)
      for (const std::string& line : row.broken) lines.push_back(row.fault + ": " + line);
  }
  return lines;
}

}  // namespace faults
