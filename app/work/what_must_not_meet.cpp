#include "what_must_not_meet.hpp"

#include <algorithm>
#include <bathwright/book/entries.hpp>
#include <bathwright/shopfiles/tank_file.hpp>
#include <cctype>
#include <map>

#include "tank_state.hpp"

namespace bathwright::work {
namespace {

using matter::StockCatalogue;
using matter::StockChemical;

/// Small letters, without hyphens, in the spelling of the catalogue.
std::string plain(std::string text) {
  for (char& c : text)
    c = c == '-' || c == '_' ? ' ' : c >= 'A' && c <= 'Z' ? static_cast<char>(c - 'A' + 'a') : c;
  for (std::size_t at = text.find("sulph"); at != std::string::npos; at = text.find("sulph", at))
    text.replace(at, 5, "sulf");
  return text;
}

/// The words of a text that name a chemical: where one name holds another, the longer.
class Named {
 public:
  Named(const std::string& text, const bath::Tank& tank) : words_(plain(text)) {
    for (const bath::ShelfItem& item : tank.shelf) look_for(item.stock);
    for (const std::string& id : StockCatalogue::built_in().ids())
      look_for(*StockCatalogue::built_in().find(id));
  }

  [[nodiscard]] std::vector<const StockChemical*> chemicals() const {
    std::vector<const StockChemical*> all;
    for (const auto& [at, one] : longest_)
      if (std::ranges::none_of(longest_, [&, at = at, end = at + one.length](const auto& other) {
            return other.second.length > end - at && other.first <= at &&
                   other.first + other.second.length >= end;
          }))
        all.push_back(one.chemical);
    return all;
  }

 private:
  struct Found {
    const StockChemical* chemical;
    std::size_t length;
  };

  [[nodiscard]] bool is_word(std::size_t at, std::size_t length) const {
    const auto in_word = [&](std::size_t place) {
      return place < words_.size() && std::isalnum(static_cast<unsigned char>(words_[place])) != 0;
    };
    return !(at > 0 && in_word(at - 1)) && !in_word(at + length);
  }

  void look_for(const StockChemical& stock) {
    std::vector<std::string> names{stock.id, stock.name};
    names.insert(names.end(), stock.aliases.begin(), stock.aliases.end());
    for (const std::string& one : names) {
      const std::string name = plain(one);
      if (name.empty()) continue;
      for (std::size_t at = words_.find(name); at != std::string::npos; at = words_.find(name, at + 1)) {
        if (!is_word(at, name.size())) continue;
        const auto known = longest_.find(at);
        if (known == longest_.end() || known->second.length < name.size())
          longest_[at] = {&stock, name.size()};
      }
    }
  }

  std::string words_;
  std::map<std::size_t, Found> longest_;  ///< by where it begins
};

std::vector<const StockChemical*> named_in(const Json& body, const bath::Tank& tank) {
  std::string text;
  for (const char* key : {"chemical", "note"})
    if (body.is_object() && body.contains(key) && body[key].is_string())
      text += body[key].get<std::string>() + "; ";
  return Named(text, tank).chemicals();
}

/// The tank of the log: its file as the last analysis was made with it.
Result<std::optional<Shop>> tank_of_log(const Session& session, const std::string& tank, Met& met) {
  const auto last = last_analysis(session, tank);
  const Json inputs = last && *last ? (*last)->document.value("inputs", Json::object()) : Json::object();
  if (!inputs.is_object() || !inputs.contains("tank_file") || !inputs["tank_file"].is_string()) {
    met.not_checked.push_back(
        "Not held against what must never meet in the tank: the log has no analysis of \"" + tank +
        "\" that would tell what it holds.");
    return std::optional<Shop>{};
  }
  const auto read =
      shopfiles::read_tank_text("the tank file of the last analysis", inputs["tank_file"].get<std::string>(),
                                StockCatalogue::built_in());
  auto shop = read ? shop_of(session, *read) : Result<Shop>(read.problems());
  if (shop) return std::optional<Shop>(*std::move(shop));
  met.not_checked.push_back("Not held against what must never meet in the tank: " +
                            shop.problems().front().text());
  return std::optional<Shop>{};
}

struct Since {
  bath::TankState state;
  std::vector<const StockChemical*> added;
};

/// What the additions logged since the last analysis brought; those that cannot be counted are only named.
Result<Since> since_analysis(const Session& session, const Shop& shop) {
  const auto start = starting_state(session, shop, "");
  if (!start) return start.problems();
  Since since{start->state, {}};
  const auto last = last_analysis(session, shop.tank.name);
  if (!last) return last.problems();
  const auto log = open_log_to_read(session);
  if (!log) return log.problems();
  logbook::Filter filter;
  filter.tank = shop.tank.name;
  filter.kind = logbook::EntryKind::addition;
  filter.after_seq = *last ? (*last)->seq : 0;
  const auto entries = log->list(filter);
  if (!entries) return entries.problems();
  for (const auto& entry : *entries) {
    const auto corrected = log->is_corrected(entry.seq);
    if (!corrected) return corrected.problems();
    if (*corrected) continue;
    for (const StockChemical* one : named_in(Json::parse(entry.body, nullptr, false), shop.tank))
      since.added.push_back(one);
    const auto moved = book::movement_of(entry.kind, entry.body, shop.tank, shop.type());
    const auto* addition = moved ? std::get_if<book::Addition>(&moved->of) : nullptr;
    const bath::ShelfItem* item = addition ? shop.tank.on_shelf(addition->chemical) : nullptr;
    if (!item) continue;
    if (const auto brings = shop.chemistry.brings(item->stock))
      since.state = bath::Chemistry::after(since.state, *brings, addition->kg);
  }
  return since;
}

}  // namespace

Result<Met> met_in_tank(const Session& session, const std::string& tank, const Json& body) {
  Met met;
  Session with_log = session;
  with_log.log_file = log_path(session).string();
  const auto shop = tank_of_log(with_log, tank, met);
  if (!shop) return shop.problems();
  if (!*shop) return met;
  const auto chemicals = named_in(body, (*shop)->tank);
  if (chemicals.empty()) {
    met.not_checked.push_back(
        "Not held against what must never meet in the tank: it names no chemical of the shelf or the catalogue.");
    return met;
  }
  const auto since = since_analysis(with_log, **shop);
  const auto solved =
      since ? (*shop)->chemistry.speciate(since->state) : Result<speciation::Equilibrium>(since.problems());
  // Where the state has no answer the bath type's own rules are left.
  const bath::Held held =
      solved ? bath::held_by((*shop)->chemistry, since->state, solved->pH()) : bath::Held{};
  for (const StockChemical* stock : chemicals) {
    auto lock = bath::interlock((*shop)->type(), held, *stock);
    if (!lock || lock->level != bath::Level::stop) {
      lock.reset();
      for (const StockChemical* earlier : since ? since->added : std::vector<const StockChemical*>())
        if (!lock)
          if (auto between = bath::interlock_between((*shop)->type(), *earlier, *stock);
              between && between->level == bath::Level::stop)
            lock = bath::Interlock{between->rule,
                                   earlier->name + " went in since the last analysis: " + between->why};
    }
    if (lock) met.stops.push_back({stock->id, lock->rule, lock->why});
  }
  return met;
}

sheets::Lines alarm(const std::string& tank, const std::vector<MustNotMeet>& stops, bool happened) {
  sheets::Lines lines;
  sheets::heading(lines, "STOP: must never go into " + tank);
  for (const MustNotMeet& one : stops)
    sheets::say(lines, "  STOP  " + one.chemical + " (" + one.rule + "): " + one.why, 8);
  sheets::heading(lines, "What to do");
  if (!happened) {
    sheets::say(lines,
                "  Nothing was logged. Not in the tank yet: do not add it, and take it away from the tank.",
                2);
    sheets::say(lines, "  In the tank, or perhaps:", 2);
  }
  for (
      const char* step :
      {"Everybody away from the tank, its drain and its sump. Raise the alarm. Nobody goes back to look.",
       "Extraction stays on. Add nothing more, nothing to put it right either; move no solution.",
       "The shop's emergency plan, the suppliers' safety data sheets and local codes decide what comes next, not "
       "this program. What gas there may be, it cannot measure.",
       "Not before the people responsible let the tank free: analyse it. Its levels in the log are no longer those "
       "in the tank."})
    sheets::say(lines, std::string("  - ") + step, 2);
  if (!happened)
    sheets::say(lines, "  - Then log it as what happened: the same command with --event, and without --slip.",
                2);
  return lines;
}

}  // namespace bathwright::work
