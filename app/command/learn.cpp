// bathwright learn TANK POLICY: what the log tells of drag-out, efficiencies, evaporation and side reactions,
// and what in it does not fit.
#include <CLI/CLI.hpp>
#include <algorithm>
#include <bathwright/forecast/forecast.hpp>
#include <bathwright/learning/log_history.hpp>
#include <bathwright/sheets/learning_sheet.hpp>
#include <bathwright/shopfiles/policy_file.hpp>
#include <bathwright/units/show.hpp>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <iterator>

#include "context.hpp"
#include "policy_text.hpp"
#include "work/shift_log.hpp"
#include "work/shop.hpp"

namespace bathwright::command {
namespace {

Json json_of(const sheets::LearningPage& page) {
  const learning::Learned& learned = page.learned;
  std::vector<std::string> warnings = learned.notes;
  warnings.insert(warnings.end(), page.passed_over.begin(), page.passed_over.end());
  Json doc = document(warnings);
  doc["tank"] = page.tank.name;
  doc["policy"] = page.policy_file;
  doc["log"] = page.log_file;
  doc["from"] = logbook::iso_utc(page.start);
  doc["analyses"] = learned.analyses;
  doc["levels"] = learned.levels;
  doc["days"] = learned.days;
  doc["reduced_chi2"] = learned.reduced_chi2;
  doc["rms_by_policy"] = learned.rms_by_policy;
  doc["rms_learned"] = learned.rms_learned;
  doc["parameters"] = Json::array();
  for (const learning::Parameter& p : learned.parameters)
    doc["parameters"].push_back({{"what", learning::name(p.what)},
                                 {"use", p.use},
                                 {"label", p.label},
                                 {"unit", p.unit},
                                 {"stated", p.prior},
                                 {"stated_p05", p.prior_p05},
                                 {"stated_p95", p.prior_p95},
                                 {"learned", p.value},
                                 {"learned_p05", p.p05},
                                 {"learned_p95", p.p95},
                                 {"told", p.told},
                                 {"ln_factor", p.ln_factor},
                                 {"u_ln", p.u_ln}});
  doc["covariance_ln"] = learned.covariance;
  doc["suspects"] = Json::array();
  for (const learning::Suspect& s : learned.suspects)
    doc["suspects"].push_back({{"kind", learning::name(s.kind)},
                               {"when", sheets::when_of(page, s)},
                               {"entry", s.when.entry},
                               {"day", s.when.at_h / 24},
                               {"subject", s.subject},
                               {"amount", s.amount},
                               {"u_amount", s.u_amount},
                               {"misfit", s.misfit},
                               {"what", s.words},
                               {"try", s.try_this}});
  doc["compared"] = Json::array();
  for (const learning::Compared& c : learned.compared)
    doc["compared"].push_back({{"entry", c.when.entry},
                               {"day", c.when.at_h / 24},
                               {"quantity", c.quantity},
                               {"predicted", c.predicted},
                               {"u_predicted", c.u_predicted},
                               {"found", c.found},
                               {"u_found", c.u_found},
                               {"misfit", c.misfit},
                               {"ahead", c.ahead},
                               {"ahead_by_policy", c.ahead_by_policy},
                               {"set_aside", c.set_aside}});
  return doc;
}

std::string quoted(double value, const std::string& unit) {
  return '"' + units::significant(value) + ' ' + unit + '"';
}

/// The effects of a use times a factor, as a policy writes them; empty where they go by the state of the
/// bath.
std::string effects_of(const bath::Use& use, const forecast::Policy& policy, double factor,
                       const std::string& unit) {
  std::map<std::string, double> effects;
  const auto own = std::ranges::find(policy.own_rates, use.id, &forecast::OwnRates::use);
  if (own != policy.own_rates.end() && own->effects)
    effects = *own->effects;
  else if (!use.rate)
    for (const auto& effect : use.effects) effects[effect.quantity] = effect.g_per_unit;
  std::string text;
  for (const auto& [id, grams] : effects)
    text += (text.empty() ? "{ \"" : ", \"") + id + "\" = " + quoted(factor * grams, unit);
  return text.empty() ? "" : text + " }";
}

/// Whether the policy doubts the load to come more than the log leaves a doubt about the load that was: then
/// its own figure stays, and what the log ties to the meter says nothing of it.
bool load_doubted(const learning::Parameter& p, const forecast::Policy& policy) {
  return std::ranges::any_of(policy.work, [&](const forecast::Work& work) {
    return work.use == p.use && work.per_shift.u_rel > p.u_ln;
  });
}

/// What the policy has keys for, as learned; the labels of the others go into `without_key`.
std::vector<PolicyFigure> figures_of(const learning::Learned& learned, const forecast::Policy& policy,
                                     const bath::BathType& type, const std::string& text,
                                     std::vector<std::string>& without_key) {
  std::vector<PolicyFigure> figures;
  for (const learning::Parameter& p : learned.parameters) {
    const std::string doubt = quoted(100 * std::sqrt(std::expm1(p.u_ln * p.u_ln)), "%");
    switch (p.what) {
      case learning::What::drag_out:
        figures.push_back({"drag_out", "film", quoted(p.value, "mL/dm2")});
        figures.push_back({"drag_out", "uncertainty", doubt});
        break;
      case learning::What::drag_in:
        figures.push_back({"drag_in", "film", quoted(p.value, "mL/dm2")});
        figures.push_back({"drag_in", "uncertainty", doubt});
        break;
      case learning::What::evaporation:
        figures.push_back({"evaporation", "working", quoted(p.value, "L/h")});
        figures.push_back({"evaporation", "uncertainty", doubt});
        break;
      case learning::What::idle_evaporation:
        figures.push_back({"evaporation", "idle", quoted(p.value, "L/h")});
        break;
      case learning::What::water: {
        std::string brings;
        for (const auto& [id, g_per_L] : policy.water_g_per_L)
          brings += (brings.empty() ? "{ \"" : ", \"") + id +
                    "\" = " + quoted(1000 * g_per_L * std::exp(p.ln_factor), "mg/L");
        figures.push_back({"water", "brings", brings + " }"});
        figures.push_back({"water", "uncertainty", doubt});
        break;
      }
      case learning::What::work:
        if (!has_figure(text, {"work", p.use, "", "per_shift"})) {
          without_key.push_back(p.label + " " + units::significant(p.value, 3) + " " + p.unit);
          break;
        }
        figures.push_back({"work", p.use, quoted(p.value, p.unit.substr(0, p.unit.find(' '))), "per_shift"});
        if (!load_doubted(p, policy)) figures.push_back({"work", p.use, doubt, "uncertainty"});
        break;
      case learning::What::efficiency:
        figures.push_back({"work", p.use,
                           "{ value = " + quoted(p.value, "%") + ", uncertainty = " + doubt + " }",
                           "cathode_efficiency"});
        break;
      case learning::What::effects: {
        const auto use = std::ranges::find(type.uses, p.use, &bath::Use::id);
        const std::string effects = effects_of(*use, policy, std::exp(p.ln_factor), p.unit);
        if (effects.empty()) {
          without_key.push_back(p.label + " " + units::significant(p.value, 3) + " " + p.unit);
          break;
        }
        figures.push_back({"work", p.use, effects, "effects"});
        figures.push_back({"work", p.use, doubt, "effects_uncertainty"});
        break;
      }
    }
  }
  return figures;
}

/// The name a forecast gives what is uncertain in a parameter; empty where it draws nothing of it.
std::string input_of(const learning::Parameter& p, const forecast::Policy& policy) {
  switch (p.what) {
    case learning::What::drag_out:
      return "drag-out";
    case learning::What::drag_in:
      return "drag-in";
    case learning::What::evaporation:
      return "evaporation";
    case learning::What::water:
      return "water";
    case learning::What::work:
      return load_doubted(p, policy) ? "" : "work, " + p.use;
    case learning::What::efficiency:
      return "cathode efficiency of " + p.use;
    case learning::What::effects:
      return "effects of " + p.use;
    case learning::What::idle_evaporation:
      break;
  }
  return "";
}

/// What was learned of two figures together, for those that a forecast with this policy draws.
std::string correlated(const learning::Learned& learned, const forecast::Policy& policy,
                       const std::vector<std::string>& drawn) {
  constexpr double least = 0.05, kept = 0.999;  // short of 1, so that rounding contradicts nothing
  std::string text;
  const std::size_t n = learned.parameters.size();
  for (std::size_t i = 0; i < n; ++i)
    for (std::size_t j = i + 1; j < n; ++j) {
      const learning::Parameter &one = learned.parameters[i], &other = learned.parameters[j];
      const double correlation = learned.covariance[i * n + j] /
                                 std::sqrt(learned.covariance[i * n + i] * learned.covariance[j * n + j]);
      const std::string first = input_of(one, policy), second = input_of(other, policy);
      if (!(std::abs(correlation) >= least) || std::ranges::count(drawn, first) == 0 ||
          std::ranges::count(drawn, second) == 0)
        continue;
      text += "\n[[correlated]]\none = \"" + first + "\"\nother = \"" + second +
              "\"\ncorrelation = " + units::significant(kept * correlation, 4) + "\n";
    }
  return text;
}

/// Writes the policy with what was learned to a new file. What was written is read again before it is kept.
Result<std::vector<std::string>> write_policy(const std::string& path, const std::string& policy_file,
                                              const learning::Learned& learned,
                                              const forecast::Policy& policy, const Shop& shop) {
  if (std::filesystem::exists(path))
    return Problem{Fault::refused, path, "is there already", "a new file",
                   "Name another, or remove it first."};
  std::ifstream in(policy_file, std::ios::binary);
  const std::string text{std::istreambuf_iterator<char>(in), {}};
  std::vector<std::string> without_key;
  std::string written = with_figures(without_tables(text, "correlated"),
                                     figures_of(learned, policy, shop.type(), text, without_key));
  const auto alone = shopfiles::read_policy_text(path, written, shop.type());
  if (!alone) return alone.problems();
  const auto forecast = forecast::Forecast::prepare(shop.tank, shop.chemistry, *alone);
  if (!forecast) return forecast.problems();
  written += correlated(learned, policy, forecast->uncertain());
  const auto again = shopfiles::read_policy_text(path, written, shop.type());
  if (!again) return again.problems();
  if (const auto ready = forecast::Forecast::prepare(shop.tank, shop.chemistry, *again); !ready)
    return ready.problems();
  for (const learning::Parameter& p : learned.parameters)
    if (p.what == learning::What::drag_out &&
        std::abs(again->drag_out_L_per_m2.value / (policy.drag_out_L_per_m2.value * std::exp(p.ln_factor)) -
                 1) > 1e-3)
      return Problem{Fault::bad_input, policy_file, "writes [drag_out] in a way that was not understood",
                     "each table under a heading of its own",
                     "Rewrite it so, or take the figures over by hand."};
  std::ofstream out(path, std::ios::binary);
  out << written;
  out.close();
  if (!out) return Problem{Fault::io, path, "could not be written", "", "Check the folder and its rights."};
  return without_key;
}

int run(const Context& context, const std::string& tank_file, const std::string& policy_file,
        const std::string& write_to) {
  const auto shop = open_shop(context, tank_file);
  if (!shop) return fail(context, shop.problems());
  const auto policy = shopfiles::read_policy(policy_file, shop->type());
  if (!policy) return fail(context, policy.problems());
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  const auto calendar = calendar_of(*log);
  if (!calendar) return fail(context, calendar.problems());
  const auto read = learning::history_of(*log, *calendar, shop->tank, shop->type());
  if (!read) return fail(context, read.problems());
  const auto learned = learning::learn(shop->tank, shop->chemistry, *policy, read->history);
  if (!learned) return fail(context, learned.problems());
  const sheets::LearningPage page{shop->tank,
                                  shop->type(),
                                  *learned,
                                  read->start,
                                  *calendar,
                                  policy_file,
                                  log_path(context).string(),
                                  read->passed_over};
  sheets::Lines told = sheets::learning_sheet(page);
  if (!write_to.empty()) {
    const auto without_key = write_policy(write_to, policy_file, *learned, *policy, *shop);
    if (!without_key) return fail(context, without_key.problems());
    sheets::say(told, "");
    sheets::say(told, "Written to " + write_to +
                          ", with the uncertainty of each figure and what ties them together: the bands of a "
                          "forecast with it are of what this log tells.");
    for (const std::string& figure : *without_key)
      sheets::say(told, "  Not in it, for a policy has no key for it: " + figure + ".", 2);
  }
  if (context.json)
    print(json_of(page));
  else
    print(told);
  return learned->suspects.empty() ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_learn(CLI::App& program, Context& context, Action& action) {
  auto* verb = program
                   .add_subcommand(
                       "learn", "what the log tells of drag-out, efficiency, evaporation; what does not fit")
                   ->fallthrough();
  auto tank = std::make_shared<std::string>(), policy = std::make_shared<std::string>(),
       written = std::make_shared<std::string>();
  verb->add_option("TANK", *tank, "the tank, TOML")->required()->check(CLI::ExistingFile);
  verb->add_option("POLICY", *policy, "how the shop runs it, TOML")->required()->check(CLI::ExistingFile);
  verb->add_option("--write", *written, "a new policy file with what was learned, for forecast");
  verb->footer(
      "Example: bathwright learn baths/al-1.toml baths/policies/al-1.toml --log shift-log.sqlite\n"
      "Needs three analyses or more; additions, water, ampere-hours and area as they are logged. The exit status is 1\n"
      "where something does not fit.\n");
  verb->callback([&context, &action, tank, policy, written] {
    action = [&context, tank, policy, written] { return run(context, *tank, *policy, *written); };
  });
}

}  // namespace bathwright::command
