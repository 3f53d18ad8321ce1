// bathwright plugins list | show ID: which bath types there are, and what one says about itself.
#include <bathwright/sheets/cautions.hpp>
#include <bathwright/sheets/names.hpp>
#include <bathwright/sheets/table.hpp>

#include "context.hpp"
#include "shop.hpp"

namespace bathwright::command {
namespace {

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
                                {"reason", listed.problems.empty() ? "" : text(listed.problems)},
                                {"notes", listed.notes}});
    print(doc);
    return Exit::all_well;
  }
  sheets::Lines lines;
  sheets::Table table({{"bath type"}, {"version"}, {"state"}, {"file"}});
  for (const auto& listed : types.list())
    table.add({listed.id, listed.version, std::string(plugin_host::name(listed.state)),
               listed.path.filename().string()});
  if (table.empty())
    sheets::say(lines, "No bath type found. Name a folder with --plugins.");
  else
    sheets::append(lines, table.lines());
  for (const auto& listed : types.list())
    for (const Problem& problem : listed.problems) sheets::say(lines, problem.text(), 2);
  print(lines);
  return Exit::all_well;
}

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
  sheets::cautions(lines, cautions);
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
                           "bathwright plugins list says what was found and refused."}});
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
}

}  // namespace bathwright::command
