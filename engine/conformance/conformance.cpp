#include <algorithm>
#include <bathwright/conformance/conformance.hpp>
#include <fstream>
#include <iterator>
#include <span>

#include "binary.hpp"
#include "docs_page.hpp"
#include "examples_file.hpp"
#include "replay.hpp"

namespace bathwright::conformance {
namespace {

namespace fs = std::filesystem;

constexpr std::string_view placeholder = "placeholder";  // key of a source that is still to be found

/// The check for a paper that is not there.
Check missing(Group group, const fs::path& paper, Strictness strictness) {
  Check check{group, paper.filename().string() + " is there"};
  const std::string place = "none at " + paper.string();
  if (strictness.release)
    check.problems.push_back({Fault::inconsistent_data, paper.string(), "is not there", "for a release",
                              "plugins/template shows what belongs into it."});
  else
    check.skipped = place;
  return check;
}

void append(std::vector<Check>& checks, std::vector<Check> more) {
  std::ranges::move(more, std::back_inserter(checks));
}

Check sources_found(const bath::BathType& type) {
  Check check{Group::tables, "every source is a real one"};
  for (const bath::Source& source : type.sources)
    if (source.key == placeholder)
      check.problems.push_back({Fault::inconsistent_data, type.id + " sources",
                                "the source '" + source.key + "' stands for one that is still to be found",
                                "authors, title, publisher or journal, volume, page, table",
                                "Name it and give the source a key of its own."});
  return check;
}

std::vector<Check> examples(const bath::BathType& type, const fs::path& file, Strictness strictness) {
  if (!fs::exists(file)) return {missing(Group::examples, file, strictness)};
  const auto read = read_examples(file.string());
  if (!read) return {{Group::examples, "examples.toml can be read", "", read.problems()}};
  return replay(type, *read);
}

std::string content_of(const fs::path& file) {
  std::ifstream in(file, std::ios::binary);
  return {std::istreambuf_iterator<char>(in), {}};
}

/// "entry: past the end it gives BW_END" in its group; what is of the process as a whole goes with the
/// functions.
Check from_probe(const plugin_host::Check& probed) {
  for (const Group group : {Group::file, Group::tables, Group::entry, Group::functions})
    if (const std::string head = std::string(name(group)) + ": "; probed.name.starts_with(head))
      return {group, probed.name.substr(head.size()), "", probed.problems};
  return {Group::functions, probed.name, "", probed.problems};
}

std::vector<Check> docs(const bath::BathType& type, const fs::path& file, Strictness strictness) {
  if (!fs::exists(file)) return {missing(Group::docs, file, strictness)};
  return check_page(type, file.string(), content_of(file));
}

}  // namespace

std::string_view name(Group group) {
  constexpr std::string_view names[] = {"file", "tables", "entry", "functions", "examples", "docs"};
  return names[static_cast<std::size_t>(group)];
}

fs::path papers_of(const fs::path& file, const std::string& id) { return file.parent_path() / id; }

std::vector<Check> check_code(const fs::path& file, const plugin_host::ProbeReport& probed) {
  std::vector<Check> checks;
  std::ranges::transform(probed.checks, std::back_inserter(checks), from_probe);
  const std::string content = content_of(file);
  const auto object = plugin_host::read_shared_object(std::as_bytes(std::span(content)));
  // What is no library has failed in the probe.
  if (object) append(checks, check_shared_object(*object, file.filename().string()));
  std::ranges::stable_sort(checks, {}, &Check::group);
  return checks;
}

std::vector<Check> check_papers(const bath::BathType& type, const fs::path& file, Strictness strictness) {
  const fs::path folder = papers_of(file, type.id);
  std::vector<Check> checks;
  if (strictness.release) checks.push_back(sources_found(type));
  append(checks, examples(type, folder / "examples.toml", strictness));
  append(checks, docs(type, folder / "README.md", strictness));
  return checks;
}

}  // namespace bathwright::conformance
