// bathwright log list | show | verify | anchor | export: what stands in the shift log.
#include <CLI/CLI.hpp>
#include <bathwright/logbook/salvage.hpp>
#include <bathwright/sheets/log_csv.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <fstream>

#include "anchor_file.hpp"
#include "verbs.hpp"

namespace bathwright::command::log_verb {
namespace {

struct ListOptions {
  std::string tank, kind, text, by, shift, from, to;
  std::size_t last = 0;
};

Result<logbook::Filter> filter_of(const ListOptions& options,
                                  const std::optional<shifts::Calendar>& calendar) {
  logbook::Filter filter;
  filter.tank = options.tank;
  filter.text = options.text;
  filter.by = options.by;
  filter.shift = options.shift;
  if (!options.kind.empty()) {
    const auto kind = logbook::entry_kind(options.kind);
    if (!kind) return kind.problems();
    filter.kind = *kind;
  }
  for (const auto& [text, name, bound] :
       {std::tuple{&options.from, "--from", &filter.from}, std::tuple{&options.to, "--to", &filter.to}}) {
    if (text->empty()) continue;
    const auto time = read_time(*text, name, calendar);
    if (!time) return time.problems();
    *bound = *time;
  }
  filter.limit = options.last;
  filter.newest_first = options.last > 0;
  return filter;
}

struct Listing {
  std::vector<logbook::Entry> entries;  ///< oldest first
  std::optional<shifts::Calendar> calendar;
  sheets::Corrections corrected_by;
};

Result<Listing> listing(const Context& context, const ListOptions& options) {
  const auto log = open_log_to_read(context);
  if (!log) return log.problems();
  Listing listing;
  auto calendar = calendar_of(*log);
  if (!calendar) return calendar.problems();
  listing.calendar = *std::move(calendar);
  const auto filter = filter_of(options, listing.calendar);
  if (!filter) return filter.problems();
  auto entries = log->list(*filter);
  if (!entries) return entries.problems();
  listing.entries = *std::move(entries);
  if (filter->newest_first) std::ranges::reverse(listing.entries);
  for (const auto& entry : listing.entries) {
    const auto corrections = corrections_of(*log, entry.seq);
    if (!corrections) return corrections.problems();
    if (!corrections->empty()) listing.corrected_by[entry.seq] = *corrections;
  }
  return listing;
}

std::vector<std::int64_t> of(const sheets::Corrections& corrected_by, std::int64_t seq) {
  const auto found = corrected_by.find(seq);
  return found == corrected_by.end() ? std::vector<std::int64_t>{} : found->second;
}

int list(const Context& context, const ListOptions& options) {
  const auto found = listing(context, options);
  if (!found) return fail(context, found.problems());
  if (context.json) {
    Json doc = document({});
    doc["entries"] = Json::array();
    for (const auto& entry : found->entries)
      doc["entries"].push_back(json_of(entry, of(found->corrected_by, entry.seq)));
    print(doc);
  } else {
    print(sheets::log_list(found->entries, found->corrected_by, found->calendar));
  }
  return Exit::all_well;
}

int write_csv(const Context& context, const ListOptions& options, const std::string& file,
              const sheets::CsvForm& form) {
  const auto found = listing(context, options);
  if (!found) return fail(context, found.problems());
  const std::string text = sheets::log_csv(found->entries, found->calendar, form);
  std::ofstream out(file, std::ios::binary);
  out << text;
  out.close();
  if (!out)
    return fail(context,
                {{Fault::io, file, "the file cannot be written", "", "Check the folder and the disk."}});
  if (context.json) {
    Json doc = document({});
    doc["entries"] = found->entries.size();
    doc["file"] = file;
    print(doc);
  } else {
    print(sheets::Lines{std::to_string(found->entries.size()) + " entries written to " + file + "."});
  }
  return Exit::all_well;
}

int show(const Context& context, std::int64_t seq) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto entry = log->find(seq);
  if (!entry) return fail(context, entry.problems());
  const auto corrections = corrections_of(*log, seq);
  if (!corrections) return fail(context, corrections.problems());
  if (context.json) {
    Json doc = document({});
    doc["entry"] = json_of(*entry, *corrections);
    print(doc);
  } else {
    constexpr int indent = 2;
    const Json body = Json::parse(entry->body, nullptr, false);
    print(sheets::log_entry(*entry, *corrections, body.is_discarded() ? entry->body : text_of(body, indent)));
  }
  return Exit::all_well;
}

int verify(const Context& context, const std::vector<std::string>& against) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  std::vector<logbook::Anchor> anchors;
  for (const std::string& one : against) {
    const auto read = read_anchors(one);
    if (!read) return fail(context, read.problems());
    anchors.insert(anchors.end(), read->begin(), read->end());
  }
  const logbook::Verification result = log->verify(anchors);
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
    doc["anchors"] = anchors.size();
    print(doc);
  } else {
    print(sheets::log_verification(result, anchors.size()));
  }
  return result.ok ? Exit::all_well : Exit::finding;
}

int anchor(const Context& context, const std::string& file) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto head = log->head();
  if (!head) return fail(context, head.problems());
  if (!*head)
    return fail(context,
                {{Fault::bad_input, log_path(context).string(), "has no entry yet", "one to note", ""}});
  if (Outcome added = add_anchor(file, **head); !added) return fail(context, added.problems());
  if (context.json) {
    Json doc = document({});
    doc["seq"] = (*head)->seq;
    doc["hash"] = (*head)->hash;
    doc["file"] = file;
    print(doc);
  } else {
    print(sheets::Lines{"Entry " + std::to_string((*head)->seq) + " and its hash are noted in " + file + ".",
                        "Keep it where whoever could change the log cannot change it too. Compare with:",
                        "  bathwright log verify --against " + file});
  }
  return Exit::all_well;
}

int salvage(const Context& context, const std::string& file) {
  const auto entries = logbook::salvage(log_path(context));
  if (!entries) return fail(context, entries.problems());
  Json doc = document({});
  doc["entries"] = Json::array();
  for (const auto& entry : *entries) doc["entries"].push_back(json_of(entry));
  std::ofstream out(file, std::ios::binary);
  out << text_of(doc, 1) << '\n';
  out.close();
  if (!out)
    return fail(context,
                {{Fault::io, file, "the file cannot be written", "", "Check the folder and the disk."}});
  const std::string found = std::to_string(entries->size()) + " whole entries" +
                            (entries->empty() ? std::string()
                                              : " between " + std::to_string(entries->front().seq) + " and " +
                                                    std::to_string(entries->back().seq));
  if (context.json) {
    Json answer = document({});
    answer["entries"] = entries->size();
    answer["file"] = file;
    print(answer);
  } else {
    print(sheets::Lines{
        found + " found and written to " + file + ".",
        "Each proves itself by its hash. What is missing between them cannot be had from this file."});
  }
  return Exit::all_well;
}

void add_filter(CLI::App& verb, ListOptions& options) {
  verb.add_option("--tank", options.tank, "of this tank only");
  verb.add_option("--kind", options.kind, "of this kind only: analysis, plan, addition, ...");
  verb.add_option("--writer", options.by, "written by this person only");
  verb.add_option("--in-shift", options.shift, "of this shift only");
  verb.add_option("--from", options.from, "logged then or later: \"2026-03-02 06:00\"");
  verb.add_option("--to", options.to, "logged before then");
  verb.add_option("--text", options.text, "with this text in them");
  verb.add_option("--last", options.last, "only so many, the newest");
}

}  // namespace

Json json_of(const logbook::Entry& entry, const std::vector<std::int64_t>& corrected_by) {
  Json body = Json::parse(entry.body, nullptr, false);
  const auto about = [&](bool fits) { return fits && entry.about ? Json(*entry.about) : Json(nullptr); };
  const bool corrects = entry.kind == logbook::EntryKind::correction;
  return {{"seq", entry.seq},
          {"kind", logbook::name(entry.kind)},
          {"tank", entry.tank},
          {"shift", entry.shift},
          {"at", entry.at},
          {"happened", entry.happened},
          {"boot", entry.uptime.boot},
          {"uptime_ms", entry.uptime.since.count()},
          {"by", entry.by},
          {"role", entry.role},
          {"witness", entry.witness},
          {"station", entry.station},
          {"program", entry.program},
          {"bath_type", entry.bath_type},
          {"corrects", about(corrects)},
          {"slip", about(!corrects)},
          {"corrected_by", corrected_by},
          {"body", body.is_discarded() ? Json(entry.body) : body},
          {"hash", entry.hash},
          {"previous", entry.previous}};
}

Result<std::vector<std::int64_t>> corrections_of(const logbook::Logbook& log, std::int64_t seq) {
  logbook::Filter filter;
  filter.kind = logbook::EntryKind::correction;
  filter.about = seq;
  const auto entries = log.list(filter);
  if (!entries) return entries.problems();
  std::vector<std::int64_t> numbers;
  for (const auto& entry : *entries) numbers.push_back(entry.seq);
  return numbers;
}

Result<logbook::UtcTime> read_time(const std::string& text, const std::string& option,
                                   const std::optional<shifts::Calendar>& calendar) {
  if (const auto utc = logbook::utc_from_iso(text)) return *utc;
  // A date, or date and minute, is a moment of the same written out.
  const std::string full = text.size() == 10 ? text + " 00:00" : text;
  if (full.size() == 16 && (full[10] == ' ' || full[10] == 'T'))
    if (const auto shown = logbook::utc_from_iso(full.substr(0, 10) + "T" + full.substr(11) + ":00.000Z")) {
      if (!calendar) return *shown;
      return calendar->zone().occurrence(shifts::LocalTime(shown->time_since_epoch())).first;
    }
  return Problem{Fault::bad_input, option, '"' + text + "\" is no moment",
                 "2026-03-02, \"2026-03-02 05:40\" or 2026-03-02T05:40:00.000Z",
                 calendar ? "" : "The log has no shifts, so times are in UTC."};
}

void add_reading(CLI::App& log, Context& context, Action& action) {
  auto* list_verb = log.add_subcommand("list", "the entries, oldest first")->fallthrough();
  auto filter = std::make_shared<ListOptions>();
  add_filter(*list_verb, *filter);
  list_verb->callback(
      [&context, &action, filter] { action = [&context, filter] { return list(context, *filter); }; });

  auto* show_verb = log.add_subcommand("show", "one entry in full")->fallthrough();
  auto seq = std::make_shared<std::int64_t>(0);
  show_verb->add_option("NUMBER", *seq, "as in the list")->required();
  show_verb->callback([&context, &action, seq] { action = [&context, seq] { return show(context, *seq); }; });

  auto* verify_verb = log.add_subcommand("verify", "that every entry is as it was logged")->fallthrough();
  auto against = std::make_shared<std::vector<std::string>>();
  verify_verb->add_option("--against", *against,
                          "a hash noted elsewhere, as on a hand-over sheet, or a file of log anchor");
  verify_verb->callback(
      [&context, &action, against] { action = [&context, against] { return verify(context, *against); }; });

  auto* anchor_verb =
      log.add_subcommand("anchor", "notes the last entry's hash in a file kept elsewhere")->fallthrough();
  auto anchor_path = std::make_shared<std::string>();
  anchor_verb->add_option("FILE", *anchor_path, "a line is added to it")->required();
  anchor_verb->callback([&context, &action, anchor_path] {
    action = [&context, anchor_path] { return anchor(context, *anchor_path); };
  });

  auto* salvage_verb =
      log.add_subcommand("salvage", "what a damaged log still holds, as JSON; the log stays as it is")
          ->fallthrough();
  auto salvaged = std::make_shared<std::string>();
  salvage_verb->add_option("FILE", *salvaged, "the JSON file to write")->required();
  salvage_verb->callback([&context, &action, salvaged] {
    action = [&context, salvaged] { return salvage(context, *salvaged); };
  });

  auto* export_verb = log.add_subcommand("export", "entries as CSV, for a spreadsheet")->fallthrough();
  auto exported = std::make_shared<ListOptions>();
  auto csv = std::make_shared<std::string>();
  auto form = std::make_shared<sheets::CsvForm>();
  export_verb->add_option("FILE", *csv, "the CSV file to write")->required();
  add_filter(*export_verb, *exported);
  export_verb->add_flag("--decimal-comma", form->decimal_comma, "12,5 and semicolons between columns");
  export_verb->callback([&context, &action, exported, csv, form] {
    action = [&context, exported, csv, form] { return write_csv(context, *exported, *csv, *form); };
  });
}

}  // namespace bathwright::command::log_verb
