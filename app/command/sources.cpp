// bathwright sources SPECIES: every constant used for a species or solid, and where it came from.
#include <CLI/CLI.hpp>
#include <bathwright/base/nearest.hpp>

#include "context.hpp"
#include "work/constants.hpp"

namespace bathwright::command {
namespace {

int run(const Context& context, const std::string& subject) {
  std::vector<std::string> names;
  const std::vector<Constant> rows = constants_about(subject, names);
  if (rows.empty()) {
    const auto close = nearest(subject, names);
    return fail(context,
                {{Fault::bad_input, subject, "no constant is about it",
                  "an ion, solid, gas or salt, as Ni^2+", close ? "Did you mean " + *close + "?" : ""}});
  }
  if (context.json) {
    Json doc = document({});
    doc["subject"] = subject;
    doc["basis"] = is_basis(subject);
    doc["constants"] = Json::array();
    for (const Constant& row : rows)
      doc["constants"].push_back({{"kind", row.table},
                                  {"about", row.what},
                                  {"values", values_with_set(row)},
                                  {"quality", row.quality},
                                  {"source", row.source},
                                  {"note", row.note}});
    print(doc);
    return Exit::all_well;
  }
  print(sources_sheet(subject, rows));
  return Exit::all_well;
}

}  // namespace

void add_sources(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("sources", "every constant used for a species, and where it came from");
  verb->fallthrough();
  auto subject = std::make_shared<std::string>();
  verb->add_option("SPECIES", *subject, "an ion, solid, gas or salt: Ni^2+, H3BO3, CaSO4.2H2O")->required();
  verb->footer("Example: bathwright sources HSO4^-\n");
  verb->callback(
      [&context, &action, subject] { action = [&context, subject] { return run(context, *subject); }; });
}

}  // namespace bathwright::command
