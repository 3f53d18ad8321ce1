// bathwright log add | correct | approve | close: entries by hand.
#include <CLI/CLI.hpp>
#include <bathwright/sheets/text.hpp>

#include "shared_options.hpp"
#include "verbs.hpp"
#include "work/what_must_not_meet.hpp"

namespace bathwright::command::log_verb {
namespace {

/// Nothing where the log has entries of this tank; else a note that it has none, and which tanks it has.
Result<std::vector<std::string>> note_of_new_tank(const Context& context, const std::string& tank) {
  std::error_code failure;
  std::vector<std::string> tanks;
  if (std::filesystem::exists(log_path(context), failure)) {
    const auto log = open_log_to_read(context);
    if (!log) return log.problems();
    auto known = log->tanks();
    if (!known) return known.problems();
    tanks = *std::move(known);
  }
  if (tank.empty() || std::ranges::find(tanks, tank) != tanks.end()) return std::vector<std::string>{};
  std::string note = "This is the first entry of a tank \"" + tank + "\".";
  for (const std::string& known : tanks)
    note += (known == tanks.front() ? " The log has " : ", ") + ('"' + known + '"');
  return std::vector<std::string>{note + (tanks.empty() ? "" : ".")};
}

int append(const Context& context, logbook::NewEntry entry, const std::vector<std::string>& more_notes = {}) {
  auto notes = note_of_new_tank(context, entry.tank);
  if (!notes) return fail(context, notes.problems());
  std::vector<std::string> all = *std::move(notes);
  all.insert(all.end(), more_notes.begin(), more_notes.end());
  return tell(context, append_to_log(context, std::move(entry)), all);
}

Json json_of(const std::vector<MustNotMeet>& stops) {
  Json all = Json::array();
  for (const MustNotMeet& one : stops)
    all.push_back({{"chemical", one.chemical}, {"rule", one.rule}, {"why", one.why}});
  return all;
}

/// What must never meet is logged only as what happened. Nothing is logged where it is told as work.
int append_stopped(const Context& context, logbook::NewEntry entry, const Met& met, bool happened) {
  const sheets::Lines lines = alarm(entry.tank, met.stops, happened);
  std::optional<Logged> logged;
  if (happened) {
    Json body = Json::parse(entry.body, nullptr, false);
    if (!body.is_object()) body = Json{{"told", body}};
    body["event"] = true;
    body["stops"] = json_of(met.stops);
    entry.body = body.dump();
    auto written = append_to_log(context, std::move(entry));
    if (!written) {
      if (!context.json) print(lines);
      return fail(context, written.problems());
    }
    logged = *std::move(written);
  }
  if (context.json) {
    std::vector<std::string> warnings;
    for (const MustNotMeet& one : met.stops)
      warnings.push_back("STOP: " + one.chemical + " (" + one.rule + "): " + one.why);
    Json doc = document(warnings);
    doc["stops"] = json_of(met.stops);
    doc["entry"] = logged ? log_verb::json_of(logged->entry) : Json(nullptr);
    doc["log"] = log_path(context).string();
    print(doc);
  } else {
    print(lines);
    if (logged) {
      sheets::Lines words_of_log{""};
      sheets::say(words_of_log, words(*logged));
      print(words_of_log);
    }
  }
  return Exit::finding;
}

struct AddOptions {
  std::string kind, tank, body, note, happened;
  std::optional<std::int64_t> slip;
  bool event = false;
};

/// When it was done, by the clock of the log's shop.
Result<logbook::UtcTime> moment(const Context& context, const std::string& text) {
  std::optional<shifts::Calendar> calendar;
  if (const auto log = open_log_to_read(context)) {
    auto known = calendar_of(*log);
    if (!known) return known.problems();
    calendar = *std::move(known);
  }
  return read_time(text, "--happened", calendar);
}

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
  entry.about = options.slip;
  if (!options.happened.empty()) {
    const auto time = moment(context, options.happened);
    if (!time) return fail(context, time.problems());
    entry.happened = *time;
  }
  if (options.event && (*kind != logbook::EntryKind::addition || options.slip))
    return fail(context, {{Fault::bad_input, "log add --event",
                           options.slip ? "is of what no slip ordered" : "is of an addition",
                           "an addition without --slip", ""}});
  using enum logbook::EntryKind;
  if (*kind != addition && *kind != plan && *kind != slip) return append(context, std::move(entry));
  const auto met = met_in_tank(context, entry.tank, Json::parse(entry.body, nullptr, false));
  if (!met) return fail(context, met.problems());
  if (!met->stops.empty()) return append_stopped(context, std::move(entry), *met, options.event);
  return append(context, std::move(entry), *kind == addition ? met->not_checked : std::vector<std::string>());
}

/// An entry that answers an earlier one, of the same tank.
int answer(const Context& context, logbook::EntryKind kind, std::int64_t seq, const Json& body) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto answered = log->find(seq);
  if (!answered) return fail(context, answered.problems());
  logbook::NewEntry entry;
  entry.kind = kind;
  entry.tank = answered->tank;
  entry.about = seq;
  entry.body = body.dump();
  return append(context, std::move(entry));
}

int correct(const Context& context, std::int64_t seq, const std::string& reason, const std::string& note) {
  Json body{{"reason", reason}};
  if (!note.empty()) body["note"] = note;
  return answer(context, logbook::EntryKind::correction, seq, body);
}

int approve(const Context& context, std::int64_t seq, const std::string& note) {
  Json body = Json::object();
  if (!note.empty()) body["note"] = note;
  return answer(context, logbook::EntryKind::slip_approved, seq, body);
}

int close(const Context& context, std::int64_t seq, bool cancelled, const std::string& reason) {
  Json body{{"outcome", cancelled ? "cancelled" : "done"}};
  if (!reason.empty()) body["reason"] = reason;
  return answer(context, logbook::EntryKind::slip_closed, seq, body);
}

}  // namespace

int tell(const Context& context, const Result<Logged>& logged, const std::vector<std::string>& notes) {
  if (!logged) return fail(context, logged.problems());
  if (context.json) {
    Json doc = document(notes);
    doc["entry"] = json_of(logged->entry);
    doc["log"] = logged->path.string();
    print(doc);
  } else {
    sheets::Lines lines;
    sheets::say(lines, words(*logged));
    for (const std::string& note : notes) sheets::say(lines, "Note: " + note, 2);
    print(lines);
  }
  return Exit::all_well;
}

void add_writing(CLI::App& log, Context& context, Action& action) {
  auto* add_verb = log.add_subcommand("add", "write an entry")->fallthrough();
  auto entry = std::make_shared<AddOptions>();
  add_verb->add_option("KIND", entry->kind, "analysis, plan, slip, addition, level, ampere-hours, dump, note")
      ->required();
  add_verb->add_option("--tank", entry->tank, "the tank it is about")->required();
  add_verb->add_option("--note", entry->note, "what happened, in words");
  add_verb->add_option("--body", entry->body, "what happened, as JSON");
  add_verb->add_option("--slip", entry->slip, "of an addition: the number of the slip that ordered it");
  add_verb->add_option("--happened", entry->happened, "when it was done, if not now: \"2026-03-02 05:40\"");
  add_verb->add_flag("--event", entry->event,
                     "of an addition: it happened though it must not, and is told as that, not as work");
  add_signature(*add_verb, context);
  add_verb->callback(
      [&context, &action, entry] { action = [&context, entry] { return add(context, *entry); }; });

  auto* correct_verb =
      log.add_subcommand("correct", "answer a wrong entry; both stay visible")->fallthrough();
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

  auto* approve_verb =
      log.add_subcommand("approve", "a second person has read a slip and stands for it")->fallthrough();
  auto read = std::make_shared<std::int64_t>(0);
  auto remark = std::make_shared<std::string>();
  approve_verb->add_option("NUMBER", *read, "the slip")->required();
  approve_verb->add_option("--note", *remark, "what is to be heeded");
  add_signature(*approve_verb, context);
  approve_verb->callback([&context, &action, read, remark] {
    action = [&context, read, remark] { return approve(context, *read, *remark); };
  });

  auto* close_verb = log.add_subcommand("close", "a slip was carried out, or is cancelled")->fallthrough();
  auto slip = std::make_shared<std::int64_t>(0);
  auto cancelled = std::make_shared<bool>(false);
  auto why = std::make_shared<std::string>();
  close_verb->add_option("NUMBER", *slip, "the slip")->required();
  close_verb->add_flag("--cancelled", *cancelled, "nothing of it is added any more");
  close_verb->add_option("--reason", *why, "why it is cancelled, or what was different");
  add_signature(*close_verb, context);
  close_verb->callback([&context, &action, slip, cancelled, why] {
    action = [&context, slip, cancelled, why] { return close(context, *slip, *cancelled, *why); };
  });
}

}  // namespace bathwright::command::log_verb
