// How the interface may grow: a host of today and plugins that know less or more than it does.
#include <bathwright_plugin.h>
#include <dlfcn.h>

#include <bathwright/matter/formula.hpp>
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <catch2/catch.hpp>
#include <cstring>

#include "../stated_bath.hpp"

using namespace bathwright;
using plugin_host::read_bath_type;

namespace {

/// A table of the bath type, and the length of its rows in interface 1.0.
struct TableRow {
  const char* name;
  bw_rows bw_bath_type::*table;
  std::uint32_t first_size;
};

constexpr TableRow tables[] = {
    {"sources", &bw_bath_type::sources, 24},
    {"components", &bw_bath_type::components, 16},
    {"quantities", &bw_bath_type::quantities, 48},
    {"own_species", &bw_bath_type::own_species, 96},
    {"own_solids", &bw_bath_type::own_solids, 128},
    {"watched_solids", &bw_bath_type::watched_solids, 16},
    {"windows", &bw_bath_type::windows, 56},
    {"additions", &bw_bath_type::additions, 48},
    {"cautions", &bw_bath_type::cautions, 24},
    {"indicators", &bw_bath_type::indicators, 40},
    {"uses", &bw_bath_type::uses, 120},
    {"incompatibilities", &bw_bath_type::incompatibilities, 24},
};
constexpr std::uint32_t first_type_size = 296, first_host_size = 48;

/// The rows of a table in rows of another length: cut off, or with all bits set behind.
std::vector<std::byte> with_rows_of(const bw_rows& rows, std::uint32_t size) {
  std::vector<std::byte> bytes(std::size_t{rows.count} * size, std::byte{0xFF});
  for (std::uint32_t i = 0; i < rows.count; ++i)
    std::memcpy(bytes.data() + std::size_t{i} * size,
                static_cast<const std::byte*>(rows.first) + std::size_t{i} * rows.row_size,
                std::min(size, rows.row_size));
  return bytes;
}

Result<bath::BathType> read_with_rows_of(const StatedBath& bath, const TableRow& row, std::uint32_t size) {
  bw_bath_type stated = bath.stated();
  const auto bytes = with_rows_of(stated.*row.table, size);
  stated.*row.table = {bytes.data(), (stated.*row.table).count, size};
  return read_bath_type(stated);
}

/// What a test can see of a bath type, as one text.
std::string fingerprint(const bath::BathType& type) {
  std::string text = type.id + type.version + type.sources.back().citation + type.components.back().species +
                     type.quantities.back().formula.text() + type.own_species.back().reaction +
                     type.own_solids.back().reaction + type.solids.back().sign_in_tank +
                     type.windows.back().subject + type.additions.back().how + type.cautions.back().text +
                     type.indicators.back().meaning + type.uses.back().deposits +
                     type.incompatibilities.back().why;
  for (const double number : {type.own_solids.back().max_C, type.windows.back().high,
                              type.additions.back().wait_h, type.uses.back().effects_u_rel})
    text += ' ' + std::to_string(number);
  return text;
}

/// The plugin that was built with the header of interface 1.0.
decltype(&bw_entry_1) kept_entry() {
  void* library = ::dlopen(KEPT_PLUGIN, RTLD_NOW | RTLD_LOCAL);
  REQUIRE(library);
  const auto entry = reinterpret_cast<decltype(&bw_entry_1)>(::dlsym(library, "bw_entry_1"));
  REQUIRE(entry);
  return entry;
}

double formula_g_per_mol(void*, const char* formula) {
  return matter::Formula::parse(formula)->molar_mass().v;
}

}  // namespace

TEST_CASE("rows shorter than in interface 1.0 are refused", "[failure][plugin_host]") {
  for (const TableRow& row : tables) {
    INFO(row.name);
    const auto read = read_with_rows_of(StatedBath{}, row, row.first_size - 8);
    REQUIRE_FALSE(read);
    CHECK(text(read.problems()).find("rows of " + std::to_string(row.first_size - 8) + " bytes") !=
          std::string::npos);
  }
  bw_bath_type stated = StatedBath{}.stated();
  stated.size = first_type_size - 8;
  CHECK_FALSE(read_bath_type(stated));
}

TEST_CASE("rows of interface 1.0 and longer rows of a later one say the same", "[unit][plugin_host]") {
  const StatedBath bath;
  const auto today = read_bath_type(bath.stated());
  REQUIRE(today);
  for (const TableRow& row : tables)
    for (const std::uint32_t size : {row.first_size, row.first_size + 8, row.first_size + 200}) {
      INFO(row.name << " in rows of " << size);
      const auto read = read_with_rows_of(bath, row, size);
      INFO((read ? "" : text(read.problems())));
      REQUIRE(read);
      CHECK(fingerprint(*read) == fingerprint(*today));
    }
}

TEST_CASE("a bath type of a later interface is read as far as it is known", "[unit][plugin_host]") {
  const StatedBath bath;
  struct {
    bw_bath_type known;
    std::uint64_t appended[8];
  } later{bath.stated(), {}};
  std::memset(later.appended, 0xFF, sizeof later.appended);
  later.known.size = sizeof later;
  later.known.abi_minor = BW_ABI_MINOR + 7;
  const auto read = read_bath_type(later.known);
  REQUIRE(read);
  CHECK(fingerprint(*read) == fingerprint(*read_bath_type(bath.stated())));
}

TEST_CASE("codes and flags of a later interface are no error where the host can do without",
          "[unit][plugin_host]") {
  StatedBath bath;
  bath.quantities[0].role = 99;
  bath.quantities[1].flags = 0x80000000u | BW_SALT_VIEW;
  bath.own_species[0].log10_K.quality = 99;
  const auto read = read_bath_type(bath.stated());
  REQUIRE(read);
  CHECK(read->quantities[1].salt_view);
  CHECK_FALSE(read->quantities[0].salt_view);
}

TEST_CASE("codes that decide what is computed are refused where they are not known",
          "[failure][plugin_host]") {
  struct Row {
    const char* field;
    void (*set)(StatedBath&);
  };
  const Row rows[] = {
      {"convention", [](StatedBath& b) { b.head.convention = 9; }},
      {"acid_set", [](StatedBath& b) { b.head.acid_set = 9; }},
      {"zinc_set", [](StatedBath& b) { b.head.zinc_set = 9; }},
      {"found_by", [](StatedBath& b) { b.components[1].found_by = 9; }},
      {"counted_in", [](StatedBath& b) { b.uses[0].counted_in = 9; }},
      {"level", [](StatedBath& b) { b.cautions[0].level = 9; }},
  };
  for (const Row& row : rows) {
    INFO(row.field);
    StatedBath bath;
    row.set(bath);
    const auto read = read_bath_type(bath.stated());
    REQUIRE_FALSE(read);
    CHECK(text(read.problems()).find(std::string(row.field) + ": the code 9 is not known") !=
          std::string::npos);
  }
}

TEST_CASE("a binary of interface 1.0 still loads, from a host of 1.0 and from a larger one",
          "[unit][plugin_host]") {
  const auto entry = kept_entry();
  struct {
    bw_host known;
    std::uint64_t appended[8];
  } later{{}, {}};
  std::memset(later.appended, 0xFF, sizeof later.appended);
  for (const std::uint32_t size : {first_host_size, static_cast<std::uint32_t>(sizeof later)}) {
    INFO("a host of " << size << " bytes");
    later.known = {size, BW_ABI_MINOR, nullptr, "host", "1.0", nullptr, formula_g_per_mol};
    const bw_bath_type* stated = nullptr;
    REQUIRE(entry(&later.known, 0, &stated) == BW_OK);
    CHECK(entry(&later.known, 1, &stated) == BW_END);
    const auto read = read_bath_type(*stated);
    INFO((read ? "" : text(read.problems())));
    REQUIRE(read);
    CHECK(read->id == "kept-1-0");
    CHECK(read->own_solids[0].slow);
    CHECK(read->additions[0].order == 3);
    const std::vector<double> levels = {60, 72};
    const bath::IndicatorView view{50, 1000, 4, 5, levels, {}, {}, {}};
    CHECK(*read->indicators[0].evaluate(view) == 72);
    CHECK(read->uses[0].rate(view)->front() == Approx(-0.5).margin(1e-12).epsilon(0));
  }
}
