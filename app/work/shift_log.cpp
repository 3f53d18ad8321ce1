#include "shift_log.hpp"

#include <limits.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <bathwright/logbook/file_digest.hpp>
#include <system_error>

#include "user_folders.hpp"

namespace bathwright::work {
namespace {

namespace fs = std::filesystem;

/// The name of this computer in its network.
std::string station() {
  std::array<char, HOST_NAME_MAX + 1> name{};
  return gethostname(name.data(), name.size() - 1) == 0 && name[0] != '\0' ? name.data() : "local";
}

/// What runs here, so that an entry can be traced to it. A program that cannot be read has no hash.
const std::string& program_and_hash() {
  static const std::string text = [] {
    const auto hash = logbook::file_digest("/proc/self/exe");
    return program_and_version() + (hash ? " " + *hash : "");
  }();
  return text;
}

}  // namespace

const logbook::Clock& wall_clock() {
  static const logbook::SystemClock clock;
  return clock;
}

fs::path log_path(const Session& session) {
  return session.log_file.empty() ? data_folder() / "shift-log.sqlite" : fs::path(session.log_file);
}

Result<logbook::Logbook> open_log_to_read(const Session& session) {
  std::error_code failure;
  if (!fs::exists(log_path(session), failure) && !failure)
    return Problem{Fault::bad_input, log_path(session).string(), "no log is here", "the file of a shift log",
                   "Name one with --log FILE, or write the first entry with bathwright log add."};
  return logbook::Logbook::open(log_path(session), logbook::OpenMode::read_only, wall_clock());
}

Result<OpenLog> open_log_to_write(const Session& session) {
  const fs::path path = log_path(session);
  std::error_code failure;
  const bool is_new = !fs::exists(path, failure);
  if (path.parent_path() == data_folder()) {  // the usual place; another folder is the user's to make
    fs::create_directories(path.parent_path(), failure);
    if (failure)
      return Problem{Fault::io, path.parent_path().string(), failure.message(), "a folder for the shift log",
                     "Name a log with --log FILE."};
  }
  auto log = logbook::Logbook::open(path, logbook::OpenMode::create, wall_clock(),
                                    {.station = station(), .program = program_and_hash()});
  if (!log) return log.problems();
  return OpenLog{*std::move(log), path, is_new};
}

Result<std::optional<shifts::Calendar>> calendar_of(const logbook::Logbook& log) {
  const auto told = log.shift_pattern();
  if (!told) return told.problems();
  if (told->empty()) return std::optional<shifts::Calendar>();
  const auto pattern = shifts::pattern_from_json(*told, "the log's shifts");
  if (!pattern) return pattern.problems();
  auto calendar = shifts::Calendar::of(*pattern);
  if (!calendar) return calendar.problems();
  return std::optional(*std::move(calendar));
}

Result<logbook::Signatures> signatures_for(const Session& session, const logbook::Logbook& log) {
  logbook::Signatures signatures;
  const auto people = log.people();
  if (!people) return people.problems();
  if (people->empty() && session.witness.empty()) return signatures;
  const std::string name = signer(session);
  for (const auto& [who, credential] :
       {std::pair{name, &signatures.by}, std::pair{session.witness, &signatures.witness}}) {
    if (who.empty()) continue;
    // A name the log does not know is answered by the log; its PIN is nobody's business.
    const bool known = std::ranges::find(*people, who, &logbook::Person::name) != people->end();
    auto pin = known ? session.pin("PIN of " + who) : Result<std::string>(std::string());
    if (!pin) return pin.problems();
    *credential = logbook::Credential{who, *std::move(pin)};
  }
  return signatures;
}

Result<Logged> change_people(const Session& session, const PeopleChange& change) {
  auto opened = open_log_to_write(session);
  if (!opened) return opened.problems();
  OpenLog open = *std::move(opened);
  const auto signatures = signatures_for(session, open.log);
  if (!signatures) return signatures.problems();
  auto entry = change(open.log, *signatures);
  if (!entry) return entry.problems();
  return Logged{*std::move(entry), open.path, open.is_new};
}

Result<std::vector<logbook::Entry>> append_all(const Session& session, OpenLog& open,
                                               std::vector<logbook::NewEntry> entries) {
  const auto signatures = signatures_for(session, open.log);
  if (!signatures) return signatures.problems();
  const auto calendar = calendar_of(open.log);
  if (!calendar) return calendar.problems();
  for (logbook::NewEntry& entry : entries) {
    entry.by = signer(session);
    entry.shift = session.shift;
    if (!entry.shift.empty() || !*calendar) continue;
    const auto shift = (*calendar)->shift_at(entry.happened.value_or(wall_clock().utc_now()));
    if (shift) entry.shift = shift->label;
  }
  return open.log.append_all(entries, *signatures);
}

Result<Logged> append_to_log(const Session& session, logbook::NewEntry entry) {
  auto opened = open_log_to_write(session);
  if (!opened) return opened.problems();
  OpenLog open = *std::move(opened);
  const auto logged = append_all(session, open, {std::move(entry)});
  if (!logged) return logged.problems();
  return Logged{logged->front(), open.path, open.is_new};
}

std::string words(const Logged& logged) {
  const logbook::Entry& entry = logged.entry;
  return std::string(logged.new_log ? "New log. " : "") + "Logged as entry " + std::to_string(entry.seq) +
         (entry.role.empty() ? " by " : ", signed by ") + entry.by +
         (entry.witness.empty() ? "" : " and " + entry.witness) + ", in " + logged.path.string() + ".";
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

struct Changes {
  std::vector<std::string> sentences;
  bool added = false;
};

Result<Changes> changes_after(const logbook::Logbook& log, const logbook::Entry& analysis) {
  Changes changes;
  for (const auto kind : {logbook::EntryKind::addition, logbook::EntryKind::dump}) {
    const auto entries = entries_after(log, analysis, kind);
    if (!entries) return entries.problems();
    if (entries->empty()) continue;
    changes.added = true;
    changes.sentences.push_back(*entries + (entries->starts_with("entry ") ? " is" : " are") +
                                " not in these readings.");
  }
  const auto open = log.open_slips(analysis.tank);
  if (!open) return open.problems();
  for (const auto& slip : *open)
    changes.sentences.push_back("Slip " + std::to_string(slip.seq) +
                                " is open: find out what of it is in the tank, log that and close it.");
  const auto plans = entries_after(log, analysis, logbook::EntryKind::plan);
  if (!plans) return plans.problems();
  if (!plans->empty())
    changes.sentences.push_back(*plans + (plans->starts_with("entry ") ? " was" : " were") +
                                " made from these readings: what was added since is not in them.");
  return changes;
}

}  // namespace

namespace {

/// The analysis of an entry; nothing where it does not say all that a tank's state needs, as an imported one
/// may not.
std::optional<LastAnalysis> analysis_in(const logbook::Entry& entry) {
  Json body = Json::parse(entry.body, nullptr, false);
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
  if (last.book.g_per_L.empty() || !volume_L || !temperature_C || !last.book.pH) return std::nullopt;
  last.volume = {*volume_L};
  last.temperature = {*temperature_C};
  last.book.from = "log entry " + std::to_string(entry.seq) + ", " + entry.at;
  last.seq = entry.seq;
  last.document = std::move(body);
  return last;
}

}  // namespace

Result<std::optional<LastAnalysis>> last_analysis(const Session& session, const std::string& tank) {
  std::error_code failure;
  if (session.log_file.empty() || !fs::exists(log_path(session), failure))
    return std::optional<LastAnalysis>{};
  const auto log = open_log_to_read(session);
  if (!log) return log.problems();
  logbook::Filter filter;
  filter.tank = tank;
  filter.kind = logbook::EntryKind::analysis;
  filter.newest_first = true;
  filter.limit = 100;  // a tank that has no whole analysis among so many has none that is worth starting from
  const auto entries = log->list(filter);
  if (!entries) return entries.problems();
  std::string passed_over;
  for (const auto& entry : *entries) {
    const auto corrected = log->is_corrected(entry.seq);
    if (!corrected) return corrected.problems();
    auto last = *corrected ? std::nullopt : analysis_in(entry);
    if (!last) {
      passed_over = std::to_string(entry.seq) + (passed_over.empty() ? "" : ", ") + passed_over;
      continue;
    }
    auto changes = changes_after(*log, entry);
    if (!changes) return changes.problems();
    last->changed_since = changes->sentences;
    last->added_since = changes->added;
    if (!passed_over.empty())
      last->changed_since.push_back(
          "Analysis " + passed_over +
          " is newer, but was corrected or does not give levels, volume, temperature and pH together.");
    return std::optional<LastAnalysis>{std::move(last)};
  }
  if (passed_over.empty()) return std::optional<LastAnalysis>{};
  return Problem{Fault::bad_input, "log, analysis " + passed_over,
                 "was corrected, or does not say what a tank's state needs",
                 "levels, volume, temperature and pH", "Analyse the tank, or give readings."};
}

}  // namespace bathwright::work
