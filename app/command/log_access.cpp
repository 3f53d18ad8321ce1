#include "log_access.hpp"

#include <cstdlib>
#include <system_error>

#include "user_folders.hpp"

namespace bathwright::command {
namespace {

namespace fs = std::filesystem;

const logbook::SystemClock& wall_clock() {
  static const logbook::SystemClock clock;
  return clock;
}

std::string environment(const char* name) {
  const char* value = std::getenv(name);
  return value ? value : "";
}

}  // namespace

fs::path log_path(const Context& context) {
  return context.log_file.empty() ? data_folder() / "shift-log.sqlite" : fs::path(context.log_file);
}

std::string signer(const Context& context) {
  if (!context.by.empty()) return context.by;
  const std::string user = environment("USER");
  return user.empty() ? "unsigned" : user;
}

Result<logbook::Logbook> open_log_to_read(const Context& context) {
  std::error_code failure;
  if (!fs::exists(log_path(context), failure) && !failure)
    return Problem{Fault::bad_input, log_path(context).string(), "no log is here", "the file of a shift log",
                   "Name one with --log FILE, or write the first entry with bathwright log add."};
  return logbook::Logbook::open(log_path(context), logbook::OpenMode::read_only, wall_clock());
}

Result<Logged> append_to_log(const Context& context, logbook::NewEntry entry) {
  const fs::path path = log_path(context);
  std::error_code failure;
  const bool new_log = !fs::exists(path, failure);
  if (context.log_file.empty()) {
    fs::create_directories(path.parent_path(), failure);
    if (failure)
      return Problem{Fault::io, path.parent_path().string(), failure.message(), "a folder for the shift log",
                     "Name a log with --log FILE."};
  }
  auto log = logbook::Logbook::open(path, logbook::OpenMode::create, wall_clock(),
                                    {.program = program_and_version()});
  if (!log) return log.problems();
  auto opened = std::move(log).value();
  entry.by = signer(context);
  entry.shift = context.shift;
  auto logged = opened.append(entry);
  if (!logged) return logged.problems();
  return Logged{*std::move(logged), path, new_log};
}

std::string words(const Logged& logged) {
  return std::string(logged.new_log ? "New log. " : "") + "Logged as entry " +
         std::to_string(logged.entry.seq) + " by " + logged.entry.by + " in " + logged.path.string() + ".";
}

namespace {

/// "entry 4 (addition)", "entries 4, 5 (additions)"; "" where there is none.
Result<std::string> entries_after(const logbook::Logbook& log, const logbook::Entry& analysis,
                                  logbook::EntryKind kind) {
  logbook::Filter filter;
  filter.tank = analysis.tank;
  filter.kind = kind;
  filter.after_seq = analysis.seq;
  const auto entries = log.list(filter);
  if (!entries) return entries.problems();
  if (entries->empty()) return std::string();
  const bool one = entries->size() == 1;
  std::string text = one ? "entry " : "entries ";
  for (const auto& entry : *entries)
    text += (entry.seq == entries->front().seq ? "" : ", ") + std::to_string(entry.seq);
  return text + " (" + std::string(logbook::name(kind)) + (one ? ")" : "s)");
}

Result<std::vector<std::string>> changes_after(const logbook::Logbook& log, const logbook::Entry& analysis) {
  std::vector<std::string> changes;
  for (const auto kind : {logbook::EntryKind::addition, logbook::EntryKind::dump}) {
    const auto entries = entries_after(log, analysis, kind);
    if (!entries) return entries.problems();
    if (!entries->empty())
      changes.push_back(*entries + (entries->starts_with("entry ") ? " is" : " are") +
                        " not in these readings.");
  }
  const auto plans = entries_after(log, analysis, logbook::EntryKind::plan);
  if (!plans) return plans.problems();
  if (!plans->empty())
    changes.push_back(*plans + (plans->starts_with("entry ") ? " was" : " were") +
                      " made from these readings: what was added since is not in them.");
  return changes;
}

}  // namespace

Result<std::optional<LastAnalysis>> last_analysis(const Context& context, const std::string& tank) {
  std::error_code failure;
  if (context.log_file.empty() || !fs::exists(log_path(context), failure))
    return std::optional<LastAnalysis>{};
  const auto log = open_log_to_read(context);
  if (!log) return log.problems();
  const auto entry = log->latest(tank, logbook::EntryKind::analysis);
  if (!entry) return entry.problems();
  if (!*entry) return std::optional<LastAnalysis>{};
  const std::string place = "log entry " + std::to_string((*entry)->seq);
  Json body = Json::parse((*entry)->body, nullptr, false);
  const auto number = [&](const char* key) -> std::optional<double> {
    if (!body.is_object() || !body.contains(key) || !body[key].is_number()) return std::nullopt;
    return body[key].get<double>();
  };
  LastAnalysis last;
  if (body.is_object() && body.contains("results") && body["results"].is_array())
    for (const Json& result : body["results"])
      if (result.is_object() && result.value("unit", "") == "g/L" && result.contains("quantity") &&
          result["quantity"].is_string() && result.contains("value") && result["value"].is_number())
        last.book.g_per_L[result["quantity"].get<std::string>()] = result["value"].get<double>();
  const auto volume_L = number("volume_L"), temperature_C = number("temperature_C");
  last.book.pH = number("pH");
  if (last.book.g_per_L.empty() || !volume_L || !temperature_C || !last.book.pH)
    return Problem{Fault::bad_input, place, "an analysis this program did not write",
                   "results, volume_L, temperature_C and pH",
                   "Analyse the tank again, or correct the entry."};
  last.volume = {*volume_L};
  last.temperature = {*temperature_C};
  last.book.from = place + ", " + (*entry)->at;
  last.seq = (*entry)->seq;
  last.document = std::move(body);
  auto changes = changes_after(*log, **entry);
  if (!changes) return changes.problems();
  last.changed_since = *std::move(changes);
  return std::optional<LastAnalysis>{std::move(last)};
}

void add_signature(CLI::App& verb, Context& context) {
  verb.add_option("--by", context.by, "who signs the entry; else the user of the computer");
  verb.add_option("--shift", context.shift, "name of the shift");
}

}  // namespace bathwright::command
