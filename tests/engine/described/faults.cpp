// Every fault of a bath type in TOML is refused at its line.
#include <algorithm>

#include "small_bath.hpp"

using namespace bathwright;

namespace {

/// The text with the first `from` in it replaced by `to`.
std::string spoilt(const std::string& from, const std::string& to) {
  std::string text = small_bath;
  const std::size_t at = text.find(from);
  REQUIRE(at != std::string::npos);
  return text.replace(at, from.size(), to);
}

/// 1-based. A row whose key is the table's own, or missing from it, is looked for from what was spoilt
/// backwards: its header stands before.
template <class Row>
int line_of(const Row& row, const std::string& text) {
  const std::size_t spoilt_at = std::string_view(small_bath).find(row.from);
  const std::string_view mark = row.line;
  const std::size_t at = mark.starts_with("[") ? text.rfind(mark, spoilt_at) : text.find(mark);
  REQUIRE(at != std::string::npos);
  return 1 + static_cast<int>(std::count(text.begin(), text.begin() + static_cast<std::ptrdiff_t>(at), '\n'));
}

}  // namespace

TEST_CASE("the small bath type is sound", "[unit][described]") {
  const auto type = read_small(small_bath);
  INFO((type ? "" : text(type.problems())));
  REQUIRE(type);
  CHECK(type->id == "test-bath");
  CHECK(type->components[2].found_by == bath::FoundBy::charge);
  CHECK(type->quantities[1].formula.text() == "H2SO4");
  CHECK(type->own_species[0].constant.log10_K == -7.5);
  CHECK(type->own_species[0].constant.uncertainty == 0.2);
  CHECK(type->own_solids[0].max_C == 60);
  CHECK(type->uses[0].effects[0].g_per_unit == -0.1);
}

TEST_CASE("the example that people copy loads", "[unit][described]") {
  const auto type = described::read_bath_type_file(PROJECT_DIR "/plugins/described/example.bathtype.toml");
  INFO((type ? "" : text(type.problems())));
  REQUIRE(type);
  CHECK(type->validity.find("6 mol/kg, 15 to 40 degC, chloride") != std::string::npos);
  CHECK(type->indicators.size() == 3);
}

TEST_CASE("each fault is refused at its line", "[failure][described]") {
  struct Row {
    const char* from;
    const char* to;
    const char* line;  ///< a text that stands in it
    const char* key;
    const char* what;
  };
  const Row rows[] = {
      // the file itself
      {"name = \"Test bath\"", "nam = \"Test bath\"", "nam =", "nam", "is not a key of this table"},
      {"name = \"Test bath\"", "", "id =", "name", "is missing"},
      {"min_C = 10", "min_C = \"10\"", "min_C", "min_C", "is not a number"},
      {"min_C = 10", "min_C = nan", "min_C", "min_C", "is out of range"},
      {"convention = \"association\"", "convention = \"asociation\"", "convention", "convention",
       "\"asociation\" is not known here"},
      {"convention", "acid_set = \"some chloride\"\nconvention", "acid_set", "acid_set", "is not known here"},
      {"citation", "url = \"x\"\ncitation", "url", "source.a-book.url", "is not a key of this table"},
      {"\"Cu^2+\" = \"analysis\"", "\"Cu^2+\" = \"titration\"", "\"titration\"", "components.Cu^2+",
       "is not known here"},
      {"role = \"metal\"", "", "[[quantity]]", "quantity.role", "is missing"},
      {"role = \"metal\"", "role = \"metal\"\nsalt_view = 1", "salt_view", "quantity.salt_view",
       "is not true or false"},
      {"\"H^+\" = 0.5", "\"H^+\" = \"half\"", "half", "quantity.counts.H^+", "is not a number"},
      {"source = \"a-book\"\n\n[[own_solid]]", "source = \"a-bok\"\n\n[[own_solid]]", "a-bok",
       "own_species.source", "is not a source of this file"},
      {"log10_K = -7.5\n", "", "[[own_species]]", "own_species.log10_K", "is missing"},
      {"order = 1", "order = 1.5", "order", "addition.order", "is no whole number"},
      {"level = \"stop\"\ntext", "level = \"danger\"\ntext", "danger", "caution.level", "is not known here"},
      {"per = \"Ah\"", "per = \"kWh\"", "kWh", "use.per", "is not known here"},
      {"{ value = 0.99 }", "{ valu = 0.99 }", "valu =", "use.cathode_efficiency.valu",
       "is not a key of this table"},
      {"[[watched]]", "[watched]", "[watched]", "watched", "is not a list of tables"},
      {"\"Cu^2+\" = \"analysis\"", "\"\" = \"analysis\"", "\"\" =", "components", "is missing"},
      // indicators
      {"value = { g_per_L = { \"H2SO4\"", "value = { g_per_L = { \"H2SO3\"", "H2SO3",
       "indicator.value.g_per_L.H2SO3", "is not a quantity"},
      {"over = { g_per_L = { \"Cu^2+\"", "over = { species_activity = { \"Cu(OH)3^-x\"", "3^-x",
       "indicator.over.species_activity.Cu(OH)3^-x", "is not a species"},
      {"over = { g_per_L = { \"Cu^2+\"", "over = { saturation = { \"ice\"", "\"ice\"",
       "indicator.over.saturation.ice", "is not a watched solid"},
      {"over = { g_per_L", "over = { pH = 1, g_per_L", "over =", "indicator.over", "adds g/L to pH"},
      {"over = { g_per_L = { \"Cu^2+\" = 1 } }", "over = { }", "over =", "indicator.over", "sums nothing"},
      {"over = { g_per_L", "over = { as = \"Cu\", g_per_L", "over =", "indicator.over.as", "has no mol/L"},
      {"over = { g_per_L", "over = { as = \"Cx\", mol_per_L", "over =", "indicator.over.as", "no element"},
      {"value = { g_per_L = { \"H2SO4\" = 1 } }", "", "[[indicator]]", "indicator.value", "is missing"},
      {"over = {", "factor = 0\nover = {", "factor", "indicator.factor", "is zero"},
      // the checks of every bath type
      {"id = \"test-bath\"", "id = \"Test Bath\"", "Test Bath", "id", "is no id"},
      {"version = \"1.2\"", "version = \"one\"", "one", "version", "is no version"},
      {"max_C = 70", "max_C = 7000", "7000", "max_C", "is out of range"},
      {"\"Cu^2+\" = \"analysis\"", "\"Cu^2+\" = \"charge\"", "[components]", "components",
       "2 components are found by charge"},
      {"\"Cu^2+\" = \"analysis\"", "\"Cv^2+\" = \"analysis\"", "Cv^2+", "components.Cv^2+",
       "is not a basis species"},
      {"id = \"H2SO4\"", "id = \"H2SOx\"", "H2SOx", "quantity.id", "there is no element"},
      {"\"H^+\" = 0.5", "\"K^+\" = 0.5", "K^+", "quantity.counts", "'K^+' is not a component"},
      {"= CuOH^+ + H^+", "= CuOH^+ + 2 H^+", "2 H^+", "own_species.reaction", "does not balance"},
      {"reaction = \"Cu^2+ + H2O = CuOH^+ + H^+\"", "reaction = \"Cu^2+ + H2O\"", "reaction",
       "own_species.reaction", "cannot read the reaction"},
      {"log10_K = -2.3", "log10_K = -230", "-230", "own_solid.log10_K", "is out of range"},
      {"solid = \"CuSO4.5H2O\"", "solid = \"CuSO4.9H2O\"", "9H2O", "watched.solid", "is no solid"},
      {"low = 40", "low = 55", "[[window]]", "window", "are out of order"},
      {"source = \"a-book\"\n\n[[addition]]", "\n\n[[addition]]", "[[window]]", "window.source",
       "is missing"},
      {"largest_rise_g_per_L = 10", "largest_rise_g_per_L = 0", "largest_rise",
       "addition.largest_rise_g_per_L", "is out of range"},
      {"with = \"acid_cyanide\"", "with = \"acid_cyanid\"", "acid_cyanid", "incompatible.with",
       "is not a stock chemical"},
      {"\"H2SO4\" = -0.1", "\"HCl\" = -0.1", "HCl", "use.effects", "is not a quantity"},
      {"electrons = 2", "electrons = 20", "= 20", "use.electrons", "is out of range"},
      {"cathode_efficiency = { value = 0.99 }\n", "", "[[use]]", "use.cathode_efficiency", "is unknown"},
      {"effects_uncertainty = 0.2", "effects_uncertainty = -1", "effects_uncertainty",
       "use.effects_uncertainty", "is out of range"},
      {"id = \"acid-to-copper\"", "id = \"Cu^2+\"", "id = \"Cu^2+\"\nlabel = \"acid", "indicator.id",
       "is also another indicator or quantity"},
  };
  for (const Row& row : rows) {
    INFO(row.from << " -> " << row.to);
    const std::string spoilt_text = spoilt(row.from, row.to);
    const auto type = read_small(spoilt_text);
    REQUIRE_FALSE(type);
    INFO(text(type.problems()));
    const std::string where =
        "small.bathtype.toml:" + std::to_string(line_of(row, spoilt_text)) + ": " + row.key;
    INFO("expected " << where << ": " << row.what);
    CHECK(std::ranges::any_of(type.problems(), [&](const Problem& p) {
      return p.where == where && p.what.find(row.what) != std::string::npos;
    }));
  }
}

TEST_CASE("a key is found wrong once, and all problems come in the order of the lines",
          "[failure][described]") {
  std::string text = spoilt("author = \"an author\"", "author = 7");
  text.replace(text.find("order = 1\n"), 10, "order = 0\n");
  text.replace(text.find("min_C = 10"), 10, "min_C = 900");
  const auto type = read_small(text);
  REQUIRE_FALSE(type);
  std::vector<std::string> places;
  for (const Problem& problem : type.problems()) places.push_back(problem.where);
  CHECK(places == std::vector<std::string>{"small.bathtype.toml:4: author", "small.bathtype.toml:8: min_C",
                                           "small.bathtype.toml:9: max_C",
                                           "small.bathtype.toml:63: addition.order"});
}

TEST_CASE("what is no bath type at all is refused in words", "[failure][described]") {
  for (const char* text : {"", "# nothing", "[[[", "id = 1", "source = 1\ncomponents = []", "\"\" = {}"}) {
    INFO(text);
    const auto type = read_small(text);
    REQUIRE_FALSE(type);
    CHECK(type.problems().front().where.starts_with("small.bathtype.toml:1"));
  }
  CHECK_FALSE(described::read_bath_type_file("/no/such/file.bathtype.toml"));
}
