// The slip that goes to the tank: what to weigh out, in which order and portions, and what must hold after
// each step; with all that somebody who asks later needs to follow it back to the burette.
// Its sections: app/sheets/slip. Read next: page.hpp, which prints it.
#pragma once

#include <bathwright/analysis/analysis.hpp>
#include <bathwright/dosing/plan.hpp>
#include <bathwright/sheets/page.hpp>
#include <bathwright/sheets/shown_units.hpp>
#include <map>
#include <optional>

namespace bathwright::sheets {

/// Who and what stands under the slip.
struct Signature {
  std::string prepared_by, approved_by, shift, program;
  std::optional<std::int64_t> slip{};  ///< its number, where the plan was issued as one
  std::string issued{};                ///< when, by the shop's clock; empty where it was not
};

/// What an earlier analysis of the tank found.
struct Before {
  std::string when;
  std::map<std::string, double, std::less<>> level;  ///< g/L by quantity id, and pH
  double density_kg_per_L = 0;                       ///< as Medium; its water is not known
};

/// The best plan in full, the others in a line each.
struct AdditionSlip {
  const bath::Tank& tank;
  const bath::BathType& type;
  const analysis::Readings& readings;
  const analysis::Analysis& analysis;
  const dosing::AdditionSheet& sheet;
  std::vector<std::string> changed_since;  ///< what the log has of changes that are not in the readings
  std::vector<std::string> stops;          ///< what else keeps it from being carried out, a sentence each
  std::vector<Before> before;              ///< newest first
  Signature signature;
  Units units;  ///< of amounts, levels, volumes and temperatures; sentences of checks keep theirs
};

[[nodiscard]] Page addition_page(const AdditionSlip& slip);

}  // namespace bathwright::sheets
