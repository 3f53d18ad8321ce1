// Opening a log and writing into it. What it answers is in queries.cpp, who may write in people.cpp.
#include "bathwright/logbook/logbook.hpp"

#include <fmt/format.h>
#include <sodium.h>

#include <utility>

#include "bathwright/logbook/approval.hpp"
#include "chain.hpp"
#include "entry_rules.hpp"
#include "logbook_state.hpp"
#include "schema.hpp"
#include "stored_entry.hpp"

namespace bathwright::logbook {
namespace {

/// What an entry answers must be there, be of its tank, and be something such an entry answers.
Outcome check_answered(const NewEntry& entry, const std::optional<Entry>& answered,
                       const std::vector<Entry>& open_slips) {
  const auto problem = [&](std::string what, std::string expected, std::string try_this) {
    return Problem{Fault::bad_input, "about", std::move(what), std::move(expected), std::move(try_this)};
  };
  if (!answered)
    return problem(fmt::format("there is no entry {}", *entry.about), "the number of an entry in this log",
                   "list the tank's entries to find it");
  if (answered->tank != entry.tank)
    return problem(fmt::format("entry {} is of tank {}", answered->seq, answered->tank),
                   "an entry of tank " + entry.tank, "check the number");
  if (entry.kind == EntryKind::correction) return Done{};
  if (answered->kind != EntryKind::slip)
    return problem(fmt::format("entry {} is no slip but {}", answered->seq, name(answered->kind)), "a slip",
                   "check the number");
  if (entry.kind == EntryKind::slip_approved && entry.by == answered->by)
    return Problem{Fault::refused, "slip-approved", fmt::format("{} prepared this slip", entry.by),
                   "another person", "let somebody else read it and approve it"};
  for (const Entry& slip : open_slips)
    if (slip.seq == answered->seq) return Done{};
  return problem(fmt::format("slip {} is closed", answered->seq), "an open slip",
                 "log what was added beside it without naming the slip");
}

/// A step of a slip waits for its approval where the tank asks for one.
Outcome check_approval(const Logbook& log, const Roll& roll, const NewEntry& entry) {
  if ((entry.kind != EntryKind::addition && entry.kind != EntryKind::dump) || !entry.about ||
      !roll.asks_second(entry.tank, EntryKind::slip_approved))
    return Done{};
  const auto slip = log.find(*entry.about);
  if (!slip) return slip.problems();
  const auto approved = approved_by(log, *slip);
  if (!approved) return approved.problems();
  if (!approved->empty()) return Done{};
  return Problem{Fault::refused, std::string(name(entry.kind)),
                 fmt::format("slip {} is not approved, and tank {} asks for a second person's approval",
                             *entry.about, entry.tank),
                 "an approved slip",
                 "let somebody else read the slip and approve it, then add; what is in the tank already is "
                 "logged without naming the slip"};
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
  check_text("program", settings.program, Presence::optional, problems);
  if (!problems.empty()) return problems;
  if (sodium_init() < 0)
    return Problem{Fault::io, path.string(), "the library for the hash chain does not start", "",
                   "reinstall libsodium"};
  auto opened = Database::open(path, mode, settings.wait);
  if (!opened) return opened.problems();
  Database database = *std::move(opened);
  if (auto ready = prepare_schema(database, mode); !ready) return ready.problems();
  return Logbook(std::unique_ptr<State>(new State{std::move(database), mode, clock, settings}));
}

Outcome Logbook::State::writable() const {
  if (mode != OpenMode::read_only) return Done{};
  return Problem{Fault::refused, database.name(), "the logbook is open for reading only", "",
                 "open it for writing to log an entry"};
}

Outcome Logbook::State::check_slips(const NewEntry& entry) const {
  if (!entry.about && entry.kind != EntryKind::slip) return Done{};
  const auto open = open_slips(entry.tank);
  if (!open) return open.problems();
  if (entry.kind == EntryKind::slip && !open->empty())
    return Problem{Fault::refused, "slip",
                   fmt::format("slip {} of tank {} is still open: what it orders may be in the tank already",
                               open->back().seq, entry.tank),
                   "no open slip of the tank",
                   "find out whether it was carried out, close or cancel it, then analyse again"};
  if (!entry.about) return Done{};
  const auto answered = with_seq(*entry.about);
  if (!answered) return answered.problems();
  return check_answered(entry, *answered, *open);
}

Entry Logbook::State::entry_of(const NewEntry& entry, const std::optional<Entry>& last) const {
  Entry made;
  made.seq = last ? last->seq + 1 : 1;
  made.kind = entry.kind;
  made.tank = entry.tank;
  made.shift = entry.shift;
  made.at = iso_utc(clock.utc_now());
  made.happened = entry.happened ? iso_utc(*entry.happened) : "";
  made.uptime = clock.uptime();
  made.station = settings.station;
  made.by = entry.by;
  made.body = entry.body;
  made.about = entry.about;
  made.program = settings.program;
  made.bath_type = entry.bath_type;
  made.previous = last ? last->hash : first_previous();
  return made;
}

Result<Entry> Logbook::append(const NewEntry& entry, const Signatures& signatures) {
  auto logged = append_all({entry}, signatures);
  if (!logged) return logged.problems();
  return logged->front();
}

Result<std::vector<Entry>> Logbook::append_all(const std::vector<NewEntry>& given,
                                               const Signatures& signatures) {
  if (auto may = state_->writable(); !may) return may.problems();
  std::vector<NewEntry> entries = given;
  Problems problems;
  for (NewEntry& entry : entries) {
    if (entry.by.empty() && signatures.by) entry.by = signatures.by->name;
    const Problems wrong = check(entry);
    problems.insert(problems.end(), wrong.begin(), wrong.end());
    if (entry.kind == EntryKind::failed_pin)
      problems.push_back(
          {Fault::refused, "kind", "only the log itself writes of failed PINs", "another kind", ""});
  }
  if (!problems.empty()) return problems;
  if (entries.empty()) return std::vector<Entry>{};
  // Before the write lock is taken: making a key of a PIN takes its time.
  const auto keys = state_->check_pins(entries.front(), signatures);
  if (!keys) return keys.problems();

  WriteTransaction transaction(state_->database);
  if (auto begun = transaction.begin(); !begun) return begun.problems();
  auto last = state_->last();
  if (!last) return last.problems();
  const auto known = state_->roll();
  if (!known) return known.problems();
  Roll roll = *known;
  std::optional<Entry> before = *std::move(last);
  std::vector<Entry> logged;
  for (const NewEntry& entry : entries) {
    if (auto fits = state_->check_slips(entry); !fits) return fits.problems();
    if (auto approved = check_approval(*this, roll, entry); !approved) return approved.problems();
    Entry next = state_->entry_of(entry, before);
    if (auto done = State::sign(next, *keys, roll); !done) return done.problems();
    next.hash = chain_hash(next);
    if (auto inserted = insert_entry(state_->database, next); !inserted) return inserted.problems();
    if (auto learnt = roll.take(next); !learnt) return learnt.problems();
    before = next;
    logged.push_back(std::move(next));
  }
  if (auto committed = transaction.commit(); !committed) return committed.problems();
  return logged;
}

Result<std::int64_t> Logbook::take_over(const std::vector<Entry>& entries) {
  if (auto may = state_->writable(); !may) return may.problems();
  WriteTransaction transaction(state_->database);
  if (auto begun = transaction.begin(); !begun) return begun.problems();
  const auto last = state_->last();
  if (!last) return last.problems();
  std::int64_t seq = *last ? (*last)->seq : 0, taken = 0;
  std::string head = *last ? (*last)->hash : first_previous();
  const auto problem = [&](const Entry& entry, std::string what) {
    return Problem{Fault::inconsistent_data, fmt::format("entry {}", entry.seq), std::move(what),
                   "an entry that carries the chain on", "verify both copies; nothing was taken over"};
  };
  for (const Entry& entry : entries) {
    if (entry.seq <= seq) {
      const auto ours = state_->with_seq(entry.seq);
      if (!ours) return ours.problems();
      if (!*ours || (*ours)->hash != entry.hash)
        return problem(entry, "this log has another entry of that number: two copies of it went on apart");
      continue;
    }
    if (entry.seq != seq + 1 || entry.previous != head) return problem(entry, "it does not follow this log");
    if (chain_hash(entry) != entry.hash) return problem(entry, "it is not as it was logged");
    if (auto inserted = insert_entry(state_->database, entry); !inserted) return inserted.problems();
    seq = entry.seq;
    head = entry.hash;
    ++taken;
  }
  if (auto committed = transaction.commit(); !committed) return committed.problems();
  return taken;
}

}  // namespace bathwright::logbook
