#include <bathwright/plugin_host/probe_report.hpp>
#include <nlohmann/json.hpp>

namespace bathwright::plugin_host {
namespace {

using Json = nlohmann::json;

constexpr int format = 1;

Json json_of(const Problem& p) {
  return {{"kind", static_cast<int>(p.kind)},
          {"where", p.where},
          {"what", p.what},
          {"expected", p.expected},
          {"try", p.try_this}};
}

Problem problem_of(const Json& json) {
  const int kind = json.at("kind");
  if (kind < 0 || kind > static_cast<int>(Fault::refused)) throw std::out_of_range("kind");
  return {static_cast<Fault>(kind), json.at("where"), json.at("what"), json.at("expected"), json.at("try")};
}

ProbeReport report_of(const Json& json) {
  if (json.at("format") != format) throw std::out_of_range("format");
  ProbeReport report;
  for (const Json& type : json.at("types"))
    report.types.push_back(
        {type.at("id"), type.at("name"), type.at("version"), type.at("author"), type.at("licence")});
  for (const Json& check : json.at("checks")) {
    Check& made = report.checks.emplace_back(Check{check.at("name"), {}});
    for (const Json& problem : check.at("problems")) made.problems.push_back(problem_of(problem));
  }
  report.notes = json.at("notes").get<std::vector<std::string>>();
  return report;
}

}  // namespace

Problems ProbeReport::problems() const {
  Problems all;
  for (const Check& check : checks) all.insert(all.end(), check.problems.begin(), check.problems.end());
  return all;
}

std::string encoded(const ProbeReport& report) {
  Json json = {
      {"format", format}, {"types", Json::array()}, {"checks", Json::array()}, {"notes", report.notes}};
  for (const Introduction& t : report.types)
    json["types"].push_back({{"id", t.id},
                             {"name", t.name},
                             {"version", t.version},
                             {"author", t.author},
                             {"licence", t.licence}});
  for (const Check& check : report.checks) {
    Json problems = Json::array();
    for (const Problem& problem : check.problems) problems.push_back(json_of(problem));
    json["checks"].push_back({{"name", check.name}, {"problems", problems}});
  }
  return json.dump(-1, ' ', false, Json::error_handler_t::replace);
}

Result<ProbeReport> decoded(const std::string& text) try {
  return report_of(Json::parse(text));
} catch (const std::exception& e) {
  return Problem{Fault::bad_input, "report of a probe", e.what(), "format " + std::to_string(format), ""};
}

}  // namespace bathwright::plugin_host
