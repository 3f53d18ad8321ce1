#include <algorithm>
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/learning_sheet.hpp>
#include <bathwright/sheets/log_sheet.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <bathwright/sheets/tank_parts.hpp>
#include <chrono>
#include <cmath>

namespace bathwright::sheets {
namespace {

using learning::Compared;
using learning::Parameter;
using learning::Suspect;
using learning::SuspectKind;

std::string range(double from, double to) { return figure(from, 3) + " to " + figure(to, 3); }

Lines figures(const LearningPage& page) {
  Table table({{"figure"}, {"stated"}, {"learned", Align::number}, {"90 %"}, {"told", Align::number}});
  for (const Parameter& p : page.learned.parameters)
    table.add({p.label + ", " + p.unit, figure(p.prior, 3), figure(p.value, 3), range(p.p05, p.p95),
               fixed(100 * p.told, 0) + " %"});
  return table.lines();
}

/// The latest levels, and of those before the ones that fit worst.
Lines compared(const LearningPage& page) {
  constexpr std::size_t latest = 12, worst = 6;
  constexpr double worth_a_look = 2.5;
  const auto& all = page.learned.compared;
  std::vector<const Compared*> shown;
  const std::size_t older = all.size() - std::min(latest, all.size());
  for (std::size_t i = 0; i < older; ++i)
    if (std::abs(all[i].misfit) > worth_a_look) shown.push_back(&all[i]);
  std::ranges::stable_sort(shown, std::greater{}, [](const Compared* c) { return std::abs(c->misfit); });
  if (shown.size() > worst) shown.resize(worst);
  for (std::size_t i = older; i < all.size(); ++i) shown.push_back(&all[i]);
  std::ranges::stable_sort(shown, {}, [](const Compared* c) { return c->when.at_h; });
  Table table({{page.calendar ? "sampled" : "sampled (UTC)"},
               {"entry", Align::number},
               {"level"},
               {"predicted", Align::number},
               {"found g/L", Align::number},
               {"off by", Align::number},
               {""}});
  for (const Compared* c : shown)
    table.add({time_of(page, c->when.at_h), std::to_string(c->when.entry), pretty(c->quantity),
               figure(c->predicted, 4), figure(c->found, 4), fixed(c->misfit, 1) + " u",
               c->set_aside ? "set aside" : ""});
  return table.lines();
}

}  // namespace

std::string time_of(const LearningPage& page, double at_h) {
  const auto after =
      std::chrono::round<std::chrono::milliseconds>(std::chrono::duration<double, std::ratio<3600>>(at_h));
  return local_time(logbook::iso_utc(page.start + after), page.calendar);
}

std::string when_of(const LearningPage& page, const Suspect& suspect) {
  if (suspect.kind == SuspectKind::drift || suspect.kind == SuspectKind::figure) return "";
  const bool of_an_entry = suspect.kind == SuspectKind::analysis || suspect.kind == SuspectKind::change ||
                           suspect.kind == SuspectKind::addition_missing;
  if (of_an_entry || suspect.from_h == suspect.when.at_h)
    return time_of(page, suspect.when.at_h) + ", entry " + std::to_string(suspect.when.entry);
  return "between " + time_of(page, suspect.from_h) + " and " + time_of(page, suspect.when.at_h);
}

Lines learning_sheet(const LearningPage& page) {
  const learning::Learned& learned = page.learned;
  Lines lines;
  tank_title(lines, page.tank, page.tank.working_volume.v, page.tank.temperature);
  say(lines, deferral);
  say(lines, "Log: " + page.log_file + ", " + std::to_string(learned.analyses) + " analyses in " +
                 fixed(learned.days, 0) + " days, from " + time_of(page, 0) +
                 " on. Policy: " + page.policy_file + ".");
  heading(lines, "What the log tells");
  append(lines, figures(page));
  say(lines,
      "  Stated: by the policy or the bath type, with its 90 % interval. Told: how much of that doubt the log took away.",
      2);
  heading(lines, "What does not fit");
  if (learned.suspects.empty()) say(lines, "  Nothing: everything logged explains what was found.", 2);
  for (const Suspect& suspect : learned.suspects) {
    const std::string when = when_of(page, suspect);
    say(lines, "  " + (when.empty() ? "All the time" : when) + ": " + suspect.words + " " + suspect.try_this,
        4);
  }
  heading(lines, "Predicted against found");
  say(lines,
      "  Foretold from the first analysis on without looking at any other, levels are off by " +
          figure(100 * learned.rms_by_policy, 2) + " % as stated, by " +
          figure(100 * learned.rms_learned, 2) +
          " % as learned. Below: each foretold from those before it; u is one standard uncertainty.",
      2);
  append(lines, compared(page));
  if (learned.reduced_chi2 > 1)
    say(lines,
        "  The levels scatter " + figure(std::sqrt(learned.reduced_chi2), 2) +
            " times as wide as stated; all intervals were widened so.",
        2);
  if (!learned.notes.empty() || !page.passed_over.empty()) heading(lines, "Read this with it");
  for (const std::string& note : learned.notes) say(lines, "  " + note, 2);
  for (const std::string& entry : page.passed_over) say(lines, "  " + entry, 2);
  return lines;
}

}  // namespace bathwright::sheets
