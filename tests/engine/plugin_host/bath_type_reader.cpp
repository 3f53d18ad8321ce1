// What read_bath_type copies, what it refuses and where it says the fault lies.
#include <algorithm>
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <catch2/catch.hpp>
#include <cmath>

#include "rows.hpp"
#include "stated_bath.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;

TEST_CASE("a sound bath type is copied in full", "[unit][plugin_host]") {
  auto read = read_bath_type(StatedBath{}.stated());
  INFO((read ? std::string{} : text(read.problems())));
  REQUIRE(read);
  const bath::BathType& type = *read;  // the stated tables are gone by now
  CHECK(type.id == "test-bath");
  CHECK(type.validity == "its limits");
  CHECK(type.min_C == 10);
  CHECK(std::isnan(type.max_ionic_strength));
  CHECK(type.convention == activity::Convention::interaction);
  CHECK(type.components[0].found_by == bath::FoundBy::pH);
  CHECK(type.components[1].found_by == bath::FoundBy::analysis);
  CHECK(type.components[2].found_by == bath::FoundBy::charge);
  CHECK(type.quantities[1].formula.charge() == -1);
  CHECK(type.own_species[0].constant.log10_K == -1);
  CHECK(type.own_species[0].constant.has_dH);
  CHECK(type.own_species[0].source == "An author, A book, a publisher, 1976");
  CHECK_FALSE(type.own_solids[0].constant.has_dH);
  CHECK(type.own_solids[0].max_C == 60);
  CHECK(type.solids[0].sign_in_tank == "green crystals");
  CHECK(type.windows[0].stop_high == 80);
  CHECK(std::isnan(type.windows[1].aim));
  CHECK(type.windows[0].source == "a-book");
  CHECK(type.additions[0].largest_rise_g_per_L == 10);
  CHECK(type.additions[0].order == 1);
  CHECK(type.cautions[0].level == bath::Level::stop);
  CHECK(type.indicators[0].unit == "g/L");
}

TEST_CASE("each fault of the tables is refused where it stands", "[failure][plugin_host]") {
  struct Row {
    const char* where;
    const char* what;
    void (*spoil)(StatedBath&);
  };
  const Row rows[] = {
      {"bath type id", "'Test Bath' is no id", [](StatedBath& b) { b.head.id = "Test Bath"; }},
      {"bath type id", "is missing", [](StatedBath& b) { b.head.id = nullptr; }},
      {"test-bath version", "'1.' is no version", [](StatedBath& b) { b.head.version = "1."; }},
      {"test-bath summary", "is not UTF-8", [](StatedBath& b) { b.head.summary = "nickel \xC3("; }},
      {"test-bath name", "holds a control character", [](StatedBath& b) { b.head.name = "Test\x1B[31m"; }},
      {"test-bath max_C", "is not above min_C", [](StatedBath& b) { b.head.max_C = 10; }},
      {"test-bath min_C", "is unknown", [](StatedBath& b) { b.head.min_C = StatedBath::open; }},
      {"test-bath convention", "the code 3 is not known", [](StatedBath& b) { b.head.convention = 3; }},
      {"test-bath sources", "0 rows", [](StatedBath& b) { b.sources.clear(); }},
      {"test-bath sources row 2 key", "stands here a second time",
       [](StatedBath& b) { b.sources.push_back(b.sources[0]); }},
      {"test-bath components row 2 species", "'Ni^3+' is not a basis species",
       [](StatedBath& b) { b.components[1].species = "Ni^3+"; }},
      {"test-bath components", "2 components are found by charge",
       [](StatedBath& b) { b.components[1].found_by = BW_BY_CHARGE; }},
      {"test-bath components", "0 of the components are H^+",
       [](StatedBath& b) { b.components.erase(b.components.begin()); }},
      {"test-bath components row 1 found_by", "'H^+' and how it is found do not agree",
       [](StatedBath& b) { b.components[0].found_by = BW_BY_BOOK; }},
      {"test-bath components row 2 found_by", "'Ni^2+' and how it is found do not agree",
       [](StatedBath& b) { b.components[1].found_by = BW_BY_PH; }},
      {"test-bath quantities", "H^+ is found by analysis, but no quantity counts it",
       [](StatedBath& b) { b.components[0].found_by = BW_BY_ANALYSIS; }},
      {"test-bath incompatibilities row 1 with", "'sulphide' is not a stock chemical or a kind",
       [](StatedBath& b) { b.incompatibilities[0].with = "sulphide"; }},
      {"test-bath uses row 1 effects", "'Zn^2+' is not a quantity",
       [](StatedBath& b) { b.effects[0].id = "Zn^2+"; }},
      {"test-bath uses row 1 effects_spread", "is out of range",
       [](StatedBath& b) { b.uses[0].effects_spread = -1; }},
      {"test-bath zinc_set", "the code 4 is not known", [](StatedBath& b) { b.head.zinc_set = 4; }},
      {"test-bath components row 3 found_by", "the code 9 is not known",
       [](StatedBath& b) { b.components[2].found_by = 9; }},
      {"test-bath quantities row 1 formula", "there is no element",
       [](StatedBath& b) { b.quantities[0].formula = "Nx"; }},
      {"test-bath quantities row 2 counts", "'Na^+' is not a component",
       [](StatedBath& b) { b.chloride_ion[0].id = "Na^+"; }},
      {"test-bath quantities row 2 counts", "counts nothing",
       [](StatedBath& b) { b.quantities[1].count = 0; }},
      {"test-bath quantities row 2 counts", "terms that cannot be read",
       [](StatedBath& b) { b.quantities[1].counts = nullptr; }},
      {"test-bath own_species row 1 reaction", "does not balance: Cl, charge",
       [](StatedBath& b) { b.own_species[0].reaction = "Ni^2+ + 2 Cl^- + H2O = NiClOH + H^+"; }},
      {"test-bath own_species row 1 reaction", "'Nj^2+' is no species",
       [](StatedBath& b) { b.own_species[0].reaction = "Nj^2+ + Cl^- + H2O = NiClOH + H^+"; }},
      {"test-bath own_species row 1 reaction", "Ni2Cl^3+ counts an attraction twice",
       [](StatedBath& b) {
         b.own_species[0].name = "Ni2Cl^3+";
         b.own_species[0].reaction = "2 Ni^2+ + Cl^- = Ni2Cl^3+";
       }},
      {"test-bath own_species row 1 log10_K", "no source is given",
       [](StatedBath& b) { b.own_species[0].log10_K.source = 0; }},
      {"test-bath own_species row 1 log10_K", "is out of range",
       [](StatedBath& b) { b.own_species[0].log10_K.value = 300; }},
      {"test-bath own_solids row 1 reaction", "does not balance: H, O",
       [](StatedBath& b) { b.own_solids[0].reaction = "NiCl2.4H2O(s) = Ni^2+ + 2 Cl^- + 3 H2O"; }},
      {"test-bath own_solids row 1 reaction", "does not dissolve one unit",
       [](StatedBath& b) { b.own_solids[0].formula = "NiCl2.6H2O"; }},
      {"test-bath watched_solids row 1 name", "is no solid of the tables",
       [](StatedBath& b) { b.watched_solids[0].name = "NiCl2.5H2O"; }},
      {"test-bath watched_solids row 1 name", "cannot form: SO4^2- is not a component",
       [](StatedBath& b) { b.watched_solids[0].name = "NiSO4.7H2O"; }},
      {"test-bath windows row 1", "out of order", [](StatedBath& b) { b.windows[0].low = 65; }},
      {"test-bath windows row 2 subject", "'ph' is not a quantity",
       [](StatedBath& b) { b.windows[1].subject = "ph"; }},
      {"test-bath windows row 1 source", "there is no source 2",
       [](StatedBath& b) { b.windows[0].source = 2; }},
      {"test-bath additions row 1 how", "is missing", [](StatedBath& b) { b.additions[0].how = ""; }},
      {"test-bath additions row 1 wait_h", "is out of range",
       [](StatedBath& b) { b.additions[0].wait_h = -1; }},
      {"test-bath cautions row 1 level", "the code 0 is not known",
       [](StatedBath& b) { b.cautions[0].level = 0; }},
      {"test-bath cautions row 1 subject", "'nickel-chlorid' is not a quantity or a supply",
       [](StatedBath& b) { b.cautions[0].subject = "nickel-chlorid"; }},
      {"test-bath indicators row 1 eval", "is missing",
       [](StatedBath& b) { b.indicators[0].eval = nullptr; }},
      {"test-bath indicators row 1 id", "is also another",
       [](StatedBath& b) { b.indicators[0].id = "Cl^-"; }},
      {"test-bath uses row 1 cathode_efficiency", "is out of range",
       [](StatedBath& b) { b.uses[0].cathode_efficiency.value = 96; }},
      {"test-bath uses row 1 effects", "'acid' is not a quantity",
       [](StatedBath& b) { b.effects[0].id = "acid"; }},
      {"test-bath cautions", "a bath with cyanide (CN^-) has no caution of level stop that speaks of it",
       [](StatedBath& b) {
         b.components.push_back({"CN^-", BW_BY_BOOK, 0});
       }},
      {"test-bath cautions", "a bath with chromium(VI) (CrO4^2-) has no caution",
       [](StatedBath& b) {
         b.components.push_back({"CrO4^2-", BW_BY_BOOK, 0});
       }},
      {"test-bath cautions", "a bath with fluoride (F^-) has no caution",
       [](StatedBath& b) {
         b.components.push_back({"F^-", BW_BY_BOOK, 0});
       }},
      {"test-bath cautions", "a bath with hydrazine (N2H4) has no caution",
       [](StatedBath& b) { b.quantities[1].formula = "N2H4"; }},
      {"test-bath cautions", "a bath with formaldehyde (CH2O) has no caution",
       [](StatedBath& b) { b.quantities[1].formula = "CH2O"; }},
      {"test-bath cautions", "a bath with a strong oxidiser (H2O2) has no caution",
       [](StatedBath& b) { b.quantities[1].formula = "H2O2"; }},
      {"test-bath incompatibilities", "a cyanide bath without acid among them",
       [](StatedBath& b) {
         b.components.push_back({"CN^-", BW_BY_BOOK, 0});
         b.cautions.push_back({"", "Cyanide kills.", BW_STOP, 1});
         b.windows[1].low = 11, b.windows[1].high = 13;
       }},
  };
  for (const Row& row : rows) {
    INFO(row.where << ": " << row.what);
    StatedBath bath;
    row.spoil(bath);
    const auto read = read_bath_type(bath.stated());
    REQUIRE_FALSE(read);
    INFO(text(read.problems()));
    CHECK(std::ranges::any_of(read.problems(), [&](const Problem& p) {
      return p.where == row.where && p.what.find(row.what) != std::string::npos;
    }));
  }
}

TEST_CASE("all problems of a bath type are told together", "[failure][plugin_host]") {
  StatedBath bath;
  bath.head.author = nullptr;
  bath.windows[0].source = 0;
  bath.watched_solids[0].name = "ice";
  const auto read = read_bath_type(bath.stated());
  REQUIRE_FALSE(read);
  CHECK(read.problems().size() == 3);
}

TEST_CASE("sizes that cannot be right are refused before a row is read", "[failure][plugin_host]") {
  const StatedBath bath;
  struct Row {
    const char* what;
    void (*spoil)(bw_bath_type&);
  };
  const Row rows[] = {
      {"a bath type of 288 bytes", [](bw_bath_type& t) { t.size = sizeof t - 8; }},
      {"a bath type of 0 bytes", [](bw_bath_type& t) { t.size = 0; }},
      {"rows of 48 bytes", [](bw_bath_type& t) { t.windows.row_size -= 8; }},
      {"rows of 57 bytes", [](bw_bath_type& t) { t.windows.row_size += 1; }},
      {"rows of 8192 bytes", [](bw_bath_type& t) { t.windows.row_size = 8192; }},
      {"2 rows, but none are there", [](bw_bath_type& t) { t.windows.first = nullptr; }},
      {"4000000000 rows", [](bw_bath_type& t) { t.windows.count = 4000000000; }},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    bw_bath_type stated = bath.stated();
    row.spoil(stated);
    const auto read = read_bath_type(stated);
    REQUIRE_FALSE(read);
    CHECK(text(read.problems()).find(row.what) != std::string::npos);
  }
}

TEST_CASE("rows of a newer plugin are read as far as they are known", "[unit][plugin_host]") {
  struct NewerWindow {
    bw_window known;
    double appended;
  };
  const StatedBath bath;
  const NewerWindow windows[] = {{bath.windows[0], 1e300}, {bath.windows[1], -1e300}};
  bw_bath_type stated = bath.stated();
  stated.windows = {windows, 2, sizeof(NewerWindow)};
  const auto read = read_bath_type(stated);
  REQUIRE(read);
  CHECK(read->windows[0].stop_high == 80);
  CHECK(read->windows[1].subject == "pH");
  CHECK(read->windows[1].high == 3);
}

TEST_CASE("rows of an older plugin leave what it did not know as not given", "[unit][plugin_host]") {
  struct OldRow {
    double level;
  };
  struct Row {
    double level, appended_number;
    const char* appended_text;
  };
  const OldRow stated[] = {{1}, {2}};
  const Row not_given{0, StatedBath::open, nullptr};
  Report report("test");
  const auto rows =
      copy_rows<Row>("rows", {stated, 2, sizeof(OldRow)}, RowLimits{sizeof(OldRow)}, report, not_given);
  CHECK(report.problems().empty());
  REQUIRE(rows.size() == 2);
  CHECK(rows[1].level == 2);
  CHECK(std::isnan(rows[1].appended_number));
  CHECK(rows[1].appended_text == nullptr);
}

TEST_CASE("an indicator at fault gives a problem, not a number", "[failure][plugin_host]") {
  struct Row {
    const char* what;
    bw_status (*eval)(const bw_view*, double*);
  };
  const Row rows[] = {
      {"no finite number",
       [](const bw_view*, double* value) -> bw_status {
         *value = StatedBath::open;
         return BW_OK;
       }},
      {"no finite number", [](const bw_view*, double*) -> bw_status { return BW_OK; }},
      {"status 17", [](const bw_view*, double*) -> bw_status { return 17; }},
      {"let out an exception", [](const bw_view*, double*) -> bw_status { throw 1; }},
      {"not known", [](const bw_view*, double*) -> bw_status { return BW_NOT_KNOWN; }},
      {"outside what it is good for", [](const bw_view*, double*) -> bw_status { return BW_OUT_OF_RANGE; }},
  };
  for (const Row& row : rows) {
    INFO(row.what);
    StatedBath bath;
    bath.indicators[0].eval = row.eval;
    const auto read = read_bath_type(bath.stated());
    REQUIRE(read);
    const auto value = read->indicators[0].evaluate(bath::IndicatorView{});
    REQUIRE_FALSE(value);
    CHECK(value.problems().front().where == "test-bath chloride");
    CHECK(value.problems().front().what.find(row.what) != std::string::npos);
  }
}
