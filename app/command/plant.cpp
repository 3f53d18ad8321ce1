// bathwright plant set-up | grant | send | list | slips | logs | fetch | verify: the shared log of all
// stations on the plant's PostgreSQL server.
#include <unistd.h>
#include <CLI/CLI.hpp>

#include <bathwright/plant/administration.hpp>
#include <bathwright/plant/station.hpp>
#include <bathwright/sheets/table.hpp>
#include <charconv>
#include <filesystem>

#include "context.hpp"
#include "log/verbs.hpp"

namespace bathwright::command {
namespace {

struct PlantOptions {
  std::string connection_file, site;
};

Result<plant::Connection> connection(const PlantOptions& options) {
  return options.connection_file.empty() ? plant::Connection::from_environment()
                                         : plant::Connection::from_file(options.connection_file);
}

Result<plant::Station> station(const PlantOptions& options) {
  const auto way = connection(options);
  if (!way) return way.problems();
  return plant::Station(*way, options.site);
}

Json json_of(const plant::Anchor& anchor) {
  return anchor.number == 0 ? Json() : Json{{"number", anchor.number}, {"hash", anchor.hash}};
}

std::string words(const plant::Anchor& anchor) { return std::to_string(anchor.number) + ":" + anchor.hash; }

Json json_of(const plant::Arrived& arrived) {
  Json entry = log_verb::json_of(arrived.entry);
  entry.erase("corrected_by");  // not asked of the server
  entry["log"] = arrived.chain;
  entry["site"] = arrived.site;
  entry["arrival"] = arrived.arrival;
  entry["received"] = arrived.received;
  entry["login"] = arrived.login;
  return entry;
}

/// A document with `key`, or lines.
int answer(const Context& context, const char* key, Json value, const sheets::Lines& lines) {
  if (context.json) {
    Json doc = document({});
    doc[key] = std::move(value);
    print(doc);
  } else {
    print(lines);
  }
  return Exit::all_well;
}

int set_up(const Context& context, const PlantOptions& options) {
  const auto way = connection(options);
  if (!way) return fail(context, way.problems());
  if (const auto done = plant::set_up(*way); !done) return fail(context, done.problems());
  sheets::Lines lines;
  sheets::say(lines,
              "Set up: tables, guards and roles are there. Next: bathwright plant grant LOGIN ROLE SITE");
  return answer(context, "set_up", true, lines);
}

struct GrantOptions {
  std::string login, role, site;
};

int grant(const Context& context, const PlantOptions& options, const GrantOptions& to) {
  const auto role = logbook::role_of(to.role);
  if (!role) return fail(context, role.problems());
  const auto way = connection(options);
  if (!way) return fail(context, way.problems());
  if (const auto done = plant::grant(*way, to.login, *role, to.site); !done)
    return fail(context, done.problems());
  sheets::Lines lines;
  sheets::say(lines, to.login + " is " + to.role + " for " +
                         (to.site == "*" ? std::string("every site") : "site " + to.site) + ".");
  return answer(context, "granted", {{"login", to.login}, {"role", to.role}, {"site", to.site}}, lines);
}

int send(const Context& context, const PlantOptions& options) {
  const auto log = open_log_to_read(context);
  if (!log) return fail(context, log.problems());
  auto plant = station(options);
  if (!plant) return fail(context, plant.problems());
  const auto sent = (*std::move(plant)).send(*log);
  if (!sent) return fail(context, sent.problems());
  sheets::Lines lines;
  sheets::say(lines, std::to_string(sent->sent) + " sent, " + std::to_string(sent->already_there) +
                         " were there already.");
  if (sent->missing_here > 0)
    sheets::say(
        lines,
        "The server has " + std::to_string(sent->missing_here) +
            " entries more of this log: this file is an older copy. Before logging into it: bathwright "
            "plant fetch " +
            sent->chain.substr(0, 12) + " " + log_path(context).string(),
        2);
  if (sent->anchor.number > 0) sheets::say(lines, "Anchor, to note elsewhere: " + words(sent->anchor));
  answer(context, "sent",
         {{"log", sent->chain},
          {"sent", sent->sent},
          {"already_there", sent->already_there},
          {"missing_here", sent->missing_here},
          {"anchor", json_of(sent->anchor)}},
         lines);
  return sent->missing_here > 0 ? Exit::finding : Exit::all_well;
}

int show(const Context& context, const Result<std::vector<plant::Arrived>>& list) {
  if (!list) return fail(context, list.problems());
  Json entries = Json::array();
  sheets::Table table({{"came", sheets::Align::number},
                       {"logged (UTC)"},
                       {"station"},
                       {"no.", sheets::Align::number},
                       {"kind"},
                       {"tank"},
                       {"by"}});
  constexpr std::size_t to_the_minute = 16;
  for (const plant::Arrived& arrived : *list) {
    const logbook::Entry& entry = arrived.entry;
    entries.push_back(json_of(arrived));
    table.add({std::to_string(arrived.arrival), entry.at.substr(0, to_the_minute), entry.station,
               std::to_string(entry.seq), std::string(logbook::name(entry.kind)), entry.tank, entry.by});
  }
  return answer(context, "entries", std::move(entries),
                table.empty() ? sheets::Lines{"No entry fits."} : table.lines());
}

struct ListOptions {
  std::string tank, kind, text, site, station;
  std::size_t last = 0;
};

int list(const Context& context, const PlantOptions& options, const ListOptions& wish) {
  plant::Filter filter;
  filter.site = wish.site;
  filter.station = wish.station;
  filter.entry.tank = wish.tank;
  filter.entry.text = wish.text;
  filter.entry.limit = wish.last;
  filter.entry.newest_first = wish.last != 0;
  if (!wish.kind.empty()) {
    const auto kind = logbook::entry_kind(wish.kind);
    if (!kind) return fail(context, kind.problems());
    filter.entry.kind = *kind;
  }
  auto plant = station(options);
  if (!plant) return fail(context, plant.problems());
  return show(context, (*std::move(plant)).list(filter));
}

int slips(const Context& context, const PlantOptions& options, const std::string& tank) {
  auto plant = station(options);
  if (!plant) return fail(context, plant.problems());
  return show(context, (*std::move(plant)).open_slips(tank));
}

constexpr std::size_t shown_digits = 12;  ///< of a log's name; --json has all

int logs(const Context& context, const PlantOptions& options) {
  auto plant = station(options);
  if (!plant) return fail(context, plant.problems());
  const auto chains = (*std::move(plant)).chains();
  if (!chains) return fail(context, chains.problems());
  Json all = Json::array();
  sheets::Table table(
      {{"log"}, {"site"}, {"station"}, {"entries", sheets::Align::number}, {"last came (UTC)"}});
  for (const plant::Chain& chain : *chains) {
    all.push_back({{"log", chain.chain},
                   {"site", chain.site},
                   {"station", chain.station},
                   {"entries", chain.entries},
                   {"received", chain.received}});
    table.add({chain.chain.substr(0, shown_digits), chain.site, chain.station, std::to_string(chain.entries),
               chain.received});
  }
  return answer(context, "logs", std::move(all),
                table.empty() ? sheets::Lines{"The server has no log yet."} : table.lines());
}

int fetch(const Context& context, const PlantOptions& options, const std::string& beginning,
          const std::string& file) {
  auto opened = station(options);
  if (!opened) return fail(context, opened.problems());
  plant::Station plant = *std::move(opened);
  const auto chains = plant.chains();
  if (!chains) return fail(context, chains.problems());
  std::vector<std::string> meant;
  for (const plant::Chain& chain : *chains)
    if (chain.chain.starts_with(beginning)) meant.push_back(chain.chain);
  if (meant.size() != 1)
    return fail(context, {{Fault::bad_input, beginning, meant.empty() ? "names no log" : "names several logs",
                           "the name of one log, or its beginning", "See bathwright plant logs for them."}});
  const auto entries = plant.fetch(meant.front());
  if (!entries) return fail(context, entries.problems());
  auto log = logbook::Logbook::open(file, logbook::OpenMode::create, wall_clock());
  if (!log) return fail(context, log.problems());
  const auto taken = (*std::move(log)).take_over(*entries);
  if (!taken) return fail(context, taken.problems());
  sheets::Lines lines;
  sheets::say(lines, std::to_string(*taken) + " entries came into " + file + ", which has " +
                         std::to_string(entries->size()) + " now at least.");
  return answer(context, "fetched", {{"log", meant.front()}, {"taken", *taken}, {"file", file}}, lines);
}

Result<plant::Anchor> read_anchor(const std::string& text) {
  plant::Anchor anchor;
  const auto colon = text.find(':');
  const auto read = std::from_chars(text.data(), text.data() + std::min(colon, text.size()), anchor.number);
  if (colon == std::string::npos || read.ec != std::errc() || read.ptr != text.data() + colon)
    return Problem{Fault::bad_input, "--noted", '"' + text + "\" is no anchor", "NUMBER:HASH",
                   "as bathwright plant send printed it"};
  anchor.hash = text.substr(colon + 1);
  return anchor;
}

int verify(const Context& context, const PlantOptions& options, const std::vector<std::string>& noted) {
  std::vector<plant::Anchor> anchors;
  for (const std::string& text : noted) {
    const auto anchor = read_anchor(text);
    if (!anchor) return fail(context, anchor.problems());
    anchors.push_back(*anchor);
  }
  auto plant = station(options);
  if (!plant) return fail(context, plant.problems());
  std::string scratch = (std::filesystem::temp_directory_path() / "bathwright-XXXXXX").string();
  if (!mkdtemp(scratch.data()))
    return fail(context,
                {{Fault::io, scratch, "cannot be made", "a folder for copies", "name one in TMPDIR"}});
  const auto result = (*std::move(plant)).verify(scratch, anchors);
  std::error_code ignored;
  std::filesystem::remove_all(scratch, ignored);
  if (!result) return fail(context, result.problems());

  Json chains = Json::array();
  sheets::Lines lines;
  std::int64_t entries = 0;
  for (const std::string& problem : result->problems) sheets::say(lines, problem, 2);
  for (const auto& chain : result->chains) {
    entries += chain.log.entries;
    Json problems = Json::array();
    for (const auto& finding : chain.log.problems) {
      problems.push_back({{"seq", finding.seq}, {"what", finding.words}});
      sheets::say(lines, "Log " + chain.chain.substr(0, shown_digits) + ": " + finding.words, 2);
    }
    chains.push_back({{"log", chain.chain},
                      {"site", chain.site},
                      {"ok", chain.log.ok},
                      {"entries", chain.log.entries},
                      {"problems", std::move(problems)}});
  }
  sheets::say(lines, std::to_string(result->chains.size()) + " logs with " + std::to_string(entries) +
                         " entries and " + std::to_string(result->anchors) + " anchors walked; " +
                         (result->ok ? "each is as it came."
                                     : "something is not as it came. Tell who answers for the plant's log."));
  if (result->head.number > 0) sheets::say(lines, "Last anchor, to note elsewhere: " + words(result->head));
  answer(context, "verified",
         {{"ok", result->ok},
          {"logs", std::move(chains)},
          {"anchors", result->anchors},
          {"problems", result->problems},
          {"head", json_of(result->head)}},
         lines);
  return result->ok ? Exit::all_well : Exit::finding;
}

}  // namespace

void add_plant(CLI::App& program, Context& context, Action& action) {
  auto* verb = program.add_subcommand("plant", "the shared log of all stations, on the plant's server")
                   ->require_subcommand(1)
                   ->fallthrough();
  verb->footer(
      "Examples:\n"
      "  bathwright plant send --connection ~/.config/bathwright/plant.conn\n"
      "  bathwright plant list --tank \"N-07 Watts nickel\" --last 20\n"
      "  bathwright plant verify --noted 812:4be0...\n"
      "The server is named by a PostgreSQL connection string, in a file of mode 0600 (--connection) or in\n"
      "BATHWRIGHT_PLANT. What is sent is the log of --log; it goes on whether the server is there or not.\n");
  const auto options = std::make_shared<PlantOptions>();
  verb->add_option("--connection", options->connection_file, "file with the connection string, mode 0600");

  const auto add = [&](const char* name, const char* words, std::function<int()> run) {
    auto* below = verb->add_subcommand(name, words)->fallthrough();
    below->callback([&action, run = std::move(run)] { action = run; });
    return below;
  };
  add("set-up", "the owner: make the tables, guards and roles, or bring them to this version",
      [&context, options] { return set_up(context, *options); });

  const auto to = std::make_shared<GrantOptions>();
  auto* grant_verb = add("grant", "the owner: let a login act in a role for a site",
                         [&context, options, to] { return grant(context, *options, *to); });
  grant_verb->add_option("LOGIN", to->login, "made before with CREATE ROLE ... LOGIN")->required();
  grant_verb->add_option("ROLE", to->role, "operator, chemist, auditor")->required();
  grant_verb->add_option("SITE", to->site, "a name; * lets an auditor read all")->required();

  auto* send_verb = add("send", "send what the server does not have of the log",
                        [&context, options] { return send(context, *options); });
  send_verb->add_option("--site", options->site, "needed where the login is bound to several");

  const auto wish = std::make_shared<ListOptions>();
  auto* list_verb = add("list", "the entries of all stations, in order of arrival",
                        [&context, options, wish] { return list(context, *options, *wish); });
  list_verb->add_option("--tank", wish->tank, "of this tank only");
  list_verb->add_option("--kind", wish->kind, "of this kind only: analysis, plan, addition, ...");
  list_verb->add_option("--text", wish->text, "with this text in them");
  list_verb->add_option("--site", wish->site, "of this site only");
  list_verb->add_option("--station", wish->station, "of this station only");
  list_verb->add_option("--last", wish->last, "so many, newest first");

  const auto tank = std::make_shared<std::string>();
  add("slips", "slips still open, of all stations", [&context, options, tank] {
    return slips(context, *options, *tank);
  })->add_option("--tank", *tank, "of this tank only");

  add("logs", "the stations' logs, and when each last sent",
      [&context, options] { return logs(context, *options); });

  const auto chain = std::make_shared<std::string>(), file = std::make_shared<std::string>();
  auto* fetch_verb = add("fetch", "bring a log back into a file", [&context, options, chain, file] {
    return fetch(context, *options, *chain, *file);
  });
  fetch_verb->add_option("LOG", *chain, "as plant logs names it")->required();
  fetch_verb->add_option("FILE", *file, "new, or an older copy of that log")->required();

  const auto noted = std::make_shared<std::vector<std::string>>();
  add("verify", "that every entry of every station is as it was logged and came", [&context, options, noted] {
    return verify(context, *options, *noted);
  })->add_option("--noted", *noted, "an anchor noted before, NUMBER:HASH");
}

}  // namespace bathwright::command
