// Worked examples: read from their file, computed, compared.
#include "replay.hpp"

#include <algorithm>
#include <catch2/catch.hpp>

#include "brine.hpp"

using namespace bathwright;
using conformance::Check;
using conformance::read_examples_text;

namespace {

constexpr const char* brine = R"([[example]]
name = "brine"
temperature = "25 degC"
volume = "1 L"
pH = 4.0
g_per_L = { "Ni^2+" = 0.58693 }
)";

/// The checks of one bath and what is expected in it.
std::vector<Check> replayed(const std::string& expectations) {
  const auto examples = read_examples_text("examples.toml", brine + expectations);
  INFO((examples ? "" : text(examples.problems())));
  REQUIRE(examples);
  return conformance::replay(nickel_chloride_bath(), *examples);
}

std::string expect(const std::string& keys) {
  return "[[example.expect]]\nfrom = \"by hand\"\n" + keys + '\n';
}

}  // namespace

TEST_CASE("figures of every kind are computed and compared", "[unit][conformance]") {
  // 0.01 mol/L NiCl2: 0.01003 mol/kg in 0.9970 kg of water; I = (4 x 0.01003 + 0.02006)/2; 2 x 0.58693;
  // 3600 x 58.693/(2 x 96485.33) = 1.09496 g/Ah, times 0.5. NiCl2.6H2O dissolves to some 5 mol/kg.
  const auto checks =
      replayed(expect("figure = 'pH'\nvalue = 4\ntolerance = 1e-6") +
               expect("figure = 'ionic strength'\nvalue = 0.0302\ntolerance = 0.0002") +
               expect("figure = 'density'\nabove = 0.997\nbelow = 1.0") +
               expect("figure = 'level'\nof = 'Cl^-'\nvalue = 0.709\ntolerance = 0.005") +
               expect("figure = 'molality'\nof = 'Ni^2+'\nvalue = 0.01003\ntolerance = 2e-5") +
               expect("figure = 'log10 activity'\nof = 'H^+'\nvalue = -4\ntolerance = 1e-6") +
               expect("figure = 'indicator'\nof = 'double-nickel'\nvalue = 1.17386\ntolerance = 1e-5") +
               expect("figure = 'headroom'\nof = 'NiCl2.6H2O'\nabove = 3") +
               expect("figure = 'idle headroom'\nof = 'NiCl2.6H2O'\nabove = 3") +
               expect("figure = 'deposit'\nof = 'plating'\nvalue = 0.54748\ntolerance = 1e-5"));
  CHECK(checks.size() == 10);
  for (const Check& check : checks) {
    INFO(check.what << ": " << check.found << "; " << text(check.problems));
    CHECK(check.passed());
    CHECK(check.found.starts_with("computed "));
  }
  CHECK(checks[6].found == "computed 1.17386 g/L, by hand 1.17386 +/- 1e-05");
}

TEST_CASE("an expectation that is not met fails and says by how much", "[failure][conformance]") {
  struct Row {
    const char* keys;
    const char* what;
  };
  const Row rows[] = {
      {"figure = 'pH'\nvalue = 5\ntolerance = 0.5", "the engine gives 4"},
      {"figure = 'headroom'\nof = 'NiCl2.6H2O'\nbelow = 0", "the engine gives "},
      {"figure = 'density'\nabove = 1.0", "the engine gives 0.998"},
      {"figure = 'level'\nof = 'Cu^2+'\nabove = 0", "there is no quantity \"Cu^2+\""},
      {"figure = 'molality'\nof = 'Cu^2+'\nabove = 0", "there is no species \"Cu^2+\""},
      {"figure = 'indicator'\nof = 'free-copper'\nabove = 0", "there is no indicator \"free-copper\""},
      {"figure = 'indicator'\nof = 'never'\nabove = 0", "something it needs is not known"},
      {"figure = 'headroom'\nof = 'H3BO3'\nabove = 0", "there is no watched solid"},
      {"figure = 'deposit'\nof = 'drag-out'\nabove = 0", "there is no use that deposits a metal"},
      {"figure = 'deposit'\nof = 'nothing'\nabove = 0", "there is no use that deposits a metal"},
  };
  for (const Row& row : rows) {
    INFO(row.keys);
    const auto checks = replayed(expect(row.keys));
    REQUIRE(checks.size() == 1);
    REQUIRE(checks[0].failed());
    CHECK(checks[0].problems[0].where.starts_with("examples.toml:"));
    CHECK(checks[0].problems[0].what.find(row.what) != std::string::npos);
  }
}

TEST_CASE("a bath that cannot be computed fails as a whole", "[failure][conformance]") {
  auto examples = *read_examples_text("examples.toml", brine + expect("figure = 'pH'\nabove = 0"));
  examples[0].g_per_L.clear();
  const auto checks = conformance::replay(nickel_chloride_bath(), examples);
  REQUIRE(checks.size() == 1);
  CHECK(checks[0].what == "brine: can be computed");
  CHECK(checks[0].failed());
}

TEST_CASE("a file of examples says what is wrong with it", "[failure][conformance]") {
  struct Row {
    const char* keys;
    const char* problem;
  };
  const Row rows[] = {
      {"figure = 'levels'\nof = 'Ni^2+'\nabove = 0", "Did you mean level?"},
      {"figure = 'level'\nabove = 0", "of"},
      {"figure = 'pH'\nof = 'Ni^2+'\nabove = 0", "is of the whole bath"},
      {"figure = 'pH'", "says nothing that can be compared"},
      {"figure = 'pH'\nvalue = 4", "says nothing that can be compared"},
      {"figure = 'pH'\ntolerance = 4", "says nothing that can be compared"},
      {"figure = 'pH'\nvalue = 4\ntolerance = 1\nabove = 3", "says nothing that can be compared"},
      {"figure = 'pH'\nabove = 0\ntolerence = 4", "Did you mean tolerance?"},
  };
  for (const Row& row : rows) {
    INFO(row.keys);
    const auto read = read_examples_text("examples.toml", brine + expect(row.keys));
    REQUIRE_FALSE(read);
    INFO(text(read.problems()));
    CHECK(text(read.problems()).find(row.problem) != std::string::npos);
  }
  CHECK_FALSE(read_examples_text("examples.toml", "[[example.expect]]\nfigure = 'pH'\nabove = 0"));
  CHECK_FALSE(read_examples_text("examples.toml",
                                 std::string(brine) + "[[example.expect]]\nfigure = 'pH'\nabove = 0"));
  CHECK_FALSE(read_examples_text("examples.toml", "title = 'none'"));
}
