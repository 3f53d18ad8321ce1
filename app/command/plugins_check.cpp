// bathwright plugins check [WHICH | --all] [--release] [--run]: whether bath types are fit to be given away.
#include <CLI/CLI.hpp>
#include <algorithm>
#include <bathwright/conformance/conformance.hpp>
#include <bathwright/sheets/table.hpp>
#include <iterator>

#include "context.hpp"
#include "plugins_check.hpp"
#include "work/shop.hpp"

namespace bathwright::command {
namespace {

namespace fs = std::filesystem;
using conformance::Check;
using conformance::Group;
using plugin_host::Listed;
using plugin_host::State;

struct Options {
  std::string which;  ///< empty: every bath type at hand
  bool all = false;
  conformance::Strictness strictness;
  bool run = false;
};

struct Checked {
  fs::path file;
  std::vector<Check> checks;

  [[nodiscard]] bool failed() const { return std::ranges::any_of(checks, &Check::failed); }
  void add(std::vector<Check> more) { std::ranges::move(more, std::back_inserter(checks)); }
};

/// Whether it is named as a file, not as a bath type.
bool names_a_file(const std::string& which) {
  return which.find('/') != std::string::npos || which.ends_with(plugin_host::plugin_suffix) ||
         which.ends_with(plugin_host::data_suffix);
}

/// The files of `list` that `which` means; all of them where it is empty.
std::vector<fs::path> files_meant(const std::vector<Listed>& list, const std::string& which) {
  std::vector<fs::path> files;
  for (const Listed& listed : list) {
    const std::string name = listed.path.filename().string();
    const bool meant = which.empty() || listed.id == which || listed.path == fs::absolute(which) ||
                       name == which + plugin_host::plugin_suffix || name == which + plugin_host::data_suffix;
    if (meant && std::ranges::find(files, listed.path) == files.end()) files.push_back(listed.path);
  }
  return files;
}

/// Tables, examples and papers of what a file was listed as.
void check_listed(Checked& checked, const Listed& listed, const plugin_host::BathTypes& types,
                  conformance::Strictness strictness) {
  switch (listed.state) {
    case State::ready:
      return checked.add(conformance::check_papers(*types.find(listed.id), listed.path, strictness));
    case State::not_allowed:
      return checked.add(
          {{Group::examples, "are replayed", "", {}, "it may not run here: --run, or plugins allow"}});
    case State::shadowed:
      return checked.add({{Group::examples, "are replayed", "", {}, text(listed.problems)}});
    case State::quarantined:
    case State::refused:
      if (!checked.failed()) checked.add({{Group::tables, "can be loaded", "", listed.problems}});
  }
}

Checked checked(const fs::path& file, const plugin_host::BathTypes& types, const plugin_host::Places& places,
                conformance::Strictness strictness) {
  Checked all{file, {}};
  const bool is_data = file.string().ends_with(plugin_host::data_suffix);
  if (!is_data) {
    const auto examined = plugin_host::examine(file, places);
    all.add(examined
                ? conformance::check_code(file, examined->report)
                : std::vector<Check>{{Group::file, "can be trusted and opened", "", examined.problems()}});
  }
  for (const Listed& listed : types.list()) {
    if (listed.path != file) continue;
    if (is_data && listed.state == State::ready) all.add({{Group::tables, "every check"}});
    check_listed(all, listed, types, strictness);
  }
  std::ranges::stable_sort(all.checks, {}, &Check::group);
  return all;
}

std::string_view outcome(const Check& check) {
  return check.failed() ? "failed" : check.passed() ? "passed" : "skipped";
}

std::size_t count(const std::vector<Checked>& all, bool (Check::*outcome)() const) {
  std::size_t total = 0;
  for (const Checked& one : all)
    total += static_cast<std::size_t>(std::ranges::count_if(one.checks, outcome));
  return total;
}

void print_text(const std::vector<Checked>& all) {
  sheets::Lines lines;
  for (const Checked& one : all) {
    sheets::heading(lines, one.file.filename().string());
    sheets::Table table({{"group"}, {"outcome"}, {"check"}});
    for (const Check& check : one.checks) {
      std::string text = check.what;
      for (const std::string& more : {check.found, check.skipped})
        if (!more.empty()) text += ": " + more;
      table.add({std::string(name(check.group)), std::string(outcome(check)), text});
    }
    sheets::append(lines, table.lines());
    for (const Check& check : one.checks)
      for (const Problem& problem : check.problems) sheets::say(lines, "  " + problem.text(), 2);
  }
  lines.emplace_back();
  lines.push_back(std::to_string(count(all, &Check::passed)) + " passed, " +
                  std::to_string(count(all, &Check::failed)) + " failed");
  print(lines);
}

void print_json(const std::vector<Checked>& all) {
  Json doc = document({});
  doc["files"] = Json::array();
  for (const Checked& one : all) {
    Json checks = Json::array();
    for (const Check& check : one.checks)
      checks.push_back({{"group", name(check.group)},
                        {"check", check.what},
                        {"outcome", outcome(check)},
                        {"found", check.found},
                        {"reason", check.failed() ? text(check.problems) : check.skipped}});
    doc["files"].push_back({{"file", one.file.string()}, {"checks", checks}});
  }
  doc["passed"] = count(all, &Check::passed);
  doc["failed"] = count(all, &Check::failed);
  print(doc);
}

int check(const Context& context, const Options& options) {
  if (options.which.empty() == !options.all)
    return fail(context, {{Fault::bad_input, "plugins check", "needs one of WHICH and --all", "", ""}});
  plugin_host::Places places = plugin_places(context);
  std::vector<std::string_view> allowed(places.allowed.begin(), places.allowed.end());
  std::string sha256;  // stands in `allowed`
  if (names_a_file(options.which)) {
    const fs::path file = fs::absolute(options.which);
    places.folders = {{file.parent_path(), plugin_host::Origin::named}};
    if (options.run) {
      const auto examined = plugin_host::examine(file, places);
      if (!examined) return fail(context, examined.problems());
      sha256 = examined->sha256;
      allowed.emplace_back(sha256);
      places.allowed = allowed;
    }
  }
  const auto types = plugin_host::BathTypes::discover(places);
  std::vector<Checked> all;
  for (const fs::path& file : files_meant(types.list(), options.which))
    all.push_back(checked(file, types, places, options.strictness));
  if (all.empty())
    return fail(context, {{Fault::bad_input, options.all ? "plugins" : options.which,
                           "is not a bath type at hand", "an id, or a file .bathtype.so or .bathtype.toml",
                           "See bathwright plugins list for what was found and refused."}});
  (context.json ? print_json : print_text)(all);
  return count(all, &Check::failed) == 0 ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_plugins_check(CLI::App& plugins, Context& context, Action& action) {
  auto* verb = plugins.add_subcommand("check", "whether a bath type is fit to be given away")->fallthrough();
  verb->footer(
      "Checks file, tables, entry, functions, worked examples and papers; DEVELOPERS.md explains them.\n"
      "Example: bathwright plugins check watts-nickel\n");
  auto options = std::make_shared<Options>();
  verb->add_option("WHICH", options->which, "an id as in the list, or a file");
  verb->add_flag("--all", options->all, "every bath type at hand");
  verb->add_flag("--release", options->strictness.release, "no placeholder source, no paper missing");
  verb->add_flag(
      "--run", options->run,
      "replay the examples of a file that is not allowed: it then runs with your rights, this once");
  verb->callback(
      [&context, &action, options] { action = [&context, options] { return check(context, *options); }; });
}

}  // namespace bathwright::command
