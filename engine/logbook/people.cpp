// Who writes: PINs checked, failures counted, entries signed, and the people's own entries.
#include "bathwright/logbook/people.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "chain.hpp"
#include "logbook_state.hpp"
#include "stored_entry.hpp"

namespace bathwright::logbook {
namespace {

constexpr int tries = 5;
constexpr std::chrono::minutes shut_out{15};

Problem refused(std::string what, std::string expected, std::string try_this) {
  return {Fault::refused, "signature", std::move(what), std::move(expected), std::move(try_this)};
}

Problem unknown_person(const std::string& name, const Roll& roll) {
  if (roll.people().empty())
    return refused("the log has no people, so nobody can sign", "a log with people",
                   "admit the chemist first, or write without a PIN");
  std::string names;
  for (const Person& person : roll.people()) names += (names.empty() ? "" : ", ") + person.name;
  return {Fault::bad_input, "signature", fmt::format("\"{}\" is none of the log's people", name),
          "one of " + names, "check the spelling, or let the chemist admit them"};
}

/// Time from an entry to now: by the clock that cannot be set where both are of one boot.
std::chrono::milliseconds elapsed(const Entry& from, const Clock& clock) {
  const Uptime now = clock.uptime();
  if (!now.boot.empty() && now.boot == from.uptime.boot) return now.since - from.uptime.since;
  const auto then = utc_from_iso(from.at);
  return then ? std::max(std::chrono::milliseconds(0), clock.utc_now() - *then)
              : std::chrono::milliseconds(0);
}

}  // namespace

Outcome Logbook::State::log_failed_pin(const std::string& name) {
  WriteTransaction transaction(database);
  if (auto begun = transaction.begin(); !begun) return begun;
  const auto before = last();
  if (!before) return before.problems();
  NewEntry failure;
  failure.kind = EntryKind::failed_pin;
  failure.by = name;
  failure.body = "{}";
  Entry entry = entry_of(failure, *before);
  entry.hash = chain_hash(entry);
  if (auto inserted = insert_entry(database, entry); !inserted) return inserted;
  return transaction.commit();
}

Result<int> Logbook::State::failures_in_a_row(const Person& person,
                                              std::chrono::milliseconds& since_last) const {
  const auto latest = all_of("WHERE \"by\" = ? AND seq > ? ORDER BY seq DESC LIMIT ?",
                             {person.name, person.seq, std::int64_t{tries}});
  if (!latest) return latest.problems();
  int failures = 0;
  for (const Entry& entry : *latest) {
    if (entry.kind != EntryKind::failed_pin) break;
    ++failures;
  }
  if (failures > 0) since_last = elapsed(latest->front(), clock);
  return failures;
}

Result<Signer> Logbook::State::check_pin(const Person& person, const std::string& pin) {
  std::chrono::milliseconds since_last{};
  const auto failures = failures_in_a_row(person, since_last);
  if (!failures) return failures.problems();
  if (*failures >= tries && since_last < shut_out)
    return refused(fmt::format("{} is shut out after {} wrong PINs", person.name, *failures),
                   fmt::format("{} min more without a try",
                               std::chrono::ceil<std::chrono::minutes>(shut_out - since_last).count()),
                   "wait, or let the chemist unlock the name");
  auto key = SigningKey::unlock(person, pin);
  if (key) return Signer{person, *std::move(key)};
  if (auto logged = log_failed_pin(person.name); !logged) return logged.problems();
  const int left = tries - *failures - 1;
  return refused(
      fmt::format("this is not the PIN of {}", person.name), "the own PIN",
      left > 0
          ? fmt::format("try again; {} more before the name is shut out for {} min", left, shut_out.count())
          : fmt::format("the name is shut out for {} min; the chemist can unlock it", shut_out.count()));
}

Result<Keys> Logbook::State::check_pins(const NewEntry& entry, const Signatures& signatures) {
  Keys keys;
  if (!signatures.by && !signatures.witness) return keys;
  const auto known = roll();
  if (!known) return known.problems();
  const auto unlock = [&](const Credential& credential) -> Result<Signer> {
    const Person* person = known->person(credential.name);
    if (person) return check_pin(*person, credential.pin);
    // The first of a log signs with the key that the entry itself tells.
    if (known->people().empty() && entry.kind == EntryKind::person) {
      Entry told;
      told.body = entry.body;
      const auto first = person_in(told);
      if (first && first->name == credential.name) return check_pin(*first, credential.pin);
    }
    return unknown_person(credential.name, *known);
  };
  for (const auto& [credential, signer] :
       {std::pair{&signatures.by, &keys.by}, std::pair{&signatures.witness, &keys.witness}}) {
    if (!*credential) continue;
    auto unlocked = unlock(**credential);
    if (!unlocked) return unlocked.problems();
    signer->emplace(*std::move(unlocked));
  }
  return keys;
}

Outcome Logbook::State::sign(Entry& entry, const Keys& keys, const Roll& roll) {
  // The people may have changed between the PIN and the lock.
  for (const auto* signer : {&keys.by, &keys.witness}) {
    const Person* now = *signer ? roll.person((*signer)->person.name) : nullptr;
    if (now && *now != (*signer)->person)
      return refused("the entry of " + now->name + " among the log's people has just changed", "",
                     "sign again with the PIN that holds now");
  }
  if (keys.by) {
    if (entry.by != keys.by->person.name)
      return refused(fmt::format("written by {} and signed by {}", entry.by, keys.by->person.name),
                     "one name for both", "");
    entry.role = name(keys.by->person.role);
  }
  if (keys.witness) entry.witness = keys.witness->person.name;
  if (auto refusal = roll.refusal(entry)) return *std::move(refusal);
  const std::string digest = content_digest(entry);
  if (keys.by) entry.signature = keys.by->key.sign(digest);
  if (keys.witness) entry.witness_signature = keys.witness->key.sign(digest);
  return Done{};
}

Result<Entry> Logbook::append_person(Person person, const Signatures& signatures) {
  NewEntry entry;
  entry.kind = EntryKind::person;
  entry.body = body_of(person);
  return append(entry, signatures);
}

Result<Entry> Logbook::admit(const std::string& name, Role role, const std::string& pin,
                             const Signatures& signatures) {
  Person person;
  person.name = name;
  person.role = role;
  if (auto given = give_key(person, pin, state_->settings.pin_cost); !given) return given.problems();
  const auto known = people();
  if (!known) return known.problems();
  return append_person(person, known->empty() ? Signatures{Credential{name, pin}, {}} : signatures);
}

namespace {

Result<Person> one_of(const Result<std::vector<Person>>& people, const std::string& name) {
  if (!people) return people.problems();
  const auto found = std::ranges::find(*people, name, &Person::name);
  if (found != people->end()) return *found;
  return Problem{Fault::bad_input, "person", fmt::format("\"{}\" is none of the log's people", name),
                 "a name of theirs", "list them to find it"};
}

}  // namespace

Result<Entry> Logbook::change_pin(const Credential& credential, const std::string& new_pin) {
  const auto known = one_of(people(), credential.name);
  if (!known) return known.problems();
  Person person = *known;
  if (auto given = give_key(person, new_pin, state_->settings.pin_cost); !given) return given.problems();
  return append_person(std::move(person), {credential, {}});
}

Result<Entry> Logbook::retire(const std::string& name, const Signatures& signatures) {
  const auto known = one_of(people(), name);
  if (!known) return known.problems();
  Person person = *known;
  person.active = false;
  return append_person(std::move(person), signatures);
}

Result<Entry> Logbook::unlock(const std::string& name, const Signatures& signatures) {
  const auto person = one_of(people(), name);
  if (!person) return person.problems();
  return append_person(*person, signatures);
}

Result<Entry> Logbook::ask_second_signature(const SecondSignature& rule, const Signatures& signatures) {
  NewEntry entry;
  entry.kind = EntryKind::setting;
  entry.body = body_of(rule);
  return append(entry, signatures);
}

}  // namespace bathwright::logbook
