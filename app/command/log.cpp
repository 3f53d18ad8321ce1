// bathwright log add | list | show | verify | correct: the shift log.
#include <bathwright/sheets/log_sheet.hpp>
#include <set>

#include "context.hpp"
#include "log_access.hpp"

namespace bathwright::command {
namespace {

/// The numbers of an entry's corrections.
std::vector<std::int64_t> corrections_of(const logbook::Entry& entry,
                                         const sheets::Corrections& corrected_by) {
  const auto found = corrected_by.find(entry.seq);
  return found == corrected_by.end() ? std::vector<std::int64_t>{} : found->second;
}

Json json_of(const logbook::Entry& entry, const sheets::Corrections& corrected_by) {
  Json body = Json::parse(entry.body, nullptr, false);
  return {{"seq", entry.seq},
          {"kind", logbook::name(entry.kind)},
          {"tank", entry.tank},
          {"shift", entry.shift},
          {"at", entry.at},
          {"by", entry.by},
          {"station", entry.station},
          {"program", entry.program},
          {"corrects", entry.kind == logbook::EntryKind::correction ? Json(*entry.about) : Json(nullptr)},
          {"corrected_by", corrections_of(entry, corrected_by)},
          {"body", body.is_discarded() ? Json(entry.body) : body},
          {"hash", entry.hash},
          {"previous", entry.previous}};
}

Result<sheets::Corrections> corrections(const logbook::Logbook& log) {
  logbook::Filter filter;
  filter.kind = logbook::EntryKind::correction;
  const auto entries = log.list(filter);
  if (!entries) return entries.problems();
  sheets::Corrections corrected_by;
  for (const auto& entry : *entries)
    if (entry.about) corrected_by[*entry.about].push_back(entry.seq);
  return corrected_by;
}

struct ListOptions {
  std::string tank, kind, text;
};

int list(const Context& context, const ListOptions& options) {
  logbook::Filter filter;
  filter.tank = options.tank;
  filter.text = options.text;
  if (!options.kind.empty()) {
    const auto kind = logbook::entry_kind(options.kind);
    if (!kind) return fail(context, kind.problems());
    filter.kind = *kind;
  }
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto entries = log->list(filter);
  if (!entries) return fail(context, entries.problems());
  const auto corrected_by = corrections(*log);
  if (!corrected_by) return fail(context, corrected_by.problems());
  if (context.json) {
    Json doc = document({});
    doc["entries"] = Json::array();
    for (const auto& entry : *entries) doc["entries"].push_back(json_of(entry, *corrected_by));
    print(doc);
  } else {
    print(sheets::log_list(*entries, *corrected_by));
  }
  return Exit::all_well;
}

int show(const Context& context, std::int64_t seq) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto entry = log->find(seq);
  if (!entry) return fail(context, entry.problems());
  const auto corrected_by = corrections(*log);
  if (!corrected_by) return fail(context, corrected_by.problems());
  if (context.json) {
    Json doc = document({});
    doc["entry"] = json_of(*entry, *corrected_by);
    print(doc);
  } else {
    constexpr int indent = 2;
    const Json body = Json::parse(entry->body, nullptr, false);
    print(sheets::log_entry(*entry, body.is_discarded() ? entry->body : text_of(body, indent)));
  }
  return Exit::all_well;
}

int verify(const Context& context) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const logbook::Verification result = log->verify();
  if (context.json) {
    std::vector<std::string> warnings;
    for (const auto& step : result.clock_steps) warnings.push_back(step.words);
    Json doc = document(warnings);
    doc["ok"] = result.ok;
    doc["entries"] = result.entries;
    doc["problems"] = Json::array();
    for (const auto& problem : result.problems)
      doc["problems"].push_back({{"seq", problem.seq}, {"what", problem.words}});
    doc["head"] = result.head;
    print(doc);
  } else {
    print(sheets::log_verification(result));
  }
  return result.ok ? Exit::all_well : Exit::finding;
}

/// Nothing where the log has entries of this tank; else a note that it has none, and which tanks it has.
Result<std::vector<std::string>> note_of_new_tank(const Context& context, const std::string& tank) {
  std::error_code failure;
  std::set<std::string> tanks;
  if (std::filesystem::exists(log_path(context), failure)) {
    const auto log = open_log_to_read(context);
    if (!log) return log.problems();
    const auto entries = log->list();
    if (!entries) return entries.problems();
    for (const auto& entry : *entries) tanks.insert(entry.tank);
  }
  if (tanks.contains(tank)) return std::vector<std::string>{};
  std::string note = "This is the first entry of a tank \"" + tank + "\".";
  for (const std::string& known : tanks)
    note += (known == *tanks.begin() ? " The log has " : ", ") + ('"' + known + '"');
  return std::vector<std::string>{note + (tanks.empty() ? "" : ".")};
}

int append(const Context& context, logbook::NewEntry entry) {
  const auto notes = note_of_new_tank(context, entry.tank);
  if (!notes) return fail(context, notes.problems());
  const auto logged = append_to_log(context, std::move(entry));
  if (!logged) return fail(context, logged.problems());
  if (context.json) {
    Json doc = document(*notes);
    doc["entry"] = json_of(logged->entry, {});
    doc["log"] = logged->path.string();
    print(doc);
  } else {
    sheets::Lines lines;
    sheets::say(lines, words(*logged));
    for (const std::string& note : *notes) sheets::say(lines, "Note: " + note, 2);
    print(lines);
  }
  return Exit::all_well;
}

struct AddOptions {
  std::string kind, tank, body, note;
};

int add(const Context& context, const AddOptions& options) {
  const auto kind = logbook::entry_kind(options.kind);
  if (!kind) return fail(context, kind.problems());
  if (options.body.empty() == options.note.empty())
    return fail(context,
                {{Fault::bad_input, "log add", options.body.empty() ? "says nothing" : "says two things",
                  "one of --body JSON and --note TEXT", ""}});
  logbook::NewEntry entry;
  entry.kind = *kind;
  entry.tank = options.tank;
  entry.body = options.body.empty() ? Json{{"note", options.note}}.dump() : options.body;
  return append(context, std::move(entry));
}

int correct(const Context& context, std::int64_t seq, const std::string& reason, const std::string& note) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto wrong = log->find(seq);
  if (!wrong) return fail(context, wrong.problems());
  logbook::NewEntry entry;
  entry.kind = logbook::EntryKind::correction;
  entry.tank = wrong->tank;
  entry.about = seq;
  Json body{{"reason", reason}};
  if (!note.empty()) body["note"] = note;
  entry.body = body.dump();
  return append(context, std::move(entry));
}

}  // namespace

void add_log(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("log", "the shift log")->require_subcommand(1)->fallthrough();
  verb->footer(
      "Examples:\n"
      "  bathwright log add addition --tank \"N-07 Watts nickel\" --note \"12 kg boric acid\" --by \"M. Okafor\"\n"
      "  bathwright log list --tank \"N-07 Watts nickel\"\n"
      "  bathwright log verify\n"
      "--tank takes the name that stands in the tank's file.\n"
      "Without --log the log is shift-log.sqlite in the user's data folder.\n");

  auto* list_verb = verb->add_subcommand("list", "the entries, oldest first")->fallthrough();
  auto filter = std::make_shared<ListOptions>();
  list_verb->add_option("--tank", filter->tank, "of this tank only");
  list_verb->add_option("--kind", filter->kind, "of this kind only: analysis, plan, addition, ...");
  list_verb->add_option("--text", filter->text, "with this text in them");
  list_verb->callback(
      [&context, &action, filter] { action = [&context, filter] { return list(context, *filter); }; });

  auto* show_verb = verb->add_subcommand("show", "one entry in full")->fallthrough();
  auto seq = std::make_shared<std::int64_t>(0);
  show_verb->add_option("NUMBER", *seq, "as in the list")->required();
  show_verb->callback([&context, &action, seq] { action = [&context, seq] { return show(context, *seq); }; });

  auto* verify_verb = verb->add_subcommand("verify", "that every entry is as it was logged")->fallthrough();
  verify_verb->callback([&context, &action] { action = [&context] { return verify(context); }; });

  auto* add_verb = verb->add_subcommand("add", "write an entry")->fallthrough();
  auto entry = std::make_shared<AddOptions>();
  add_verb->add_option("KIND", entry->kind, "analysis, plan, slip, addition, level, ampere-hours, dump, note")
      ->required();
  add_verb->add_option("--tank", entry->tank, "the tank it is about")->required();
  add_verb->add_option("--note", entry->note, "what happened, in words");
  add_verb->add_option("--body", entry->body, "what happened, as JSON");
  add_signature(*add_verb, context);
  add_verb->callback(
      [&context, &action, entry] { action = [&context, entry] { return add(context, *entry); }; });

  auto* correct_verb =
      verb->add_subcommand("correct", "answer a wrong entry; both stay visible")->fallthrough();
  auto reason = std::make_shared<std::string>();
  auto right = std::make_shared<std::string>();
  auto wrong = std::make_shared<std::int64_t>(0);
  correct_verb->add_option("NUMBER", *wrong, "the wrong entry")->required();
  correct_verb->add_option("--reason", *reason, "why it is wrong")->required();
  correct_verb->add_option("--note", *right, "what is right");
  add_signature(*correct_verb, context);
  correct_verb->callback([&context, &action, wrong, reason, right] {
    action = [&context, wrong, reason, right] { return correct(context, *wrong, *reason, *right); };
  });
}

}  // namespace bathwright::command
