#include "hand_over_document.hpp"

namespace bathwright::work {

Json hand_over_document(const hand_over::HandOver& told) {
  Json doc = document({});
  doc["shift"] = {{"label", told.shift.label},
                  {"from", logbook::iso_utc(told.shift.from)},
                  {"to", logbook::iso_utc(told.shift.to)}};
  for (const char* list : {"entries", "open_slips", "slips_not_approved"}) doc[list] = Json::array();
  for (const auto& entry : told.entries) doc["entries"].push_back(entry.seq);
  for (const auto& open : told.open_slips) {
    doc["open_slips"].push_back(open.slip.seq);
    if (open.approved_by.empty()) doc["slips_not_approved"].push_back(open.slip.seq);
  }
  doc["out_of_window"] = Json::array();
  for (const auto& one : told.out_of_window)
    doc["out_of_window"].push_back({{"tank", one.tank},
                                    {"quantity", one.quantity},
                                    {"found", one.found},
                                    {"low", one.low},
                                    {"high", one.high},
                                    {"seq", one.seq}});
  doc["due"] = Json::array();
  for (const auto& one : told.due)
    doc["due"].push_back({{"tank", one.tank},
                          {"what", one.what},
                          {"at", logbook::iso_utc(one.at)},
                          {"last", one.last ? Json(logbook::iso_utc(*one.last)) : Json(nullptr)},
                          {"overdue", one.overdue}});
  doc["head"] = told.head ? Json{{"seq", told.head->seq}, {"hash", told.head->hash}} : Json(nullptr);
  return doc;
}

}  // namespace bathwright::work
