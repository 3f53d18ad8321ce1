#include "open_slip.hpp"

#include <algorithm>
#include <bathwright/logbook/approval.hpp>

namespace bathwright::work {
namespace {

template <class Value>
Value member(const Json& object, const char* key, Value otherwise) {
  if (!object.is_object() || !object.contains(key)) return otherwise;
  try {
    return object[key].get<Value>();
  } catch (const Json::exception&) {
    return otherwise;
  }
}

SlipStep step_of(const Json& json) {
  SlipStep step;
  step.number = member(json, "number", 0);
  step.takes_out = member(json, "takes_out", false);
  step.chemical = member<std::string>(json, "chemical", "");
  step.name = member<std::string>(json, "name", step.chemical);
  step.unit = member<std::string>(json, "unit", "");
  step.how = member<std::string>(json, "how", "");
  step.amount = member(json, "amount", 0.0);
  step.wait_h = member(json, "wait_h", 0.0);
  step.portion = member(json, "portion", 1);
  step.portions = member(json, "portions", 1);
  return step;
}

logbook::NewEntry answer_to(const OpenSlip& slip, logbook::EntryKind kind, const Json& body) {
  logbook::NewEntry entry;
  entry.kind = kind;
  entry.tank = slip.tank;
  entry.about = slip.seq;
  entry.body = text_of(body);
  return entry;
}

}  // namespace

Result<std::optional<OpenSlip>> open_slip(const logbook::Logbook& log, const std::string& tank) {
  const auto open = log.open_slips(tank);
  if (!open) return open.problems();
  if (open->empty()) return std::optional<OpenSlip>{};
  const logbook::Entry& entry = open->front();
  OpenSlip slip;
  slip.seq = entry.seq;
  slip.tank = entry.tank;
  slip.by = entry.by;
  slip.at = entry.at;
  const Json body = Json::parse(entry.body, nullptr, false);
  if (body.is_object() && body.contains("plan") && body["plan"].is_object())
    for (const Json& step : body["plan"].value("steps", Json::array())) slip.steps.push_back(step_of(step));
  for (const Json& caution : body.is_object() ? body.value("cautions", Json::array()) : Json::array())
    if (caution.is_string()) slip.cautions.push_back(caution.get<std::string>());
  auto approved = logbook::approved_by(log, entry);
  if (!approved) return approved.problems();
  slip.approved_by = *std::move(approved);
  logbook::Filter filter;
  filter.about = slip.seq;
  const auto answers = log.list(filter);
  if (!answers) return answers.problems();
  for (const logbook::Entry& answer : *answers) {
    if (answer.kind != logbook::EntryKind::addition && answer.kind != logbook::EntryKind::dump) continue;
    const auto corrected = log.is_corrected(answer.seq);
    if (!corrected) return corrected.problems();
    const int number = *corrected ? 0 : member(Json::parse(answer.body, nullptr, false), "step", 0);
    for (SlipStep& step : slip.steps)
      if (step.number == number) step.done_as = answer.seq, step.done_at = answer.at;
  }
  return std::optional(std::move(slip));
}

Result<logbook::NewEntry> step_done(const OpenSlip& slip, int step) {
  const std::string where = "slip " + std::to_string(slip.seq);
  const auto found = std::ranges::find(slip.steps, step, &SlipStep::number);
  if (found == slip.steps.end())
    return Problem{Fault::bad_input, where, "has no step " + std::to_string(step),
                   "one of its " + std::to_string(slip.steps.size()) + " steps", ""};
  if (found->done_as)
    return Problem{
        Fault::refused, where,
        "step " + std::to_string(step) + " is done already: entry " + std::to_string(*found->done_as), "",
        "If that entry is wrong, correct it first."};
  if (found->takes_out)
    return answer_to(slip, logbook::EntryKind::dump, {{"volume_L", found->amount}, {"step", found->number}});
  return answer_to(slip, logbook::EntryKind::addition,
                   {{"chemical", found->chemical},
                    {"amount", found->amount},
                    {"unit", found->unit},
                    {"step", found->number}});
}

logbook::NewEntry approval(const OpenSlip& slip) {
  return answer_to(slip, logbook::EntryKind::slip_approved, Json::object());
}

logbook::NewEntry closing(const OpenSlip& slip, bool cancelled, const std::string& reason) {
  Json body{{"outcome", cancelled ? "cancelled" : "done"}};
  if (!reason.empty()) body["reason"] = reason;
  return answer_to(slip, logbook::EntryKind::slip_closed, body);
}

}  // namespace bathwright::work
