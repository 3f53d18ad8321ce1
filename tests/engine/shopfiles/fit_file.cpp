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
}
