#include "bathwright/logbook/approval.hpp"

#include "roll.hpp"

namespace bathwright::logbook {

Result<std::string> approved_by(const Logbook& log, const Entry& slip) {
  Filter filter;
  filter.tank = slip.tank;
  filter.kind = EntryKind::slip_approved;
  filter.about = slip.seq;
  const auto approvals = log.list(filter);
  if (!approvals) return approvals.problems();
  for (const Entry& approval : *approvals) {
    const auto corrected = log.is_corrected(approval.seq);
    if (!corrected) return corrected.problems();
    if (!*corrected) return approval.by;
  }
  return slip.witness;
}

Result<bool> asks_approval(const Logbook& log, const std::string& tank) {
  Filter filter;
  filter.kind = EntryKind::setting;
  const auto settings = log.list(filter);
  if (!settings) return settings.problems();
  Roll roll;
  for (const Entry& setting : *settings)
    (void)roll.take(setting);  // one that cannot be read is verify's to tell
  return roll.asks_second(tank, EntryKind::slip_approved);
}

}  // namespace bathwright::logbook
