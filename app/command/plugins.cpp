// bathwright plugins list | show ID | allow FILE | forget WHICH: which bath types there are, what one says
// about itself, and whether one that did not come with the program may run.
#include <unistd.h>
#include <CLI/CLI.hpp>

#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>
#include <cstdio>
#include <iostream>

#include "context.hpp"
#include "plugins_check.hpp"
#include "work/allowed_plugins.hpp"
#include "work/shop.hpp"

namespace bathwright::command {
namespace {

constexpr std::size_t shown_digits = 12;  ///< of a hash in the table; --json has all

int list(const Context& context) {
  const auto types = known_bath_types(context);
  if (context.json) {
    Json doc = document({});
    doc["plugins"] = Json::array();
    for (const auto& listed : types.list())
      doc["plugins"].push_back({{"id", listed.id},
                                {"version", listed.version},
                                {"state", plugin_host::name(listed.state)},
                                {"file", listed.path.string()},
                                {"sha256", listed.sha256},
                                {"reason", listed.problems.empty() ? "" : text(listed.problems)},
                                {"notes", listed.notes}});
    print(doc);
    return Exit::all_well;
  }
  sheets::Lines lines;
  sheets::Table table({{"bath type"}, {"version"}, {"state"}, {"SHA-256"}, {"kind"}});
  for (const auto& listed : types.list())
    table.add({listed.id.empty() ? listed.path.filename().string() : listed.id, listed.version,
               std::string(plugin_host::name(listed.state)), listed.sha256.substr(0, shown_digits),
               listed.path.extension() == ".so"     ? "compiled"
               : listed.path.extension() == ".toml" ? "TOML"
                                                    : ""});
  if (table.empty())
    sheets::say(lines, "No bath type found. Name a folder with --plugins.");
  else
    sheets::append(lines, table.lines());
  std::filesystem::path folder;
  for (const auto& listed : types.list())
    if (const auto in = listed.path.parent_path(); in != folder)
      sheets::say(lines, "In " + (folder = in).string(), 2);
  for (const auto& listed : types.list()) {
    for (const Problem& problem : listed.problems) sheets::say(lines, problem.text(), 2);
    for (const std::string& note : listed.notes)
      sheets::say(lines, listed.path.filename().string() + ": " + note, 2);
  }
  print(lines);
  return Exit::all_well;
}

// ---- allow, forget

sheets::Lines page_of(const std::filesystem::path& file, const plugin_host::Examined& examined) {
  sheets::Lines lines;
  sheets::Table table({{"file"}, {file.string()}});
  table.add({"SHA-256", examined.sha256});
  for (const auto& type : examined.report.types) {
    table.add({"bath type", type.id + " " + type.version + ", " + type.name});
    table.add({"author", type.author});
    table.add({"licence", type.licence});
  }
  sheets::append(lines, table.lines());
  return lines;
}

/// Whether the person at the terminal types yes.
bool says_yes() {
  std::printf("Allow it? Type yes: ");
  std::fflush(stdout);
  std::string answer;
  return std::getline(std::cin, answer) && answer == "yes";
}

int allow(const Context& context, const std::string& name, bool yes) {
  const std::filesystem::path file = std::filesystem::absolute(name);
  const auto examined = examine_plugin(context, file);
  if (!examined) return fail(context, examined.problems());
  if (!context.json) print(page_of(file, *examined));
  if (Problems problems = examined->report.problems(); !problems.empty()) return fail(context, problems);
  if (!examined->built_in) {
    if (!context.json) {
      sheets::Lines lines;
      sheets::say(lines, what_allowing_means);
      print(lines);
    }
    if (!yes && (context.json || ::isatty(STDIN_FILENO) == 0))
      return fail(context,
                  {{Fault::refused, file.string(), "nobody is here to say yes", "a terminal, or --yes", ""}});
    if (!yes && !says_yes())
      return fail(context, {{Fault::refused, file.string(), "is not allowed", "", ""}});
  }
  if (Outcome allowed = allow_plugin(context, file, *examined); !allowed)
    return fail(context, allowed.problems());
  if (context.json) {
    Json doc = document({});
    doc["allowed"] = {
        {"file", file.string()}, {"sha256", examined->sha256}, {"built_in", examined->built_in}};
    print(doc);
  } else {
    print(sheets::Lines{examined->built_in ? "It was built with this program and is allowed." : "Allowed."});
  }
  return Exit::all_well;
}

int forget(const Context& context, const std::string& which) {
  const auto forgotten = forget_plugin(context, which);
  if (!forgotten) return fail(context, forgotten.problems());
  if (context.json) {
    Json doc = document({});
    doc["forgotten"] = Json::array();
    for (const auto& one : *forgotten)
      doc["forgotten"].push_back({{"id", one.id}, {"file", one.file}, {"sha256", one.sha256}});
    print(doc);
  } else {
    for (const auto& one : *forgotten) print(sheets::Lines{"No longer allowed: " + one.id + ", " + one.file});
  }
  return Exit::all_well;
}

// ---- show

std::string window_text(const bath::Window& w) {
  const auto end = [](double limit) { return sheets::figure(limit); };
  std::string text = end(w.low) + " to " + end(w.high);
  if (end(w.low).empty() || end(w.high).empty())
    text = end(w.low).empty() ? "up to " + end(w.high) : "from " + end(w.low);
  return text;
}

sheets::Lines page_of(const bath::BathType& type) {
  sheets::Lines lines;
  sheets::title(lines, type.name, type.id + " " + type.version);
  sheets::say(lines, sheets::deferral);
  sheets::say(lines, type.summary);
  sheets::say(lines, "Valid: " + type.validity);
  sheets::say(lines, "By " + type.author + ", licence " + type.licence);
  sheets::heading(lines, "Quantities");
  sheets::Table quantities({{"quantity"}, {"name"}, {"usual window"}, {"source"}});
  for (const auto& quantity : type.quantities) {
    std::string window, source;
    for (const auto& w : type.windows)
      if (w.subject == quantity.id) window = window_text(w), source = w.source;
    quantities.add(
        {sheets::pretty(quantity.id), quantity.label, window.empty() ? "" : window + " g/L", source});
  }
  sheets::append(lines, quantities.lines());
  sheets::heading(lines, "Solids watched");
  for (const auto& solid : type.solids)
    sheets::say(lines, "  " + sheets::pretty(solid.name) + ": " + solid.sign_in_tank, 2);
  sheets::heading(lines, "Additions");
  for (const auto& rule : type.additions) sheets::say(lines, "  " + rule.supply + ": " + rule.how, 2);
  std::vector<std::string> cautions;
  for (const auto& caution : type.cautions) cautions.push_back(caution.text);
  sheets::append(lines, sheets::cautions(cautions));
  sheets::heading(lines, "Sources");
  for (const auto& source : type.sources) sheets::say(lines, "  " + source.key + ": " + source.citation, 2);
  return lines;
}

Json json_of(const bath::BathType& type) {
  Json doc = document({});
  doc["id"] = type.id;
  doc["name"] = type.name;
  doc["plugin_version"] = type.version;
  doc["author"] = type.author;
  doc["licence"] = type.licence;
  doc["summary"] = type.summary;
  doc["validity"] = type.validity;
  doc["components"] = Json::array();
  for (const auto& component : type.components) doc["components"].push_back(component.species);
  doc["quantities"] = Json::array();
  for (const auto& quantity : type.quantities)
    doc["quantities"].push_back({{"id", quantity.id},
                                 {"label", quantity.label},
                                 {"counts", quantity.counts},
                                 {"salt_view", quantity.salt_view}});
  doc["windows"] = Json::array();
  for (const auto& w : type.windows)
    doc["windows"].push_back({{"subject", w.subject},
                              {"low", w.low},
                              {"aim", w.aim},
                              {"high", w.high},
                              {"stop_low", w.stop_low},
                              {"stop_high", w.stop_high},
                              {"source", w.source}});
  doc["solids"] = Json::array();
  for (const auto& solid : type.solids)
    doc["solids"].push_back({{"name", solid.name}, {"sign", solid.sign_in_tank}});
  doc["cautions"] = Json::array();
  for (const auto& caution : type.cautions) doc["cautions"].push_back(caution.text);
  doc["sources"] = Json::array();
  for (const auto& source : type.sources)
    doc["sources"].push_back({{"key", source.key}, {"citation", source.citation}, {"terms", source.terms}});
  return doc;
}

int show(const Context& context, const std::string& id) {
  const auto types = known_bath_types(context);
  const bath::BathType* type = types.find(id);
  if (!type)
    return fail(context, {{Fault::bad_input, id, "is not a bath type at hand", "",
                           "See bathwright plugins list for what was found and refused."}});
  if (context.json)
    print(json_of(*type));
  else
    print(page_of(*type));
  return Exit::all_well;
}

}  // namespace

void add_plugins(CLI::App& program, Context& context, Action& action) {
  auto* verb =
      program.add_subcommand("plugins", "the bath types at hand")->require_subcommand(1)->fallthrough();
  verb->footer("Example: bathwright plugins show watts-nickel\n");
  auto* list_verb =
      verb->add_subcommand("list", "what was found, and what was refused and why")->fallthrough();
  list_verb->callback([&] { action = [&context] { return list(context); }; });
  auto* show_verb = verb->add_subcommand("show", "what a bath type says about itself")->fallthrough();
  auto id = std::make_shared<std::string>();
  show_verb->add_option("ID", *id, "as in the list")->required();
  show_verb->callback([&context, &action, id] { action = [&context, id] { return show(context, *id); }; });
  add_plugins_check(*verb, context, action);
  auto* allow_verb =
      verb->add_subcommand("allow", "let a bath type run that did not come with the program")->fallthrough();
  auto file = std::make_shared<std::string>();
  auto yes = std::make_shared<bool>(false);
  allow_verb->add_option("FILE", *file, "the plugin, .bathtype.so")->required();
  allow_verb->add_flag("--yes", *yes, "do not ask");
  allow_verb->callback([&context, &action, file, yes] {
    action = [&context, file, yes] { return allow(context, *file, *yes); };
  });
  auto* forget_verb = verb->add_subcommand("forget", "let it run no more")->fallthrough();
  auto which = std::make_shared<std::string>();
  forget_verb->add_option("WHICH", *which, "its file, id or SHA-256")->required();
  forget_verb->callback(
      [&context, &action, which] { action = [&context, which] { return forget(context, *which); }; });
}

}  // namespace bathwright::command
