#include "bathwright/logbook/logbook.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>
#include <sodium.h>

#include <utility>
#include <variant>

#include "chain.hpp"
#include "database.hpp"
#include "entry_rules.hpp"
#include "schema.hpp"
#include "stored_entry.hpp"
#include "verify.hpp"

namespace bathwright::logbook {

struct Logbook::State {
  Database database;
  OpenMode mode;
  const Clock& clock;
  std::string station;

  Result<std::optional<Entry>> last() const { return first_of("ORDER BY seq DESC LIMIT 1", {}); }
  Result<std::optional<Entry>> with_seq(std::int64_t seq) const { return first_of("WHERE seq = ?", {seq}); }

  using Value = std::variant<std::int64_t, std::string>;
  Result<std::vector<Entry>> all_of(std::string_view clauses, const std::vector<Value>& values) const {
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

  Result<std::optional<Entry>> first_of(std::string_view clauses, const std::vector<Value>& values) const {
    auto entries = all_of(clauses, values);
    if (!entries) return entries.problems();
    if (entries->empty()) return std::optional<Entry>();
    return std::optional<Entry>(entries->front());
  }

  /// A correction must name an entry of its own tank.
  Outcome check_corrected(const NewEntry& correction) const {
    const auto corrected = with_seq(*correction.corrects);
    if (!corrected) return corrected.problems();
    if (!*corrected)
      return Problem{Fault::bad_input, "corrects", fmt::format("there is no entry {}", *correction.corrects),
                     "the number of an entry in this log", "list the tank's entries to find it"};
    const Entry& entry = **corrected;
    if (entry.tank != correction.tank)
      return Problem{Fault::bad_input, "corrects",
                     fmt::format("entry {} is of tank {}", entry.seq, entry.tank),
                     "an entry of tank " + correction.tank, "check the number"};
    return Done{};
  }
};

namespace {

/// `text` as a LIKE pattern that finds it anywhere, its own wildcards taken literally (escaped by '!').
std::string anywhere(std::string_view text) {
  std::string pattern = "%";
  for (const char c : text) {
    if (c == '%' || c == '_' || c == '!') pattern += '!';
    pattern += c;
  }
  return pattern + '%';
}

}  // namespace

Logbook::Logbook(std::unique_ptr<State> state) : state_(std::move(state)) {}
Logbook::Logbook(Logbook&&) noexcept = default;
Logbook& Logbook::operator=(Logbook&&) noexcept = default;
Logbook::~Logbook() = default;

Result<Logbook> Logbook::open(const std::filesystem::path& path, OpenMode mode, const Clock& clock,
                              const OpenSettings& settings) {
  Problems problems;
  check_text("station", settings.station, Presence::required, problems);
  if (!problems.empty()) return problems;
  if (sodium_init() < 0)
    return Problem{Fault::io, path.string(), "the library for the hash chain does not start", "",
                   "reinstall libsodium"};
  auto database = Database::open(path, mode, settings.wait);
  if (!database) return database.problems();
  if (auto ready = prepare_schema(*database, mode); !ready) return ready.problems();
  return Logbook(std::unique_ptr<State>(new State{*std::move(database), mode, clock, settings.station}));
}

Result<Entry> Logbook::append(const NewEntry& entry) {
  const Database& database = state_->database;
  if (state_->mode == OpenMode::read_only)
    return Problem{Fault::refused, database.name(), "the logbook is open for reading only", "",
                   "open it for writing to log an entry"};
  if (auto problems = check(entry); !problems.empty()) return problems;

  WriteTransaction transaction(database);
  if (auto begun = transaction.begin(); !begun) return begun.problems();
  if (entry.corrects)
    if (auto fits = state_->check_corrected(entry); !fits) return fits.problems();
  const auto last = state_->last();
  if (!last) return last.problems();

  Entry logged{.seq = *last ? (*last)->seq + 1 : 1,
               .kind = entry.kind,
               .tank = entry.tank,
               .shift = entry.shift,
               .at = iso_utc(state_->clock.utc_now()),
               .station = state_->station,
               .by = entry.by,
               .body = entry.body,
               .corrects = entry.corrects,
               .program = entry.program,
               .previous = *last ? (*last)->hash : first_previous(),
               .hash = {}};
  logged.hash = chain_hash(logged);
  if (auto inserted = insert_entry(database, logged); !inserted) return inserted.problems();
  if (auto committed = transaction.commit(); !committed) return committed.problems();
  return logged;
}

Result<std::vector<Entry>> Logbook::list(const Filter& filter) const {
  std::vector<std::string> conditions{"TRUE"};
  std::vector<State::Value> values;
  const auto restrict = [&](const char* condition, State::Value value) {
    conditions.emplace_back(condition);
    values.push_back(std::move(value));
  };
  if (!filter.tank.empty()) restrict("tank = ?", filter.tank);
  if (filter.kind) restrict("kind = ?", std::string(name(*filter.kind)));
  if (filter.from) restrict("at >= ?", iso_utc(*filter.from));
  if (filter.to) restrict("at < ?", iso_utc(*filter.to));
  if (!filter.text.empty())
    restrict(R"(body || char(10) || "by" || char(10) || shift LIKE ? ESCAPE '!')", anywhere(filter.text));
  if (filter.after_seq != 0) restrict(filter.newest_first ? "seq < ?" : "seq > ?", filter.after_seq);
  std::string clauses = fmt::format("WHERE {} ORDER BY seq {}", fmt::join(conditions, " AND "),
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

Verification Logbook::verify() const { return verify_chain(state_->database); }

}  // namespace bathwright::logbook
