// The questions a log answers: lists, one entry, open slips, people.
#include <fmt/format.h>
#include <fmt/ranges.h>

#include <limits>

#include "logbook_state.hpp"
#include "schema.hpp"
#include "stored_entry.hpp"
#include "text_search.hpp"
#include "verify.hpp"

namespace bathwright::logbook {

Result<std::vector<Entry>> Logbook::State::all_of(std::string_view clauses,
                                                  const std::vector<Value>& values) const {
  Statement rows = database.prepare(select_entries(clauses));
  for (int parameter = 1; const Value& value : values)
    std::visit([&](const auto& v) { rows.bind(parameter++, v); }, value);
  std::vector<Entry> entries;
  while (rows.step()) {
    auto entry = read_entry(rows);
    if (!entry) return entry.problems();
    entries.push_back(*std::move(entry));
  }
  if (rows.failed()) return database.problem();
  return entries;
}

Result<std::optional<Entry>> Logbook::State::first_of(std::string_view clauses,
                                                      const std::vector<Value>& values) const {
  auto entries = all_of(clauses, values);
  if (!entries) return entries.problems();
  if (entries->empty()) return std::optional<Entry>();
  return std::optional<Entry>(entries->front());
}

Result<std::optional<Entry>> Logbook::State::last() const {
  return first_of("ORDER BY seq DESC LIMIT 1", {});
}

Result<std::optional<Entry>> Logbook::State::with_seq(std::int64_t seq) const {
  return first_of("WHERE seq = ?", {seq});
}

Result<std::vector<Entry>> Logbook::State::open_slips(const std::string& tank) const {
  std::string clauses =
      "WHERE entry.kind = 'slip' AND NOT EXISTS"
      " (SELECT 1 FROM entry AS answer WHERE answer.about = entry.seq AND answer.kind = 'slip-closed')";
  std::vector<Value> values;
  if (!tank.empty()) {
    clauses += " AND entry.tank = ?";
    values.emplace_back(tank);
  }
  return all_of(clauses + " ORDER BY entry.seq", values);
}

Result<Roll> Logbook::State::roll() const {
  const auto entries = all_of("WHERE kind IN ('person', 'setting') ORDER BY seq", {});
  if (!entries) return entries.problems();
  Roll roll;
  // An entry that cannot be understood was checked before it was written: verify tells of it.
  for (const Entry& entry : *entries) (void)roll.take(entry);
  return roll;
}

Result<std::int64_t> Logbook::State::first_from(const std::string& at) const {
  Statement row =
      database.prepare("SELECT seq FROM entry WHERE latest_at >= ? ORDER BY latest_at, seq LIMIT 1");
  row.bind(1, at);
  if (row.step()) return row.integer(0);
  if (row.failed()) return database.problem();
  return std::numeric_limits<std::int64_t>::max();
}

Result<std::int64_t> Logbook::State::last_before(const std::string& at) const {
  Statement row = database.prepare(
      "SELECT max(coalesce((SELECT seq FROM entry WHERE latest_at < ?1 ORDER BY latest_at DESC, seq DESC LIMIT 1), 0),"
      " coalesce((SELECT max(seq) FROM entry INDEXED BY entry_set_back WHERE at < latest_at AND at < ?1), 0))");
  row.bind(1, at);
  if (row.step()) return row.integer(0);
  return database.problem();
}

Result<std::vector<Entry>> Logbook::list(const Filter& filter) const {
  std::vector<std::string> conditions{"TRUE"};
  std::vector<State::Value> values;
  const auto restrict = [&](const char* condition, State::Value value) {
    conditions.emplace_back(condition);
    values.push_back(std::move(value));
  };
  std::string from;
  if (const std::string letters = trigrams_of(filter.text); !letters.empty()) {
    from = "JOIN entry_text ON entry_text.rowid = entry.seq ";
    restrict("entry_text MATCH ?", letters);
  }
  if (!filter.text.empty())
    restrict(R"(entry.body || char(10) || entry."by" || char(10) || entry.shift LIKE ? ESCAPE '!')",
             anywhere(filter.text));
  if (!filter.tank.empty()) restrict("entry.tank = ?", filter.tank);
  if (filter.kind) restrict("entry.kind = ?", std::string(name(*filter.kind)));
  if (!filter.by.empty()) restrict("entry.\"by\" = ?", filter.by);
  if (!filter.shift.empty()) restrict("entry.shift = ?", filter.shift);
  if (filter.about) restrict("entry.about = ?", *filter.about);
  const std::string order = from.empty() ? "entry.seq" : "entry_text.rowid";
  if (filter.from) {
    const auto first = state_->first_from(iso_utc(*filter.from));
    if (!first) return first.problems();
    restrict((order + " >= ?").c_str(), *first);
    restrict("entry.at >= ?", iso_utc(*filter.from));
  }
  if (filter.to) {
    const auto last = state_->last_before(iso_utc(*filter.to));
    if (!last) return last.problems();
    restrict((order + " <= ?").c_str(), *last);
    restrict("entry.at < ?", iso_utc(*filter.to));
  }
  if (filter.after_seq != 0)
    restrict((order + (filter.newest_first ? " < ?" : " > ?")).c_str(), filter.after_seq);
  std::string clauses = fmt::format("{}WHERE {} ORDER BY {} {}", from, fmt::join(conditions, " AND "), order,
                                    filter.newest_first ? "DESC" : "ASC");
  if (filter.limit != 0) clauses += fmt::format(" LIMIT {}", filter.limit);
  return state_->all_of(clauses, values);
}

Result<Entry> Logbook::find(std::int64_t seq) const {
  auto found = state_->with_seq(seq);
  if (!found) return found.problems();
  if (!*found)
    return Problem{Fault::bad_input, state_->database.name(), fmt::format("there is no entry {}", seq), "",
                   "list the entries to find its number"};
  return **std::move(found);
}

Result<std::optional<Entry>> Logbook::latest(const std::string& tank, EntryKind kind) const {
  return state_->first_of("WHERE tank = ? AND kind = ? ORDER BY seq DESC LIMIT 1",
                          {tank, std::string(name(kind))});
}

Result<bool> Logbook::is_corrected(std::int64_t seq) const {
  const auto correction = state_->first_of("WHERE about = ? AND kind = 'correction' LIMIT 1", {seq});
  if (!correction) return correction.problems();
  return correction->has_value();
}

Result<std::vector<Entry>> Logbook::open_slips(const std::string& tank) const {
  return state_->open_slips(tank);
}

Result<std::vector<std::string>> Logbook::tanks() const {
  // From one name to the next along the index, without walking the entries between.
  Statement rows = state_->database.prepare(
      "WITH RECURSIVE name (tank) AS (SELECT min(tank) FROM entry WHERE tank > '' UNION ALL"
      " SELECT (SELECT min(tank) FROM entry WHERE tank > name.tank) FROM name WHERE name.tank IS NOT NULL)"
      " SELECT tank FROM name WHERE tank IS NOT NULL");
  std::vector<std::string> tanks;
  while (rows.step()) tanks.push_back(rows.text(0));
  if (rows.failed()) return state_->database.problem();
  return tanks;
}

Result<std::string> Logbook::shift_pattern() const {
  const auto roll = state_->roll();
  if (!roll) return roll.problems();
  return roll->shifts();
}

Result<std::optional<Anchor>> Logbook::head() const {
  const auto last = state_->last();
  if (!last) return last.problems();
  if (!*last) return std::optional<Anchor>();
  return std::optional<Anchor>(Anchor{(*last)->seq, (*last)->hash});
}

Result<std::vector<Person>> Logbook::people() const {
  const auto roll = state_->roll();
  if (!roll) return roll.problems();
  return roll->people();
}

Verification Logbook::verify(const std::vector<Anchor>& anchors) const {
  return verify_chain(state_->database, anchors);
}

}  // namespace bathwright::logbook
