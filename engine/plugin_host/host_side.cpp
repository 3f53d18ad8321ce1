#include "host_side.hpp"

#include <dlfcn.h>

#include <bathwright/matter/formula.hpp>
#include <bathwright/plugin_host/bath_type_reader.hpp>
#include <exception>

namespace bathwright::plugin_host {
namespace {

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

Problem plugin_fault(const std::string& name, std::string what, std::string expected) {
  return {Fault::inconsistent_data, name, std::move(what), std::move(expected), ""};
}

/// The loader's words without the path of the descriptor, which tells nobody anything.
std::string loaders_words(const std::string& path) {
  const char* said = ::dlerror();
  std::string words = said ? said : "no reason given";
  const std::string prefix = path + ": ";
  return words.starts_with(prefix) ? words.substr(prefix.size()) : words;
}

}  // namespace

bw_host host_for(Notes& notes) {
  return {sizeof(bw_host), BW_ABI_MINOR, &notes, "Bathwright", BATHWRIGHT_VERSION, note, formula_g_per_mol};
}

Result<Library> open_library(Descriptor memory, const std::string& name) {
  const std::string path = "/proc/self/fd/" + std::to_string(memory.get());
  void* library = ::dlopen(path.c_str(), RTLD_NOW | RTLD_LOCAL);
  if (!library)
    return Problem{Fault::bad_input, name,
                   "is not a library that can be loaded (" + loaders_words(path) + ")",
                   "a shared object built for this machine", ""};
  memory.release();
  const auto entry = reinterpret_cast<Entry>(::dlsym(library, "bw_entry_1"));
  if (!entry)
    return Problem{Fault::bad_input, name, "is no bath-type plugin of interface version 1",
                   "an exported function bw_entry_1", "Build it with this program's bathwright_plugin.h."};
  return Library{entry};
}

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

Result<std::vector<const bw_bath_type*>> stated_types(Entry entry, Notes& notes, const std::string& name) {
  const bw_host host = host_for(notes);
  std::vector<const bw_bath_type*> types;
  for (std::uint32_t index = 0;; ++index) {
    const Answer answer = ask(entry, host, index);
    if (!answer.thrown.empty())
      return plugin_fault(name, "bw_entry_1 let out " + answer.thrown, "a status (rule R1)");
    if (answer.status == BW_END) break;
    if (answer.status == BW_REFUSED) {
      Problem refused{Fault::refused, name, "the plugin refuses to work", "", ""};
      for (const std::string& line : notes) refused.what += "; " + line;
      return refused;
    }
    if (answer.status != BW_OK || !answer.type)
      return plugin_fault(name,
                          "bw_entry_1 gave status " + std::to_string(answer.status) +
                              (answer.type ? "" : " and no bath type"),
                          "BW_OK with a bath type, BW_END or BW_REFUSED");
    if (index == most_types) return plugin_fault(name, "the plugin never ends its list", "BW_END");
    types.push_back(answer.type);
  }
  if (types.empty()) return plugin_fault(name, "the plugin has no bath type", "at least one");
  return types;
}

Result<std::vector<bath::BathType>> read_types(const std::vector<const bw_bath_type*>& stated,
                                               const std::string& name) {
  std::vector<bath::BathType> types;
  Problems problems;
  for (const bw_bath_type* one : stated) {
    auto type = read_bath_type(*one);
    if (type) {
      types.push_back(*std::move(type));
      continue;
    }
    for (Problem problem : type.problems()) {
      problem.where = name + ": " + problem.where;
      problems.push_back(std::move(problem));
    }
  }
  if (!problems.empty()) return problems;
  return types;
}

}  // namespace bathwright::plugin_host
