// Interaction parameters: found again from measurements made with known ones, with standard errors that mean
// what they say; found from published measurements; labelled in every answer that uses them.
#include <Eigen/Dense>
#include <bathwright/data/csv.hpp>
#include <bathwright/shopfiles/fit_file.hpp>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <random>
#include <regex>
#include <set>
#include <sstream>

#include "measurements.hpp"

using namespace bathwright;
using namespace bathwright::regression;
using activity::Interaction;
using activity::ModelKind;
using enum activity::InteractionParameter;

namespace {

const std::vector<std::string> na_cl{"Na^+", "Cl^-"};

/// Osmotic coefficients of NaCl from 0.1 to 6 mol/kg made with the published parameters, each +/- 0.004; the
/// fit starts elsewhere.
Task sodium_chloride() {
  Task task;
  task.source = "made up";
  task.equilibria = stating(
      {interaction(beta0, na_cl, 0.15), interaction(beta1, na_cl, 0.1), interaction(cphi, na_cl, 0.01)});
  for (const auto parameter : {beta0, beta1, cphi})
    task.unknowns.push_back(unknown(interaction(parameter, na_cl)));
  for (const double m : {0.1, 0.3, 0.6, 1., 1.5, 2.2, 3., 4., 5., 6.}) {
    task.measurements.push_back(measured(Quantity::osmotic_coefficient, {{"NaCl", m}}, 0.004));
    make(task.measurements.back(), built_in(), ModelKind::pitzer);
  }
  return task;
}

// Harvie, Moller & Weare 1984, the row of engine/data/activity/pitzer_binary.csv.
constexpr double published[] = {0.0765, 0.2644, 0.00127};

std::string all_of(const std::filesystem::path& path) {
  std::ostringstream content;
  content << std::ifstream(path).rdbuf();
  return content.str();
}

data::CsvTable reference(const std::string& table) {
  auto read = data::CsvTable::read(
      table, all_of(std::filesystem::path(PROJECT_DIR) / "tests/reference" / (table + ".csv")));
  REQUIRE(read);
  return *std::move(read);
}

/// Osmotic and activity coefficients of one salt in the reference tables at 25 degC; every other one held
/// out.
Task from_reference(const std::string& salt, const std::vector<std::string>& ions) {
  Task task;
  task.source = "tests/reference";
  task.equilibria = built_in();
  for (const auto parameter : {beta0, beta1, cphi})
    task.unknowns.push_back(unknown(interaction(parameter, ions)));
  const std::regex molality(R"(m\((\w+)\)=([\d.]+) mol/kg.*)");
  for (const auto& [table, quantity] : {std::pair{"osmotic", Quantity::osmotic_coefficient},
                                        {"mean_activity", Quantity::mean_activity_coefficient}}) {
    const data::CsvTable rows = reference(table);
    for (std::size_t i = 0; i < rows.size(); ++i) {
      std::smatch found;
      const std::string conditions(rows[i]["conditions"]);
      if (rows[i]["system"] != salt || rows[i]["T_C"] != "25" || rows[i]["quantity"] != name(quantity) ||
          !std::regex_match(conditions, found, molality) || std::stod(found[2]) > 6)
        continue;
      task.measurements.push_back(measured(quantity, {{salt, std::stod(found[2])}},
                                           std::stod(std::string(rows[i]["tolerance"])), salt));
      task.measurements.back().value = std::stod(std::string(rows[i]["value"]));
      task.measurements.back().held_out = task.measurements.size() % 2 == 0;
    }
  }
  return task;
}

bool says(const std::vector<std::string>& lines, const std::string& what) {
  return std::any_of(lines.begin(), lines.end(),
                     [&](const std::string& line) { return line.find(what) != std::string::npos; });
}

}  // namespace

TEST_CASE("a published set comes back from measurements made with it", "[property]") {
  const auto found = fit(sodium_chloride());
  INFO((found ? std::string{} : text(found.problems())));
  REQUIRE(found);
  CHECK(found->found[0].before == 0.15);
  for (std::size_t k = 0; k < 3; ++k)
    CHECK(found->found[k].value == Approx(published[k]).margin(1e-6).epsilon(0));
  CHECK(found->fit_error < 1e-6);
}

TEST_CASE("the covariance of interaction parameters is that of repeated measurements", "[property]") {
  // Over draws of normal noise d' C^-1 d, with the difference d from the truth and the covariance C of the
  // stated uncertainties, follows chi-square with 3 degrees of freedom: mean 3, variance 6.
  Task task = sodium_chloride();
  task.equilibria = built_in();  // near the answer: two steps a draw
  const std::vector<Measurement> exact = task.measurements;
  std::mt19937 random(20260301);
  std::normal_distribution<double> normal;
  constexpr int draws = 50;
  double sum = 0;
  int within_one = 0;
  for (int draw = 0; draw < draws; ++draw) {
    for (std::size_t i = 0; i < exact.size(); ++i)
      task.measurements[i].value = exact[i].value + exact[i].uncertainty * normal(random);
    const auto found = fit(task);
    REQUIRE(found);
    const double widened = std::max(1.0, found->reduced_chi2);
    Eigen::Vector3d d;
    for (int k = 0; k < 3; ++k) {
      d(k) = found->found[static_cast<std::size_t>(k)].value - published[k];
      within_one +=
          std::abs(d(k)) <= found->found[static_cast<std::size_t>(k)].standard_error / std::sqrt(widened);
    }
    const Eigen::Matrix3d covariance = Eigen::Map<const Eigen::Matrix3d>(found->covariance.data()) / widened;
    sum += d.dot(covariance.ldlt().solve(d));
  }
  const double three_sigma = 3 * std::sqrt(6.0 / draws);
  INFO("mean " << sum / draws << ", within one standard error " << within_one << " of " << 3 * draws);
  CHECK(sum / draws == Approx(3).margin(three_sigma).epsilon(0));
  // The three of a draw move together: at least as scattered as `draws` independent trials.
  CHECK(within_one / (3.0 * draws) == Approx(0.683).margin(3 * std::sqrt(0.683 * 0.317 / draws)).epsilon(0));
}

TEST_CASE("every interaction parameter can be found from what it moves", "[property]") {
  struct Case {
    Interaction truth;
    std::vector<Measurement> measurements;
    ModelKind model = ModelKind::pitzer;
  };
  Measurement boric_acid = measured(Quantity::solubility, {{"NiSO4", 1.5}}, 0.01, "H3BO3");
  boric_acid.recipe.excess = {"H3BO3"};
  const std::vector<Case> cases = {
      {interaction(beta0, {"Ni^2+", "HSO4^-"}, 0.5),
       {measured(Quantity::pH, {{"NiSO4", 1}, {"H2SO4", 1}}, 0.01)}},
      {interaction(beta1, na_cl, 0.4),
       {measured(Quantity::mean_activity_coefficient, {{"NaCl", 1}}, 0.01, "NaCl")}},
      {interaction(beta2, {"SO4^2-", "Cu^2+"}, -40),
       {measured(Quantity::water_activity, {{"CuSO4", 0.3}}, 1e-5)}},
      {interaction(cphi, na_cl, 0.004), {measured(Quantity::osmotic_coefficient, {{"NaCl", 3}}, 0.004)}},
      {interaction(theta, {"Na^+", "K^+"}, 0.05),
       {measured(Quantity::osmotic_coefficient, {{"NaCl", 1}, {"KCl", 1}}, 0.004)}},
      {interaction(psi, {"Na^+", "Cl^-", "K^+"}, 0.01),
       {measured(Quantity::osmotic_coefficient, {{"NaCl", 1}, {"KCl", 1}}, 0.004)}},
      {interaction(lambda, {"H3BO3", "Ni^2+"}, 0.2), {boric_acid}},
      {interaction(zeta, {"Ni^2+", "H3BO3", "SO4^2-"}, 0.05), {boric_acid}},
      {interaction(mu, {"H3BO3", "H3BO3", "H3BO3"}, 0.02),
       {measured(Quantity::osmotic_coefficient, {{"H3BO3", 0.9}}, 0.004)}},
      {interaction(epsilon, na_cl, 0.06),
       {measured(Quantity::mean_activity_coefficient, {{"NaCl", 1}}, 0.01, "NaCl")},
       ModelKind::sit},
  };
  std::set<activity::InteractionParameter> seen;
  for (const Case& one : cases) {
    INFO(text(one.truth));
    seen.insert(one.truth.parameter);
    Task task;
    task.model = one.model;
    task.equilibria = built_in(activity::convention(one.model));
    task.unknowns = {unknown(one.truth)};
    task.measurements = one.measurements;
    for (Measurement& m : task.measurements)
      make(m, stating({one.truth}, activity::convention(one.model)), one.model);
    const auto found = fit(task);
    INFO((found ? std::string{} : text(found.problems())));
    REQUIRE(found);
    CHECK(found->found[0].value == Approx(one.truth.value).margin(1e-5).epsilon(1e-5));
  }
  CHECK(seen.size() == activity::interaction_parameters);
}

TEST_CASE("a constant and an interaction are found together", "[property]") {
  speciation::Constant changed = *built_in().stated("H3BO3");
  changed.log10_K += 0.05;
  auto truth = stating({interaction(lambda, {"H3BO3", "Ni^2+"}, 0.2)}).with_constant("H3BO3", changed);
  REQUIRE(truth);
  Task task;
  task.equilibria = built_in();
  Unknown log10_K;
  log10_K.what.emplace<OfConstant>(OfConstant{"H3BO3", Parameter::log10_K});
  task.unknowns = {log10_K, unknown(interaction(lambda, {"H3BO3", "Ni^2+"}))};
  for (const double nickel : {0.2, 0.8, 1.6}) {
    task.measurements.push_back(measured(Quantity::solubility, {{"NiSO4", nickel}}, 0.01, "H3BO3"));
    task.measurements.back().recipe.excess = {"H3BO3"};
    make(task.measurements.back(), *truth, ModelKind::pitzer);
  }
  const auto found = fit(task);
  INFO((found ? std::string{} : text(found.problems())));
  REQUIRE(found);
  CHECK(found->found[0].value == Approx(changed.log10_K).margin(1e-5).epsilon(0));
  CHECK(found->found[1].value == Approx(0.2).margin(1e-5).epsilon(0));
}

// Robinson 1941 J. Am. Chem. Soc. 63, 628 (isopiestic) and handbook activity coefficients against the
// parameters of Pitzer & Mayorga 1973; Hamer & Wu 1972 against those of Harvie, Moller & Weare 1984.
TEST_CASE("half of the published measurements of a salt predict the other half", "[reference]") {
  for (const auto& [salt, ions] :
       {std::pair{"KF", std::vector<std::string>{"K^+", "F^-"}}, {"NaCl", na_cl}}) {
    INFO(salt);
    const Task task = from_reference(salt, ions);
    REQUIRE(task.measurements.size() >= 11);
    const auto found = fit(task);
    INFO((found ? std::string{} : text(found.problems())));
    REQUIRE(found);
    for (const Compared& row : found->measurements) {
      REQUIRE(row.computed);
      CHECK(*row.computed == Approx(row.measured).margin(row.uncertainty).epsilon(0));
    }
    for (const Found& parameter : found->found) {
      INFO(parameter_name(parameter.unknown));
      CHECK(parameter.value == Approx(parameter.before).margin(2 * parameter.standard_error).epsilon(0));
    }
  }
}

TEST_CASE("a combination that the measurements leave free is named", "[failure]") {
  // At one molality beta0 and beta1 act as one: phi has beta0 + beta1 exp(-2 s), s = I^0.5.
  Task task;
  task.equilibria = built_in();
  task.unknowns = {unknown(interaction(beta0, na_cl)), unknown(interaction(beta1, na_cl))};
  task.measurements = {measured(Quantity::osmotic_coefficient, {{"NaCl", 1}}, 0.004),
                       measured(Quantity::osmotic_coefficient, {{"NaCl", 1}}, 0.004)};
  for (Measurement& m : task.measurements) m.value = 0.94;
  const auto free = fit(task);
  REQUIRE_FALSE(free);
  CHECK(free.problems()[0].what.find("+1 beta0 of Na^+ - Cl^-, -7.39 beta1 of Na^+ - Cl^-") !=
        std::string::npos);

  task.unknowns = {unknown(interaction(theta, {"Cu^2+", "Na^+"}))};
  const auto absent = fit(task);
  REQUIRE_FALSE(absent);
  CHECK(absent.problems()[0].what == "the measurements do not determine theta of Cu^2+ - Na^+");
}

TEST_CASE("an interaction that cannot be is refused", "[failure]") {
  const auto refusal = [](const Interaction& stated) {
    Task task;
    task.equilibria = built_in();
    task.unknowns = {unknown(stated)};
    task.measurements = {measured(Quantity::osmotic_coefficient, {{"NaCl", 1}}, 0.004)};
    const auto found = fit(task);
    REQUIRE_FALSE(found);
    return text(found.problems());
  };
  CHECK(refusal(interaction(beta0, {"Na^+", "Cl"})).find("no dissolved species is called Cl") !=
        std::string::npos);
  CHECK(refusal(interaction(beta0, {"Na^+", "K^+"})).find("one cation and one anion") != std::string::npos);
  CHECK(refusal(interaction(theta, {"Na^+", "Cl^-"})).find("two cations or two anions") != std::string::npos);
  CHECK(refusal(interaction(theta, {"Na^+", "Na^+"})).find("two cations or two anions") != std::string::npos);
  CHECK(refusal(interaction(psi, {"Na^+", "Cl^-"})).find("two ions of one sign") != std::string::npos);
  CHECK(refusal(interaction(lambda, na_cl)).find("a neutral solute and any other") != std::string::npos);
  CHECK(refusal(interaction(zeta, {"H3BO3", "Na^+", "K^+"})).find("a cation and an anion") !=
        std::string::npos);
  CHECK(refusal(interaction(mu, {"H3BO3", "H3BO3", "K^+"})).find("three neutral") != std::string::npos);
  CHECK(refusal(interaction(epsilon, na_cl)).find("belongs to the model sit") != std::string::npos);
}

TEST_CASE("an answer says which stated interactions it rests on", "[unit]") {
  Measurement m = measured(Quantity::osmotic_coefficient, {{"NaCl", 1}}, 0.004);
  m.recipe.model = ModelKind::pitzer;
  Interaction own = interaction(beta0, na_cl, 0.08);
  own.source = "fitted to this tank by Brindlewick Surface Works, from week 40";
  const auto with = solution::solve(m.recipe, stating({own}));
  REQUIRE(with);
  CHECK(says(with->warnings, "Na^+ - Cl^-: beta0 fitted to this tank by Brindlewick Surface Works"));
  const auto without = solution::solve(m.recipe, built_in());
  REQUIRE(without);
  CHECK_FALSE(says(without->warnings, "fitted"));
  m.recipe.ingredients = {{"KCl", 1, "test"}};
  const auto elsewhere = solution::solve(m.recipe, stating({own}));
  REQUIRE(elsewhere);
  CHECK_FALSE(says(elsewhere->warnings, "fitted"));
}

TEST_CASE("the regressions of the tables repeat, and the reference report leaves out what they used",
          "[property]") {
  const data::CsvTable fitted = reference("fitted");
  std::set<std::string> used;
  for (std::size_t i = 0; i < fitted.size(); ++i)
    used.insert(std::string(fitted[i]["input"]) + ": " + std::string(fitted[i]["id"]));
  std::set<std::string> using_them;
  for (const auto& file :
       std::filesystem::directory_iterator(std::filesystem::path(PROJECT_DIR) / "engine/data/regression")) {
    INFO(file.path().filename());
    const auto task = shopfiles::read_fit(file.path().string());
    REQUIRE(task);
    for (const Measurement& m : task->measurements)
      if (!m.held_out)
        using_them.insert(file.path().filename().string() + ": " + m.label.substr(0, m.label.find(',')));
    const auto found = fit(*task);
    REQUIRE(found);
    for (const Found& number : found->found) {
      INFO(parameter_name(number.unknown) << " of " << owner(number.unknown));
      const double rounding = std::holds_alternative<Interaction>(number.unknown.what) ? 1e-5 : 1e-3;
      CHECK(number.value == Approx(number.before).margin(rounding).epsilon(0));
    }
  }
  CHECK(using_them == used);
}
