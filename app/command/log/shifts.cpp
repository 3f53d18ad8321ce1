// bathwright log shifts | hand-over: the shop's calendar, and what one shift tells the next.
#include <CLI/CLI.hpp>
#include <bathwright/base/nearest.hpp>
#include <bathwright/hand_over/hand_over.hpp>
#include <bathwright/sheets/hand_over_sheet.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/shopfiles/tank_file.hpp>

#include "printed.hpp"
#include "shared_options.hpp"
#include "verbs.hpp"
#include "work/hand_over_document.hpp"

namespace bathwright::command::log_verb {
namespace {

/// "night=22:00", "night=22:00-06:00", "night=22:00@Mon,Tue".
shifts::Shift shift_of(const std::string& text) {
  shifts::Shift shift;
  const auto piece = [](const std::string& from, char mark) {
    const auto at = from.find(mark);
    return at == std::string::npos ? std::pair{from, std::string()}
                                   : std::pair{from.substr(0, at), from.substr(at + 1)};
  };
  const auto [left, days] = piece(text, '@');
  const auto [name, times] = piece(left, '=');
  shift.name = name;
  std::tie(shift.starts, shift.ends) = piece(times, '-');
  std::string rest = days;
  while (!rest.empty()) {
    const auto [day, others] = piece(rest, ',');
    shift.days.push_back(day);
    rest = others;
  }
  return shift;
}

struct ShiftOptions {
  std::string ready_made, zone;
  std::vector<std::string> custom;
};

Result<shifts::ShiftPattern> pattern_of(const ShiftOptions& options) {
  if (options.ready_made.empty() == options.custom.empty())
    return Problem{Fault::bad_input, "log shifts", "needs one of two",
                   "2x12 or 3x8, or --shift-at for each shift", ""};
  if (!options.ready_made.empty()) return shifts::ready_made(options.ready_made, options.zone);
  shifts::ShiftPattern pattern{options.zone, {}};
  for (const std::string& text : options.custom) pattern.shifts.push_back(shift_of(text));
  return pattern;
}

int show_shifts(const Context& context) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto told = log->shift_pattern();
  if (!told) return fail(context, told.problems());
  const auto calendar = calendar_of(*log);
  if (!calendar) return fail(context, calendar.problems());
  const auto now = wall_clock().utc_now();
  if (context.json) {
    Json doc = document({});
    doc["pattern"] = told->empty() ? Json(nullptr) : Json::parse(*told);
    print(doc);
    return Exit::all_well;
  }
  if (!*calendar) {
    print(
        sheets::Lines{"The log has no shifts. To set them: bathwright log shifts 3x8 --zone Europe/Berlin"});
    return Exit::all_well;
  }
  sheets::Table table({{"shift"}, {"from"}, {"to"}});
  for (const auto& span : (*calendar)->shifts_between(now, now + std::chrono::days(1)))
    table.add(
        {span.label, (*calendar)->zone().local_text(span.from), (*calendar)->zone().local_text(span.to)});
  sheets::Lines lines{"The next day's shifts, by the clock of " + (*calendar)->zone().name() + ":"};
  sheets::append(lines, table.lines());
  print(lines);
  return Exit::all_well;
}

int set_shifts(const Context& context, const ShiftOptions& options) {
  if (options.ready_made.empty() && options.custom.empty() && options.zone.empty())
    return show_shifts(context);
  const auto pattern = pattern_of(options);
  if (!pattern) return fail(context, pattern.problems());
  if (const auto calendar = shifts::Calendar::of(*pattern); !calendar)
    return fail(context, calendar.problems());
  logbook::NewEntry entry;
  entry.kind = logbook::EntryKind::setting;
  entry.body = Json{{"shifts", Json::parse(shifts::to_json(*pattern))}}.dump();
  return tell(context, append_to_log(context, std::move(entry)));
}

Result<shifts::ShiftSpan> shift_to_hand_over(const shifts::Calendar& calendar, const std::string& label,
                                             logbook::UtcTime now) {
  if (label.empty()) return hand_over::latest_shift(calendar, now);
  std::vector<std::string> labels;
  for (auto& span : calendar.shifts_between(now - std::chrono::days(31), now)) {
    if (span.label == label) return std::move(span);
    labels.push_back(span.label);
  }
  const auto close = nearest(label, labels);
  return Problem{Fault::bad_input, "--of", "no shift \"" + label + "\" began in the last month",
                 "a label as in the list", close ? "Did you mean \"" + *close + "\"?" : ""};
}

struct HandOverOptions {
  std::vector<std::string> tank_files;
  std::string label;  ///< of the shift; empty: the latest
  bool log_it = false;
  PrintedFiles printed;
};

int hand_over_verb(const Context& context, const HandOverOptions& options) {
  std::vector<bath::Tank> tanks;
  for (const std::string& file : options.tank_files) {
    auto tank = shopfiles::read_tank(file, matter::StockCatalogue::built_in());
    if (!tank) return fail(context, tank.problems());
    tanks.push_back(*std::move(tank));
  }
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto calendar = calendar_of(*log);
  if (!calendar) return fail(context, calendar.problems());
  if (!*calendar)
    return fail(context,
                {{Fault::bad_input, log_path(context).string(), "has no shifts", "shifts to hand over",
                  "Set them: bathwright log shifts 3x8 --zone Europe/Berlin"}});
  const auto now = wall_clock().utc_now();
  const auto shift = shift_to_hand_over(**calendar, options.label, now);
  if (!shift) return fail(context, shift.problems());
  const auto told = hand_over::hand_over(*log, **calendar, *shift, tanks, now);
  if (!told) return fail(context, told.problems());
  Json doc = hand_over_document(*told);
  const sheets::Page page =
      sheets::hand_over_page(*told, **calendar, signer(context), sheets::Units(context.units));
  sheets::Lines lines = sheets::text_of(page);
  if (options.log_it) {
    logbook::NewEntry entry;
    entry.kind = logbook::EntryKind::hand_over;
    entry.body = text_of(doc);
    const auto logged = append_to_log(context, std::move(entry));
    if (!logged) return fail(context, logged.problems());
    doc["logged_as"] = logged->entry.seq;
    sheets::say(lines, words(*logged));
  }
  if (context.json)
    print(doc);
  else
    print(lines);
  if (Outcome written = write_printed(options.printed, page); !written)
    return fail(context, written.problems());
  const bool quiet = told->open_slips.empty() && told->out_of_window.empty() && told->due.empty();
  return quiet ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_shifts(CLI::App& log, Context& context, Action& action) {
  auto* verb = log.add_subcommand("shifts", "the shop's shifts: shows them, or sets them")->fallthrough();
  auto options = std::make_shared<ShiftOptions>();
  verb->add_option("PATTERN", options->ready_made, "2x12 or 3x8");
  verb->add_option("--zone", options->zone, "the shop's time zone, as Europe/Berlin");
  verb->add_option("--shift-at", options->custom,
                   "a shift of its own: night=22:00, night=22:00-06:00@Mon,Tue");
  add_signature(*verb, context);
  verb->callback([&context, &action, options] {
    action = [&context, options] { return set_shifts(context, *options); };
  });
  verb->footer(
      "Examples:\n"
      "  bathwright log shifts 3x8 --zone Europe/Berlin --by \"A. Chemist\"\n"
      "  bathwright log shifts --zone America/Chicago --shift-at day=06:00-18:00@Mon,Tue,Wed,Thu\n");

  auto* hand_over = log.add_subcommand("hand-over", "the sheet one shift gives the next")->fallthrough();
  auto to_hand_over = std::make_shared<HandOverOptions>();
  hand_over
      ->add_option("TANK", to_hand_over->tank_files, "tanks whose windows and schedules are looked at, TOML")
      ->check(CLI::ExistingFile);
  hand_over->add_option("--of", to_hand_over->label, "the shift, as \"2026-03-02 night\"; else the latest");
  hand_over->add_flag("--sign", to_hand_over->log_it, "logs that it was handed over");
  add_printed_files(*hand_over, to_hand_over->printed);
  add_units(*hand_over, context);
  add_signature(*hand_over, context);
  hand_over->callback([&context, &action, to_hand_over] {
    action = [&context, to_hand_over] { return hand_over_verb(context, *to_hand_over); };
  });
  hand_over->footer(
      "Example: bathwright log hand-over baths/n-07.toml baths/e-02.toml --sign --by \"M. Okafor\"\n");
}

}  // namespace bathwright::command::log_verb
