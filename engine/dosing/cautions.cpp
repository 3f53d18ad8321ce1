// What must be said before anybody opens a bag.
#include <algorithm>

#include "steps.hpp"

namespace bathwright::dosing {

using bath::BathType;
using bath::Tank;

std::vector<std::string> cautions_for(const Tank& tank, const BathType& type, const Plan& plan) {
  std::vector<std::string> cautions;
  const auto say = [&](const std::string& text) {
    if (std::find(cautions.begin(), cautions.end(), text) == cautions.end()) cautions.push_back(text);
  };
  const auto added = [&](const std::string& id) {
    return std::any_of(plan.additions.begin(), plan.additions.end(),
                       [&](const Addition& a) { return a.chemical == id; });
  };
  const auto stock_name = [&](const std::string& id) {
    const bath::ShelfItem* item = tank.on_shelf(id);
    return item ? item->stock.name + ": " : std::string();
  };
  const auto matters = [&](const std::string& subject) {
    return subject.empty() || added(subject) || tank.aim(subject) != nullptr;
  };
  for (const std::string& pair : plan.keep_apart) say(pair);
  std::vector<std::string> spoken_for;  // chemicals the bath type itself warns of
  for (const bath::Level level : {bath::Level::stop, bath::Level::warn, bath::Level::notice})
    for (const bath::Caution& caution : type.cautions)
      if (caution.level == level && matters(caution.subject)) {
        say(stock_name(caution.subject) + caution.text);
        spoken_for.push_back(caution.subject);
      }
  for (const Addition& addition : plan.additions)
    if (const bath::ShelfItem* item = tank.on_shelf(addition.chemical);
        item && std::find(spoken_for.begin(), spoken_for.end(), addition.chemical) == spoken_for.end())
      for (const std::string& caution : item->stock.cautions) say(item->stock.name + ": " + caution);
  say("The supplier's safety data sheet, local codes and licensed practice decide; this sheet does not "
      "replace them.");
  return cautions;
}

}  // namespace bathwright::dosing
