#include <bathwright/shopfiles/fit_file.hpp>
#include <catch2/catch.hpp>

using namespace bathwright;
using namespace bathwright::shopfiles;

namespace {

constexpr const char* good = R"(source = "week 40"
[[fit]]
constant = "XX"
find = ["log10_K"]
reaction = "NaNO3(s) = Na^+ + NO3^-"
formula = "NaNO3"
log10_K = 1.0
dH_kJ_per_mol = 20.4
[[measurement]]
label = "a"
temperature = "25 degC"
per_kg_water = { "NaCl" = 0.5 }
solids = { allow = [], excess = ["NaNO3"] }
quantity = "solubility"
of = "XX"
value = 9.0
uncertainty = 0.1
use = "test"
)";

}  // namespace

TEST_CASE("a fit file states what is to be found, from what, and what is held out", "[unit]") {
  const auto task = read_fit_text("fit.toml", good);
  INFO((task ? std::string{} : text(task.problems())));
  REQUIRE(task);
  CHECK(task->source == "week 40");
  CHECK(task->model == activity::ModelKind::pitzer);
  REQUIRE(task->unknowns.size() == 1);
  CHECK(parameter_name(task->unknowns[0]) == "log10_K");
  REQUIRE(task->equilibria.stated("XX"));
  CHECK(task->equilibria.stated("XX")->dH_kJ_per_mol == 20.4);
  REQUIRE(task->measurements.size() == 1);
  const regression::Measurement& m = task->measurements[0];
  CHECK(m.quantity == regression::Quantity::solubility);
  CHECK(m.held_out);
  CHECK(m.value == 9.0);
  CHECK(m.recipe.ingredients.size() == 1);
}

TEST_CASE("a fit file may ask for interaction parameters", "[unit]") {
  const auto task = read_fit_text("fit.toml", R"(source = "week 40"
[[fit]]
interaction = ["Cu^2+", "Na^+"]
find = ["theta"]
[[measurement]]
temperature = "25 degC"
per_kg_water = { "NaCl" = 0.5, "CuCl2" = 0.2 }
quantity = "osmotic_coefficient"
value = 0.9
uncertainty = 0.01
)");
  INFO((task ? std::string{} : text(task.problems())));
  REQUIRE(task);
  REQUIRE(task->unknowns.size() == 1);
  CHECK(parameter_name(task->unknowns[0]) == "theta");
  CHECK(owner(task->unknowns[0]) == "Cu^2+ - Na^+");
  CHECK(task->unknowns[0].where == "fit.toml:3: fit.interaction");
  CHECK(task->measurements[0].quantity == regression::Quantity::osmotic_coefficient);
}

TEST_CASE("a fit file that does not read names the line and the mend", "[failure]") {
  const std::string text(good);
  const auto with = [&](const std::string& old, const std::string& put) {
    std::string changed = text;
    changed.replace(changed.find(old), old.size(), put);
    const auto read = read_fit_text("fit.toml", changed);
    REQUIRE_FALSE(read);
    return bathwright::text(read.problems());
  };
  CHECK(with(R"(find = ["log10_K"])", R"(find = ["logK"])").find("fit.toml:4") != std::string::npos);
  CHECK(with("reaction = \"NaNO3(s) = Na^+ + NO3^-\"\n", "").find("no species, solid or gas of the tables") !=
        std::string::npos);
  CHECK(with("uncertainty = 0.1", "uncertainty = 0").find("above zero") != std::string::npos);
  CHECK(with(R"(quantity = "solubility")", R"(quantity = "solubilty")").find("Did you mean solubility?") !=
        std::string::npos);
  CHECK(with("\nof = \"XX\"", "").find("of") != std::string::npos);
  const auto with_interaction = [&](const std::string& solutes, const std::string& parameter) {
    return with(
        "constant = \"XX\"\nfind = [\"log10_K\"]\nreaction = \"NaNO3(s) = Na^+ + NO3^-\"\nformula = "
        "\"NaNO3\"\nlog10_K = 1.0\ndH_kJ_per_mol = 20.4\n",
        "interaction = " + solutes + "\nfind = [\"" + parameter + "\"]\n");
  };
  CHECK(with_interaction(R"(["Na^+", "SO4^2"])", "beta0").find("Did you mean SO4^2-?") != std::string::npos);
  CHECK(with_interaction(R"(["Na^+", "K^+"])", "beta0")
            .find("fit.toml:3: fit.interaction: there is no beta0") != std::string::npos);
  CHECK(with_interaction(R"(["Na^+", "Cl^-"])", "beta").find("Did you mean beta0?") != std::string::npos);
  CHECK(with_interaction(R"(["Na^+", "Cl^-"])", "epsilon").find("belongs to the model sit") !=
        std::string::npos);
}
