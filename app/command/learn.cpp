// bathwright learn TANK POLICY: what the log tells of drag-out, efficiencies, evaporation and side reactions,
// and what in it does not fit.
#include <CLI/CLI.hpp>
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

/// What the policy has keys for, as learned; the labels of the others go into `without_key`.
std::vector<PolicyFigure> figures_of(const learning::Learned& learned, const forecast::Policy& policy,
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
      case learning::What::efficiency:
      case learning::What::effects:
        without_key.push_back(p.label + " " + units::significant(p.value, 3) + " " + p.unit);
        break;
    }
  }
  return figures;
}

/// Writes the policy with what was learned to a new file. What was written is read again before it is kept.
Result<std::vector<std::string>> write_policy(const std::string& path, const std::string& policy_file,
                                              const learning::Learned& learned,
                                              const forecast::Policy& policy, const bath::BathType& type) {
  if (std::filesystem::exists(path))
    return Problem{Fault::refused, path, "is there already", "a new file",
                   "Name another, or remove it first."};
  std::ifstream in(policy_file, std::ios::binary);
  const std::string text{std::istreambuf_iterator<char>(in), {}};
  std::vector<std::string> without_key;
  const std::string written = with_figures(text, figures_of(learned, policy, without_key));
  const auto again = shopfiles::read_policy_text(path, written, type);
  if (!again) return again.problems();
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
    const auto without_key = write_policy(write_to, policy_file, *learned, *policy, shop->type());
    if (!without_key) return fail(context, without_key.problems());
    sheets::say(told, "");
    sheets::say(told, "Written to " + write_to + ", with the uncertainty of each figure.");
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
