// Plugins with one fault each: every one is refused by name and reason, and the rest goes on.
#include <algorithm>
#include <set>
#include <sstream>

#include "probe.hpp"
#include "scratch_folder.hpp"

using namespace bathwright;
using namespace bathwright::plugin_host;

namespace {

struct Row {
  const char *plugin, *says;             ///< says: at the start of a problem, after the plugin's name
  std::vector<const char*> when_busy{};  ///< or one of these, where the machine has no time for it
};

// Ends of a process differ under a sanitizer, which reports before it ends it.
#if defined(__SANITIZE_ADDRESS__) || defined(__SANITIZE_THREAD__)
constexpr bool sanitized = true;
#else
constexpr bool sanitized = false;
#endif

const std::vector<Row> rows = {
    // The file
    {"exports-more", "exports helper_for_everybody; expected bw_entry_1 and nothing else"},
    {"needs-what-nobody-has", "is not a library that can be loaded (undefined symbol: nowhere_to_be_found)"},
    {"wrong-major-version", "is no bath-type plugin of interface version 1"},
    // What it does to the process that loads it
    {"starts-a-thread", "started a thread while it was loaded"},
    {"changes-locale", "changed the locale while it was loaded"},
    {"installs-a-handler", "installed a handler for signal 15 while it was loaded"},
    {"changes-rounding", "changed the rounding or another floating-point mode in indicator 'chloride'"},
    {"prints", "printed \"loading?\" in bw_entry_1"},
    {"prints-in-an-indicator", "printed \"hellohello\" in indicator 'chloride' (usual levels)"},
    // What its entry says
    {"throws", "bw_entry_1 let out an exception"},
    {"refuses", "the plugin refuses to work; licence: no key found"},
    {"odd-status", "bw_entry_1 gave status 42"},
    {"endless-list", "the plugin never ends its list"},
    {"another-each-time", "bw_entry_1 gave status 0 and another bath type; expected the bath type it"},
    {"wants-this-host", "bw_entry_1 gave status 2"},
    // What its tables say
    {"no-source", "test-bath windows row 1 source:"},
    {"unbalanced-reaction", "test-bath own_species row 1 reaction:"},
    {"lies-about-row-size", "test-bath quantities: rows of 20 bytes"},
    {"lies-about-count", "test-bath cautions: 4000 rows"},
    {"lies-about-its-size", "bath type size: a bath type of 16 bytes"},
    {"has-no-rows", "test-bath components: 3 rows, but none are there"},
    // What its functions do
    {"gives-nan", "indicator 'chloride' (usual levels): gave no finite number with BW_OK"},
    {"gives-odd-status", "indicator 'chloride' (usual levels): gave status 42"},
    {"throws-in-an-indicator", "indicator 'chloride' (usual levels): let out an exception"},
    {"writes-past-its-result", "indicator 'chloride' (usual levels): wrote outside its result"},
    {"remembers", "indicator 'chloride': gave other bits the second time"},
    {"is-slow", "indicator 'chloride': took "},
};

/// These end the probe itself.
const std::vector<Row> endings = {
    {"crashes-at-load", "crashed while it was loaded (signal 11, Segmentation fault)"},
    {"aborts", "crashed while it was loaded (signal 6, Aborted)"},
    {"exits", "ended its process while it was loaded (exit status 0)"},
    {"takes-memory",
     "crashed while it was loaded (signal 11, Segmentation fault; it had taken ",
     {"had not answered after 5 s while it was loaded",
      "used more than 2 s of processor time while it was loaded"}},  // which clearing its pages may take
    {"loops-at-load",
     "used more than 2 s of processor time while it was loaded",
     {"had not answered after 5 s while it was loaded"}},
    {"loops-in-an-indicator",
     "used more than 2 s of processor time in indicator 'chloride' (usual levels)",
     {"had not answered after 5 s in indicator 'chloride' (usual levels)"}},
    {"hangs", "had not answered after 5 s while it was loaded"},
    {"forks", "asked the system for what no bath type needs while it was loaded"},
    {"writes-a-file", "asked the system for what no bath type needs while it was loaded"},
    {"ends-by-crashing", "crashed in bw_entry_1, past the end (signal 11"},
    {"crashes-unsolved", "crashed in indicator 'chloride' (an unsolved bath) (signal 11"},
    {"reads-past-its-view", "crashed in indicator 'chloride' (usual levels) (signal 11"},
    {"writes-into-its-view", "crashed in indicator 'chloride' (usual levels) (signal 11"},
    {"crashes-at-exit", "crashed while the process ended (signal 11"},
};

/// Every plugin of the table is refused for its reason, beside a sound one that is ready.
void check_refused(const std::vector<Row>& table) {
  const ScratchFolder folder;
  Bench bench({folder.path()});
  for (const Row& row : table) {
    folder.put(row.plugin, row.plugin);
    bench.allow(row.plugin);
  }
  folder.put("sound", "zz-sound");
  const BathTypes types = bench.allow("sound").discover();
  REQUIRE(types.list().size() == table.size() + 1);
  for (const Row& row : table) {
    const auto file = folder.path() / (row.plugin + std::string(".bathtype.so"));
    const auto listed = std::ranges::find(types.list(), file, &Listed::path);
    REQUIRE(listed != types.list().end());
    const std::string reasons = text(listed->problems);
    INFO(reasons);
    CHECK(listed->state == State::refused);
    const auto told = [&](const char* says) {
      return reasons.find(row.plugin + (".bathtype.so: " + std::string(says))) != std::string::npos;
    };
    CHECK((told(row.says) || std::ranges::any_of(row.when_busy, told)));
  }
  CHECK(types.list().back().state == State::ready);
  CHECK(types.find("test-bath"));
}

}  // namespace

TEST_CASE("a plugin with one fault is refused by name and reason", "[failure][plugin_host]") {
  check_refused(rows);
}

TEST_CASE("a plugin that ends the process it is tried in is refused by name and reason",
          "[failure][plugin_host]") {
  if (sanitized) return;
  check_refused(endings);
  CHECK_FALSE(std::filesystem::exists("/tmp/written-by-a-plugin"));
}

TEST_CASE("every broken plugin has its sentence", "[unit][plugin_host]") {
  std::set<std::string> told;
  for (const auto* table : {&rows, &endings})
    for (const Row& row : *table) told.insert(row.plugin);
  std::istringstream all(ALL_FAULTS);
  std::size_t count = 0;
  for (std::string fault; all >> fault; ++count) {
    INFO(fault);
    CHECK(told.contains(fault));
  }
  CHECK(count == told.size());
}

TEST_CASE("a fault hides no other", "[failure][plugin_host]") {
  const ScratchFolder folder;
  const auto copy = sealed_copy(folder.put("prints-in-an-indicator", "a"), Above::to_the_root);
  REQUIRE(copy);
  const ProbeReport report = probe(*copy, probe_program());
  CHECK(report.types.size() == 1);
  CHECK(report.checks.size() == 13);
  CHECK(report.problems().size() == 6);  // with each of the five views, and from four threads at once
}

TEST_CASE("a sound plugin passes every check of the probe", "[unit][plugin_host]") {
  const auto copy = sealed_copy(built("sound"), Above::to_the_root);
  REQUIRE(copy);
  const ProbeReport report = probe(*copy, probe_program());
  INFO(text(report.problems()));
  CHECK(report.problems().empty());
  CHECK(report.repeatable);
  REQUIRE(report.types.size() == 1);
  CHECK(report.types[0].id == "test-bath");
  CHECK(report.types[0].licence == "MIT");
}

TEST_CASE("a probe that cannot be started is no verdict on the plugin", "[failure][plugin_host]") {
  const auto copy = sealed_copy(built("sound"), Above::to_the_root);
  REQUIRE(copy);
  for (const char* program : {"/no/such/program", "/bin/true", "/bin/cat"}) {
    INFO(program);
    const ProbeReport report = probe(*copy, program);
    REQUIRE(report.problems().size() == 1);
    INFO(text(report.problems()));
    CHECK(report.repeatable == (std::string(program) != "/no/such/program"));
  }
}
