// The machine output: every promised field is there and has its type.
#include <catch2/catch.hpp>

#include "program.hpp"

using app_test::Bench;
using nlohmann::json;

namespace {

constexpr const char* solution_file = R"(temperature = "25 degC"
[per_kg_water]
"NiSO4" = 1.0
"H2SO4" = 0.1
[solids]
allow = "all"
excess = ["CaSO4.2H2O"]
[gases]
"CO2" = 4.2e-4
)";

/// What a field must be; null is allowed where the type ends in "?".
struct Field {
  const char* path;  ///< keys joined by '/', "[]" for every element of a list that must not be empty
  const char* type;  ///< number, text, flag, list, object
};

bool is(const json& value, std::string type) {
  if (type.ends_with('?')) {
    if (value.is_null()) return true;
    type.pop_back();
  }
  if (type == "number") return value.is_number();
  if (type == "text") return value.is_string();
  if (type == "flag") return value.is_boolean();
  if (type == "list") return value.is_array();
  return type == "object" && value.is_object();
}

void check(const json& value, const std::string& path, const std::string& type) {
  CAPTURE(path);
  if (path.empty()) {
    CHECK(is(value, type));
    return;
  }
  const std::size_t slash = path.find('/');
  const std::string key = path.substr(0, slash);
  const std::string rest = slash == std::string::npos ? "" : path.substr(slash + 1);
  if (key == "[]") {
    REQUIRE(value.is_array());
    CHECK_FALSE(value.empty());
    for (const json& element : value) check(element, rest, type);
    return;
  }
  REQUIRE(value.is_object());
  REQUIRE(value.contains(key));
  check(value.at(key), rest, type);
}

void check_all(const app_test::Run& run, const std::vector<Field>& fields) {
  INFO(run.err);
  const json document = run.json();
  REQUIRE(document.is_object());
  CHECK(document.value("program", "") == "bathwright");
  check(document, "version", "text");
  check(document, "warnings", "list");
  for (const Field& field : fields) check(document, field.path, field.type);
}

}  // namespace

TEST_CASE("solution keeps its contract", "[unit][command]") {
  const Bench bench;
  bench.write("s.toml", solution_file);
  const auto run = bench.run("solution s.toml --json");
  CHECK(run.status == 0);
  check_all(run, {{"temperature_C", "number"},
                  {"model", "text"},
                  {"model_reason", "text"},
                  {"pH", "number"},
                  {"ionic_strength", "number"},
                  {"water_activity", "number"},
                  {"osmotic_coefficient", "number"},
                  {"density_kg_per_L", "number"},
                  {"charge_residual", "number"},
                  {"iterations", "number"},
                  {"converged", "flag"},
                  {"valid", "flag"},
                  {"missing_interactions", "list"},
                  {"species/[]/name", "text"},
                  {"species/[]/molality", "number"},
                  {"species/[]/molarity", "number"},
                  {"species/[]/gamma", "number"},
                  {"species/[]/log10_activity", "number"},
                  {"mean_activity/NiSO4", "number"},
                  {"mean_activity/H2SO4", "number"},
                  {"solids/[]/name", "text"},
                  {"solids/[]/saturation_index", "number"},
                  {"solids/[]/precipitated_mol", "number"},
                  {"solids/[]/dissolved_mol", "number"},
                  {"gases/[]/name", "text"},
                  {"gases/[]/partial_pressure_atm", "number"},
                  {"totals/Ni^2+", "number"}});
  CHECK_THAT(run.out, !Catch::Contains("-0.0,") && !Catch::Contains("-0.0\n"));
  CHECK(run.json().at("totals").at("Ni^2+").get<double>() == Approx(1.0).margin(0.02).epsilon(0));
}

TEST_CASE("analyse keeps its contract", "[unit][command]") {
  const Bench bench;
  const auto run = bench.run("analyse " + app_test::tank + " " + app_test::readings + " --json");
  check_all(run, {{"results/[]/quantity", "text"},
                  {"results/[]/value", "number"},
                  {"results/[]/unit", "text"},
                  {"results/[]/standard_uncertainty", "number"},
                  {"results/[]/from", "text"},
                  {"reconciled/[]/quantity", "text"},
                  {"reconciled/[]/value", "number"},
                  {"reconciled/[]/from", "text"},
                  {"suspects", "list"},
                  {"density/predicted", "number"},
                  {"density/measured", "number?"}});
}

TEST_CASE("dose keeps its contract", "[unit][command]") {
  const Bench bench;
  const auto run = bench.run("dose " + app_test::tank + " " + app_test::readings + " --json");
  CHECK(run.status == 1);  // the demonstration tank needs additions
  check_all(run, {{"plans/[]/kind", "text"},
                  {"plans/[]/feasible", "flag"},
                  {"plans/[]/cost", "number"},
                  {"plans/[]/reason", "text"},
                  {"plans/[]/salt_load_mol", "number"},
                  {"plans/[]/decant_L", "number"},
                  {"plans/[]/waste_L", "number"},
                  {"plans/[]/left_alone", "list"},
                  {"plans/[]/conflicts", "list"},
                  {"plans/[]/probability_in_window", "number?"},
                  {"plans/[]/chances", "object"},
                  {"plans/[]/sampled/in_window_and_dissolved", "number"},
                  {"plans/[]/sampled/percentiles_5_50_95", "object"},
                  {"plans/[]/sampled/dissolved", "object"},
                  {"plans/[]/sampled/samples", "number"},
                  {"plans/[]/additions/[]/chemical", "text"},
                  {"plans/[]/additions/[]/amount", "number"},
                  {"plans/[]/additions/[]/unit", "text"},
                  {"plans/[]/steps/[]/number", "number"},
                  {"plans/[]/steps/[]/chemical", "text"},
                  {"plans/[]/steps/[]/amount", "number"},
                  {"plans/[]/steps/[]/unit", "text"},
                  {"plans/[]/steps/[]/dissolve_in_L", "number?"},
                  {"plans/[]/steps/[]/predicted/pH", "number"},
                  {"plans/[]/steps/[]/predicted/volume_L", "number"},
                  {"plans/[]/steps/[]/predicted/concentrations", "object"},
                  {"plans/[]/steps/[]/checks/[]/name", "text"},
                  {"plans/[]/steps/[]/checks/[]/ok", "flag"},
                  {"plans/[]/steps/[]/checks/[]/detail", "text"},
                  {"plans/[]/final/pH", "number"},
                  {"plans/[]/final/volume_L", "number"},
                  {"plans/[]/final/concentrations", "object"},
                  {"plans/[]/final/headroom", "object"},
                  {"refused", "list"},
                  {"cautions", "list"}});
}

TEST_CASE("path keeps its contract", "[unit][command]") {
  const Bench bench;
  const auto run = bench.run("path " + app_test::tank +
                             " --add '12 kg nickel-sulfate' --add '1 kg boric-acid' --steps 4 --json");
  check_all(run, {{"points/[]/added", "number"},
                  {"points/[]/pH", "number"},
                  {"points/[]/log10_activity/Ni^2+", "number"},
                  {"points/[]/free_molality/Ni^2+", "number"},
                  {"points/[]/headroom", "object"},
                  {"points/[]/volume_L", "number"}});
  const json document = run.json();
  REQUIRE(document.at("points").size() == 9);  // before, and four for each addition
  CHECK(document.at("points").back().at("added").get<double>() == Approx(13).margin(1e-9).epsilon(0));
}

TEST_CASE("tank, sources and plugins answer in JSON too", "[unit][command]") {
  const Bench bench;
  check_all(bench.run("tank " + app_test::tank + " --json"), {{"pH", "number"},
                                                              {"volume_L", "number"},
                                                              {"state_from", "text"},
                                                              {"concentrations", "object"},
                                                              {"levels/[]/state", "text"},
                                                              {"species/[]/molality", "number"},
                                                              {"headroom/[]/solid", "text"},
                                                              {"headroom/[]/working_kg", "number?"}});
  check_all(bench.run("tank " + app_test::tank + " --json"),
            {{"species/[]/log10_activity_standard_uncertainty", "number"},
             {"headroom/[]/working_log10_standard_uncertainty", "number?"},
             {"headroom/[]/idle_log10_standard_uncertainty", "number?"},
             {"headroom/[]/working_kg_standard_uncertainty", "number?"},
             {"headroom/[]/idle_kg_standard_uncertainty", "number?"},
             {"headroom/[]/forms_above_pH_standard_uncertainty", "number?"}});
  check_all(bench.run("sources HSO4^- --json"),
            {{"constants/[]/source", "text"}, {"constants/[]/values", "text"}});
  check_all(bench.run("plugins list --json"),
            {{"plugins/[]/id", "text"}, {"plugins/[]/state", "text"}, {"plugins/[]/sha256", "text"}});
  check_all(bench.run("plugins check watts-nickel --json"), {{"files/[]/file", "text"},
                                                             {"files/[]/checks/[]/group", "text"},
                                                             {"files/[]/checks/[]/check", "text"},
                                                             {"files/[]/checks/[]/outcome", "text"},
                                                             {"files/[]/checks/[]/found", "text"},
                                                             {"files/[]/checks/[]/reason", "text"},
                                                             {"passed", "number"},
                                                             {"failed", "number"}});
  check_all(bench.run("plugins show watts-nickel --json"),
            {{"windows/[]/source", "text"}, {"sources", "list"}});
}
