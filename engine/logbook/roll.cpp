#include "roll.hpp"

#include <fmt/format.h>
#include <fmt/ranges.h>

#include <algorithm>
#include <nlohmann/json.hpp>

#include "bathwright/base/nearest.hpp"

namespace bathwright::logbook {
namespace {

using Json = nlohmann::json;

const std::vector<std::string>& role_names() {
  static const std::vector<std::string> names{"operator", "chemist", "auditor"};
  return names;
}

/// Design of the rights: a shift's work for the operator, what binds others for the chemist.
bool may_write(Role role, EntryKind kind) {
  switch (kind) {
    case EntryKind::setting:
    case EntryKind::dump:
    case EntryKind::slip_approved:
      return role == Role::chemist;
    case EntryKind::failed_pin:
      return false;  // only the log itself
    default:
      return role != Role::auditor;
  }
}

Problem refuse(const Entry& entry, std::string what, std::string expected, std::string try_this = {}) {
  return {Fault::refused, std::string(name(entry.kind)), std::move(what), std::move(expected),
          std::move(try_this)};
}

bool tells_shifts(const Entry& setting) {
  const Json body = Json::parse(setting.body, nullptr, false);
  return body.is_object() && body.contains("shifts");
}

Problem malformed(std::string what, std::string expected) {
  return {Fault::bad_input, "body", std::move(what), std::move(expected), ""};
}

}  // namespace

std::string_view name(Role role) { return role_names()[static_cast<std::size_t>(role)]; }

Result<Role> role_of(std::string_view name) {
  const auto& names = role_names();
  const auto found = std::find(names.begin(), names.end(), name);
  if (found != names.end()) return static_cast<Role>(found - names.begin());
  const auto near = nearest(name, names);
  return Problem{Fault::bad_input, "role", fmt::format("\"{}\" is no role", name),
                 fmt::format("one of {}", fmt::join(names, ", ")),
                 near ? "did you mean \"" + *near + "\"?" : ""};
}

std::string body_of(const Person& person) {
  return Json{{"name", person.name},    {"role", name(person.role)}, {"active", person.active},
              {"key", person.key},      {"salt", person.salt},       {"memory_KiB", person.memory_KiB},
              {"passes", person.passes}}
      .dump();
}

std::string body_of(const SecondSignature& rule) {
  Json kinds = Json::array();
  for (const EntryKind kind : rule.kinds) kinds.push_back(name(kind));
  return Json{{"second_signature", {{"tank", rule.tank}, {"kinds", kinds}}}}.dump();
}

Result<Person> person_in(const Entry& entry) {
  const Json body = Json::parse(entry.body, nullptr, false);
  Person person;
  try {
    const auto role = role_of(body.at("role").get<std::string>());
    if (!role) return role.problems();
    person = {.name = body.at("name"),
              .role = *role,
              .active = body.at("active"),
              .seq = entry.seq,
              .key = body.at("key"),
              .salt = body.at("salt"),
              .memory_KiB = body.at("memory_KiB"),
              .passes = body.at("passes")};
  } catch (const Json::exception&) {
    return malformed("a person without all that a person needs",
                     "name, role, active, key, salt, memory_KiB and passes");
  }
  if (person.name.empty()) return malformed("a person without a name", "a name");
  return person;
}

Outcome Roll::take(const Entry& entry) {
  if (entry.kind == EntryKind::person) {
    auto told = person_in(entry);
    if (!told) return told.problems();
    const auto known = std::ranges::find(people_, told->name, &Person::name);
    if (known != people_.end())
      *known = *std::move(told);
    else
      people_.push_back(*std::move(told));
  } else if (entry.kind == EntryKind::setting) {
    const Json body = Json::parse(entry.body, nullptr, false);
    if (tells_shifts(entry)) {
      shifts_ = body["shifts"].dump();
      return Done{};
    }
    Asks asks;
    try {
      const Json& rule = body.at("second_signature");
      asks.tank = rule.at("tank");
      for (const Json& kind : rule.at("kinds")) {
        const auto known = entry_kind(kind.get<std::string>());
        if (!known) return known.problems();
        asks.kinds.push_back(*known);
      }
    } catch (const Json::exception&) {
      return malformed("a setting the log does not know",
                       R"({"second_signature": {"tank": ..., "kinds": [...]}} or {"shifts": {...}})");
    }
    std::erase_if(asks_, [&](const Asks& earlier) { return earlier.tank == asks.tank; });
    asks_.push_back(std::move(asks));
  }
  return Done{};
}

const Person* Roll::person(const std::string& name) const {
  const auto found = std::ranges::find(people_, name, &Person::name);
  return found == people_.end() ? nullptr : &*found;
}

bool Roll::asks_second(const std::string& tank, EntryKind kind) const {
  return std::ranges::any_of(asks_, [&](const Asks& asks) {
    return asks.tank == tank && std::ranges::find(asks.kinds, kind) != asks.kinds.end();
  });
}

std::optional<Problem> Roll::refusal(const Entry& entry) const {
  if (people_.empty()) {
    if (entry.kind == EntryKind::setting && !tells_shifts(entry))
      return refuse(entry, "the log has no people who could answer for a rule", "a chemist's signature",
                    "admit the chemist first");
    if (entry.kind != EntryKind::person) return std::nullopt;
    const auto first = person_in(entry);
    if (!first) return first.problems().front();
    if (first->role != Role::chemist || !first->active || entry.by != first->name)
      return refuse(entry, "the first person of a log is not its chemist",
                    "a chemist who signs the own entry",
                    "admit the chemist first; the chemist admits the others");
    return std::nullopt;
  }
  const Person* by = person(entry.by);
  if (entry.kind == EntryKind::failed_pin) return std::nullopt;
  if (!by || entry.role.empty())
    return refuse(entry, fmt::format("\"{}\" has not signed", entry.by),
                  "the signature of one of the log's people", "give a name of the log's people and its PIN");
  if (!by->active) return refuse(entry, entry.by + " signs no more", "somebody of the log's active people");
  if (entry.role != name(by->role))
    return refuse(entry, fmt::format("{} signed as {}", entry.by, entry.role), std::string(name(by->role)));
  const Person* witness = entry.witness.empty() ? nullptr : person(entry.witness);
  if (!entry.witness.empty()) {
    if (!witness || !witness->active || witness->role == Role::auditor)
      return refuse(entry, entry.witness + " may not sign second", "an active operator or chemist");
    if (witness == by)
      return refuse(entry, entry.by + " signed twice", "two persons",
                    "let somebody else see what was done and sign second");
  }
  if (!may_write(by->role, entry.kind))
    return refuse(entry, fmt::format("{} is {} and may not write this", entry.by, name(by->role)),
                  by->role == Role::auditor ? "an operator or chemist" : "a chemist");
  if (entry.kind == EntryKind::slip && by->role != Role::chemist &&
      !(witness && witness->role == Role::chemist))
    return refuse(entry, "no chemist approved it", "a chemist's signature, first or second");
  // An approval is the second person's signature itself; what this rule asks for is that there is one.
  if (!witness && entry.kind != EntryKind::slip_approved && asks_second(entry.tank, entry.kind))
    return refuse(entry, fmt::format("tank {} asks for a second signature on this", entry.tank),
                  "two persons' signatures", "let a second person sign as witness");
  if (entry.kind == EntryKind::person && by->role != Role::chemist) {
    const auto told = person_in(entry);
    if (!told) return told.problems().front();
    if (told->name != by->name || told->role != by->role || !told->active)
      return refuse(entry, fmt::format("{} is {} and may change only the own PIN", entry.by, name(by->role)),
                    "a chemist");
  }
  return std::nullopt;
}

}  // namespace bathwright::logbook
