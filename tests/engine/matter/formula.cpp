#include <bathwright/matter/formula.hpp>
#include <catch2/catch.hpp>
#include <string>
#include <utility>
#include <vector>

using namespace bathwright;
using matter::Atom;
using matter::Formula;

namespace {

Formula formula(const std::string& text) {
  auto parsed = Formula::parse(text);
  INFO(text);
  REQUIRE(parsed);
  return *std::move(parsed);
}

std::string message(const std::string& text) {
  const auto parsed = Formula::parse(text, "here");
  return parsed ? "accepted" : bathwright::text(parsed.problems());
}

}  // namespace

TEST_CASE("molar masses agree with an independent computation", "[reference][matter]") {
  // From standard atomic weights rounded to five digits, computed elsewhere; 0.002 is their rounding.
  const std::vector<std::pair<std::string, double>> rows = {{"NiSO4.6H2O", 262.839},
                                                            {"Ni(SO3NH2)2.4H2O", 322.913},
                                                            {"Ni(OH)2", 92.707},
                                                            {"Cu2P2O7.3H2O", 355.078},
                                                            {"CuCl2.2H2O", 170.476},
                                                            {"ZnO", 81.379},
                                                            {"Zn(NO3)2.6H2O", 297.478},
                                                            {"CrO3", 99.993},
                                                            {"Cr(OH)SO4", 165.059},
                                                            {"Sn(CH3SO3)2", 308.894},
                                                            {"Na2SnO3.3H2O", 266.732},
                                                            {"KAg(CN)2", 199.002},
                                                            {"CoSO4.7H2O", 281.094},
                                                            {"KCN", 65.116},
                                                            {"KOH", 56.105},
                                                            {"Na2CO3.10H2O", 286.138},
                                                            {"NaHCO3", 84.006},
                                                            {"BaCO3", 197.335},
                                                            {"Na5P3O10", 367.862},
                                                            {"H2SO4", 98.072},
                                                            {"H3PO4", 97.994},
                                                            {"H2SiF6", 144.089},
                                                            {"KF.2H2O", 94.126},
                                                            {"CH3SO3H", 96.100},
                                                            {"C3H6O3", 90.078},
                                                            {"C4H6O4", 118.088},
                                                            {"C2H2O4.2H2O", 126.064},
                                                            {"NH4HCO2", 63.056},
                                                            {"NH4Cl", 53.489},
                                                            {"Na2SO4", 142.036},
                                                            {"H4P2O7", 177.973},
                                                            {"NaNO2", 68.995},
                                                            {"K3C6H5O7.H2O", 324.408},
                                                            {"NaC2H3O2.3H2O", 136.079},
                                                            {"Na4C10H12N2O8.4H2O", 452.232},
                                                            {"K4Fe(CN)6.3H2O", 422.390},
                                                            {"NaHSO3", 104.055},
                                                            {"Na2S2O4", 174.096},
                                                            {"NaOCl", 74.439},
                                                            {"FeSO4.7H2O", 278.006},
                                                            {"NiSO4.7H2O", 280.854},
                                                            {"NiCO3.2Ni(OH)2.4H2O", 376.175},
                                                            {"AgNO3", 169.872},
                                                            {"KAu(CN)2", 288.101},
                                                            {"CdO", 128.413},
                                                            {"KIO3", 213.999}};
  for (const auto& [text, g_per_mol] : rows) {
    INFO(text);
    CHECK(formula(text).molar_mass().v == Approx(g_per_mol).margin(0.002).epsilon(0));
  }
}

TEST_CASE("molar masses agree with handbooks", "[reference][matter]") {
  // Printed on reagent labels and in handbooks; from memory. Tolerance: the last printed digit and older
  // weights.
  const std::vector<std::pair<std::string, double>> rows = {
      {"NaCl", 58.44},          {"H2SO4", 98.08},          {"AgNO3", 169.87},
      {"KMnO4", 158.03},        {"H3BO3", 61.83},          {"CuSO4.5H2O", 249.69},
      {"NiSO4.6H2O", 262.85},   {"K2Cr2O7", 294.18},       {"KHC8H4O4", 204.22},
      {"Na2S2O3.5H2O", 248.18}, {"Na2B4O7.10H2O", 381.37}, {"(NH4)2Fe(SO4)2.6H2O", 392.14}};
  for (const auto& [text, g_per_mol] : rows) {
    INFO(text);
    CHECK(formula(text).molar_mass().v == Approx(g_per_mol).margin(0.015).epsilon(0));
  }
}

TEST_CASE("a formula is counted out", "[unit][matter]") {
  CHECK(formula("NiSO4.6H2O").atoms() == std::vector<Atom>{{"H", 12}, {"O", 10}, {"S", 1}, {"Ni", 1}});
  CHECK(formula("Ni(NH2SO3)2").atoms() ==
        std::vector<Atom>{{"H", 4}, {"N", 2}, {"O", 6}, {"S", 2}, {"Ni", 1}});
  CHECK(formula("[Cu(NH3)4]^2+").count("N") == 4);
  CHECK(formula("[Cu(NH3)4]^2+").charge() == 2);
  CHECK(formula("NiCO3.2Ni(OH)2.4H2O").count("Ni") == 3);
  CHECK(formula("NiCO3.2Ni(OH)2.4H2O").count("O") == 3 + 4 + 4);
  CHECK(formula("CO").count("C") == 1);
  CHECK(formula("Co").count("C") == 0);
}

TEST_CASE("crystal water may be fractional, after a dot or a middle dot", "[unit][matter]") {
  CHECK(formula("NiSO4.6H2O").crystal_water() == 6);
  CHECK(formula("CuSO4·5H2O").crystal_water() == 5);
  CHECK(formula("CaSO4.0.5H2O").crystal_water() == 0.5);
  CHECK(formula("CaSO4.0.5H2O").count("H") == 1);
  CHECK(formula("NiCO3.5.5H2O").crystal_water() == 5.5);
  CHECK(formula("NiCO3.5.5H2O").count("O") == 8.5);
  CHECK(formula("C6H8O7.H2O").crystal_water() == 1);
  CHECK(formula("NiCO3.2Ni(OH)2.4H2O").crystal_water() == 4);
  CHECK(formula("H2O").crystal_water() == 0);
}

TEST_CASE("charges", "[unit][matter]") {
  CHECK(formula("Ni^2+").charge() == 2);
  CHECK(formula("OH^-").charge() == -1);
  CHECK(formula("Fe(CN)6^4-").charge() == -4);
  CHECK(formula("Sn(P2O7)3^10-").charge() == -10);
  CHECK(formula("NiSO4").charge() == 0);
}

TEST_CASE("ligand tokens bring atoms and no charge", "[unit][matter]") {
  CHECK(formula("cit^3-").molar_mass().v == formula("C6H5O7^3-").molar_mass().v);
  CHECK(formula("Ni(cit)^-").charge() == -1);
  CHECK(formula("Ni(cit)^-").count("C") == 6);
  CHECK(formula("H2(edta)^2-").count("H") == 14);
  CHECK(formula("Cu(en)2^2+").count("N") == 4);
  CHECK(formula("Ni(cit)").charge() == 0);
}

TEST_CASE("the order of writing does not change the composition", "[property][matter]") {
  CHECK(same_composition(formula("NaCH3CO2"), formula("CH3COONa")));
  CHECK(same_composition(formula("NH4Cl"), formula("ClNH4")));
  CHECK(same_composition(formula("NiSO4.6H2O"), formula("NiSO4(H2O)6")));
  CHECK_FALSE(same_composition(formula("NiSO4.6H2O"), formula("NiSO4.7H2O")));
  CHECK_FALSE(same_composition(formula("Co"), formula("CO")));
}

TEST_CASE("formulae are shown with sub- and superscripts", "[unit][matter]") {
  const std::vector<std::pair<std::string, std::string>> rows = {
      {"Ni^2+", "Ni²⁺"},
      {"OH^-", "OH⁻"},
      {"CuSO4.5H2O", "CuSO₄·5H₂O"},
      {"Fe(CN)6^4-", "Fe(CN)₆⁴⁻"},
      {"CaSO4.0.5H2O", "CaSO₄·0.5H₂O"},
      {"NiCO3.2Ni(OH)2.4H2O", "NiCO₃·2Ni(OH)₂·4H₂O"},
      {"CuSO4·5H2O", "CuSO₄·5H₂O"},
      {"Sn(P2O7)3^10-", "Sn(P₂O₇)₃¹⁰⁻"}};
  for (const auto& [text, shown] : rows) CHECK(formula(text).pretty() == shown);
}

TEST_CASE("the salt of two ions is neutral and in least whole numbers", "[unit][matter]") {
  const auto salt = [](const std::string& cation, const std::string& anion) {
    return Formula::salt(formula(cation), formula(anion));
  };
  CHECK(salt("Al^3+", "SO4^2-").text() == "Al2(SO4)3");
  CHECK(salt("Na^+", "SO4^2-").text() == "Na2SO4");
  CHECK(salt("NH4^+", "SO4^2-").text() == "(NH4)2SO4");
  CHECK(salt("Ni^2+", "SO4^2-").text() == "NiSO4");
  CHECK(salt("Na^+", "cit^3-").text() == "Na3(cit)");
  for (const auto& [cation, anion] : std::vector<std::pair<std::string, std::string>>{
           {"Al^3+", "SO4^2-"}, {"NH4^+", "Cl^-"}, {"Ni^2+", "cit^3-"}, {"H^+", "OH^-"}}) {
    const Formula made = salt(cation, anion);
    CHECK(made.charge() == 0);
    CHECK(made.molar_mass().v == Approx(formula(made.text()).molar_mass().v).epsilon(1e-14));
    CHECK(same_composition(made, formula(made.text())));
  }
}

TEST_CASE("an unknown element is named with its place and the nearest one", "[failure][matter]") {
  CHECK(message("NlSO4").find("\"Nl\" at character 1") != std::string::npos);
  CHECK(message("NlSO4").find("Did you mean Ni?") != std::string::npos);
  CHECK(message("Ni(citt)^-").find("Did you mean cit?") != std::string::npos);
  CHECK(message("CuS04").find("letter O") != std::string::npos);  // zero for the letter
  CHECK(message("NiSO4.6H2O (alpha)").find("blank at character 11") != std::string::npos);
  CHECK(message("NlSO4").find("here") == 0);
}

TEST_CASE("what is not a formula is refused", "[failure][matter]") {
  for (const std::string& text : std::vector<std::string>{"",
                                                          " ",
                                                          "6",
                                                          "(",
                                                          ")",
                                                          "Ni(",
                                                          "Ni(SO4",
                                                          "Ni)SO4",
                                                          "Ni[SO4)",
                                                          "()",
                                                          "Ni^",
                                                          "Ni^2",
                                                          "Ni^+2",
                                                          "Ni^2+2",
                                                          "Ni^0+",
                                                          "Ni^99-",
                                                          "^2+",
                                                          "NiSO4.",
                                                          ".H2O",
                                                          "NiSO4..H2O",
                                                          "NiSO4.0H2O",
                                                          "H99999",
                                                          "((H9999)9999)9",

                                                          "nickel",
                                                          "Ni\xff",
                                                          "\xc2",
                                                          std::string(201, 'H'),
                                                          std::string(150, '('),
                                                          "NiSO4.1e5H2O",
                                                          "CuSO4*5H2O"}) {
    INFO(text);
    CHECK_FALSE(Formula::parse(text));
  }
  CHECK(message("Ni(SO4").find("not closed") != std::string::npos);
  CHECK(message("Ni^+2").find("^2+") != std::string::npos);
}

TEST_CASE("a formula too long is not cut in the middle of a dot", "[failure][matter]") {
  std::string typed = "B";
  while (typed.size() < 202) typed += "·H";  // two bytes a dot; the 200th byte is the first of one
  INFO(message(typed));
  CHECK(message(typed).find("\xc2\"") == std::string::npos);
  CHECK(message(typed).find("H\": the formula is longer") != std::string::npos);
}

TEST_CASE("mass ratios the trade works with", "[reference][matter]") {
  // Computed elsewhere from abridged atomic weights, printed to four decimals.
  const auto M = [](std::string_view formula) { return Formula::parse(formula)->molar_mass().v; };
  struct Row {
    const char *of, *per;
    double ratio, of_per_mol;  // mol of the one per mol of the other
  };
  for (const Row& row :
       {Row{"NaCN", "CuCN", 1.0944, 2}, Row{"KCN", "CuCN", 1.4541, 2}, Row{"NaCN", "Zn(CN)2", 0.8348, 2},
        Row{"BaCO3", "SO4", 2.0544, 1}, Row{"H2SO4", "Al", 5.4521, 1.5}, Row{"H2SO4", "Fe", 1.7561, 1},
        Row{"HCl", "Fe", 1.3057, 2}, Row{"FePO4", "Fe", 2.7006, 1}, Row{"NaH2PO2.H2O", "Ni", 1.8059, 1},
        Row{"CrO3", "Cr", 1.9231, 1}, Row{"Na2CO3.10H2O", "Na2CO3", 2.6997, 1},
        Row{"NiSO4.7H2O", "NiSO4.6H2O", 1.0685, 1}, Row{"CuSO4.5H2O", "Cu", 3.9291, 1}}) {
    INFO(row.of << " per " << row.per);
    CHECK(row.of_per_mol * M(row.of) / M(row.per) == Approx(row.ratio).margin(1.1e-4).epsilon(0));
  }
  // Make-up of a copper cyanide bath: free = added - 2 per Cu; of a pyrophosphate bath, P2O7 over Cu by mass.
  CHECK(97.5 - 75 * 2 * M("NaCN") / M("CuCN") == Approx(15.4).margin(0.05).epsilon(0));
  CHECK(102 - 60 * 2 * M("KCN") / M("CuCN") == Approx(14.8).margin(0.05).epsilon(0));
  const double copper = 68 * 2 * M("Cu") / M("Cu2P2O7.3H2O");
  const double pyrophosphate = M("P2O7") * (68 / M("Cu2P2O7.3H2O") + 275 / M("K4P2O7"));
  CHECK(copper == Approx(24.3).margin(0.05).epsilon(0));
  CHECK(pyrophosphate / copper == Approx(7.32).margin(0.005).epsilon(0));
}

TEST_CASE("grams deposited by an ampere-hour", "[reference][matter]") {
  // Faraday's law, M * 3600 / (n F), F = 96485.33212 C/mol (exact, SI 2019); computed elsewhere.
  struct Row {
    const char* metal;
    int electrons;
    double g_per_Ah;
  };
  for (const Row& row :
       {Row{"Ni", 2, 1.0950}, Row{"Cu", 2, 1.1855}, Row{"Cu", 1, 2.3710}, Row{"Zn", 2, 1.2197},
        Row{"Cr", 6, 0.32334}, Row{"Cr", 3, 0.64668}, Row{"Sn", 2, 2.2146}, Row{"Ag", 1, 4.0247},
        Row{"Au", 1, 7.3491}, Row{"Cd", 2, 2.0972}, Row{"Al", 3, 0.33558}}) {
    INFO(row.metal << " " << row.electrons);
    CHECK(Formula::parse(row.metal)->molar_mass().v * 3600 / (row.electrons * 96485.33212) ==
          Approx(row.g_per_Ah).margin(5.5e-5).epsilon(0));
  }
}
