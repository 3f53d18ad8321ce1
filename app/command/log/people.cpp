// bathwright log people: who may sign.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/table.hpp>

#include "shared_options.hpp"
#include "verbs.hpp"

namespace bathwright::command::log_verb {
namespace {

int list(const Context& context) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto people = log->people();
  if (!people) return fail(context, people.problems());
  if (context.json) {
    Json doc = document({});
    doc["people"] = Json::array();
    for (const auto& person : *people)
      doc["people"].push_back({{"name", person.name},
                               {"role", logbook::name(person.role)},
                               {"active", person.active},
                               {"since_entry", person.seq},
                               {"key", person.key}});
    print(doc);
    return Exit::all_well;
  }
  sheets::Lines lines;
  if (people->empty()) {
    sheets::say(lines, "The log has no people: anybody may write into it, and nobody signs.");
    sheets::say(lines,
                "To begin, the chemist signs up first: bathwright log people admit NAME --role chemist");
  } else {
    sheets::Table table({{"name"}, {"role"}, {"signs"}, {"since entry", sheets::Align::number}});
    for (const auto& person : *people)
      table.add({person.name, std::string(logbook::name(person.role)), person.active ? "yes" : "no more",
                 std::to_string(person.seq)});
    sheets::append(lines, table.lines());
  }
  print(lines);
  return Exit::all_well;
}

/// Opens the log, collects the signer's PINs, and tells what `change` logged.
int changed(const Context& context, const PeopleChange& change) {
  const auto logged = change_people(context, change);
  return logged ? tell(context, *logged) : fail(context, logged.problems());
}

/// A PIN typed twice, since nobody sees it; from a file once.
Result<std::string> new_pin(const Context& context, const std::string& name) {
  auto pin = context.pin("new PIN of " + name);
  if (!pin || !context.pin_file.empty()) return pin;
  const auto again = context.pin("new PIN of " + name + ", again");
  if (!again) return again.problems();
  if (*pin != *again)
    return Problem{Fault::bad_input, "PIN", "the two are not the same", "the same PIN twice", "Try again."};
  return pin;
}

int admit(const Context& context, const std::string& name, const std::string& role_name) {
  const auto role = logbook::role_of(role_name);
  if (!role) return fail(context, role.problems());
  return changed(context, [&](logbook::Logbook& open, const auto& signatures) -> Result<logbook::Entry> {
    const auto pin = new_pin(context, name);
    if (!pin) return pin.problems();
    return open.admit(name, *role, *pin, signatures);
  });
}

int change_pin(const Context& context) {
  return changed(context, [&](logbook::Logbook& open, const auto& signatures) -> Result<logbook::Entry> {
    const std::string name = signer(context);
    if (!signatures.by)
      return Problem{Fault::bad_input, "log people", "the log has no people", "a log with people", ""};
    const auto pin = new_pin(context, name);
    if (!pin) return pin.problems();
    return open.change_pin(*signatures.by, *pin);
  });
}

int ask_second(const Context& context, const std::string& tank, const std::vector<std::string>& kinds) {
  logbook::SecondSignature rule{tank, {}};
  for (const std::string& name : kinds) {
    const auto kind = logbook::entry_kind(name);
    if (!kind) return fail(context, kind.problems());
    rule.kinds.push_back(*kind);
  }
  return changed(context, [&](logbook::Logbook& open, const auto& signatures) {
    return open.ask_second_signature(rule, signatures);
  });
}

}  // namespace

void add_people(CLI::App& log, Context& context, Action& action) {
  auto* people = log.add_subcommand("people", "who may sign, and what takes two signatures")
                     ->require_subcommand(1)
                     ->fallthrough();
  people->footer(
      "Examples:\n"
      "  bathwright log people admit \"A. Chemist\" --role chemist\n"
      "  bathwright log people admit \"M. Okafor\" --role operator --by \"A. Chemist\"\n"
      "  bathwright log people second --tank \"C-04\" addition slip-approved --by \"A. Chemist\"\n"
      "slip-approved: nothing is added against a slip before a second person approved it (log approve).\n"
      "An operator writes a shift's entries; a chemist also slips, dumps and rules; an auditor reads only.\n"
      "The first of a log is its chemist. From then on every entry is signed with a PIN.\n");

  auto* list_verb = people->add_subcommand("list", "the log's people")->fallthrough();
  list_verb->callback([&context, &action] { action = [&context] { return list(context); }; });

  auto name = std::make_shared<std::string>();
  auto role = std::make_shared<std::string>();
  const auto with_name = [&](const char* verb, const char* does) {
    auto* sub = people->add_subcommand(verb, does)->fallthrough();
    sub->add_option("NAME", *name, "as it is to stand in the log")->required();
    add_signature(*sub, context);
    return sub;
  };
  auto* admit_verb = with_name("admit", "lets somebody sign, or gives a new role or PIN");
  admit_verb->add_option("--role", *role, "operator, chemist or auditor")->required();
  admit_verb->callback([&context, &action, name, role] {
    action = [&context, name, role] { return admit(context, *name, *role); };
  });
  with_name("retire", "somebody left; the entries stay")->callback([&context, &action, name] {
    action = [&context, name] {
      return changed(context, [&](logbook::Logbook& open, const auto& signatures) {
        return open.retire(*name, signatures);
      });
    };
  });
  with_name("unlock", "ends the shutting out after wrong PINs")->callback([&context, &action, name] {
    action = [&context, name] {
      return changed(context, [&](logbook::Logbook& open, const auto& signatures) {
        return open.unlock(*name, signatures);
      });
    };
  });

  auto* pin = people->add_subcommand("pin", "changes one's own PIN")->fallthrough();
  add_signature(*pin, context);
  pin->callback([&context, &action] { action = [&context] { return change_pin(context); }; });

  auto* second = people->add_subcommand("second", "what of a tank takes two signatures")->fallthrough();
  auto tank = std::make_shared<std::string>();
  auto kinds = std::make_shared<std::vector<std::string>>();
  second->add_option("--tank", *tank, "the tank")->required();
  second->add_option("KIND", *kinds, "addition, slip, dump, ...; none ends it");
  add_signature(*second, context);
  second->callback([&context, &action, tank, kinds] {
    action = [&context, tank, kinds] { return ask_second(context, *tank, *kinds); };
  });
}

}  // namespace bathwright::command::log_verb
