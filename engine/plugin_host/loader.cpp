#include <bathwright_plugin.h>
#include <dlfcn.h>

#include <bathwright/matter/formula.hpp>
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <bathwright/plugin_host/loader.hpp>
#include <exception>

#include "file_trust.hpp"

namespace bathwright::plugin_host {
namespace {

using Notes = std::vector<std::string>;
using Entry = decltype(&bw_entry_1);

constexpr std::uint32_t most_types = 64;  ///< a plugin that never ends its list is at fault
constexpr std::size_t most_notes = 64, longest_note = 1000;

void note(void* ctx, std::int32_t, const char* subject, const char* text) noexcept try {
  auto& notes = *static_cast<Notes*>(ctx);
  if (!text || notes.size() == most_notes) return;
  std::string line = subject && *subject ? std::string(subject) + ": " : std::string{};
  notes.push_back((line + text).substr(0, longest_note));
} catch (...) {  // out of memory: the note is lost
}

double formula_g_per_mol(void*, const char* formula) noexcept try {
  const auto parsed = matter::Formula::parse(formula ? formula : "");
  return parsed ? parsed->molar_mass().v : bath::not_given;
} catch (...) {
  return bath::not_given;
}

bw_host host_for(Notes& notes) {
  return {sizeof(bw_host), BW_ABI_MINOR, &notes, "Bathwright", BATHWRIGHT_VERSION, note, formula_g_per_mol};
}

Problem plugin_fault(const std::filesystem::path& file, std::string what, std::string expected = "") {
  return {Fault::inconsistent_data, file.string(), std::move(what), std::move(expected), ""};
}

/// A library that stays open.
struct Library {
  Entry entry;
};

Result<Library> open(const std::filesystem::path& file) {
  // Bound at once, so that a missing symbol shows here and not in the middle of a calculation. Never closed:
  // the copied types keep functions of the library.
  void* library = ::dlopen(std::filesystem::absolute(file).c_str(), RTLD_NOW | RTLD_LOCAL);
  if (!library)
    return Problem{Fault::bad_input, file.string(),
                   std::string("is not a library that can be loaded (") + ::dlerror() + ")",
                   "a shared object built for this machine", ""};
  const auto entry = reinterpret_cast<Entry>(::dlsym(library, "bw_entry_1"));
  if (!entry)
    return Problem{Fault::bad_input, file.string(), "is no bath-type plugin of interface version 1",
                   "an exported function bw_entry_1", "Build it with this program's bathwright_plugin.h."};
  return Library{entry};
}

/// What the plugin gives for an index; an exception is a status of its own.
struct Answer {
  bw_status status = BW_REFUSED;
  const bw_bath_type* type = nullptr;
  std::string thrown;
};

Answer ask(Entry entry, const bw_host& host, std::uint32_t index) {
  Answer answer;
  try {
    answer.status = entry(&host, index, &answer.type);
  } catch (const std::exception& e) {
    answer.thrown = std::string("an exception: ") + e.what();
  } catch (...) {
    answer.thrown = "an exception";
  }
  return answer;
}

}  // namespace

Result<LoadedPlugin> load(const std::filesystem::path& file) {
  if (Outcome trusted = may_be_run(file); !trusted) return trusted.problems();
  const auto library = open(file);
  if (!library) return library.problems();

  LoadedPlugin plugin{file, {}, {}};
  const bw_host host = host_for(plugin.notes);
  Problems problems;
  for (std::uint32_t index = 0;; ++index) {
    const Answer answer = ask(library->entry, host, index);
    if (!answer.thrown.empty())
      return plugin_fault(file, "the plugin let out " + answer.thrown, "a status (rule R1)");
    if (answer.status == BW_END) break;
    if (answer.status == BW_REFUSED) {
      Problem refused{Fault::refused, file.string(), "the plugin refuses to work", "", ""};
      for (const std::string& line : plugin.notes) refused.what += "; " + line;
      return refused;
    }
    if (answer.status != BW_OK || !answer.type)
      return plugin_fault(file,
                          "bw_entry_1 gave status " + std::to_string(answer.status) +
                              (answer.type ? "" : " and no bath type"),
                          "BW_OK with a bath type, BW_END or BW_REFUSED");
    if (index == most_types) return plugin_fault(file, "the plugin never ends its list", "BW_END");
    auto type = read_bath_type(*answer.type);
    if (type)
      plugin.types.push_back(*std::move(type));
    else
      for (Problem problem : type.problems()) {
        problem.where = file.filename().string() + ": " + problem.where;
        problems.push_back(std::move(problem));
      }
  }
  if (!problems.empty()) return problems;
  if (plugin.types.empty()) return plugin_fault(file, "the plugin has no bath type", "at least one");
  return plugin;
}

}  // namespace bathwright::plugin_host
