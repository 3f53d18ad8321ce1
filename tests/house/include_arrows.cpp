#include "include_arrows.hpp"

#include <algorithm>
#include <fstream>
#include <iterator>
#include <map>
#include <regex>
#include <set>
#include <sstream>

namespace house {
namespace {

namespace fs = std::filesystem;

struct Include {
  bool quoted;
  std::string path;
};

struct Line {
  std::string where;  ///< "engine/units/read.cpp:12"
  std::string code;   ///< without its // comment
};

/// Where a source lives, and so which rules hold for it.
struct Home {
  fs::path folder;  ///< relative to the root: engine/units, app, plugins/watts-nickel
  bool is_engine, is_plugin;
};

std::string read_file(const fs::path& file) {
  std::ifstream in(file);
  return {std::istreambuf_iterator<char>(in), {}};
}

std::vector<std::string> words(const std::string& text) {
  std::istringstream in(text);
  return {std::istream_iterator<std::string>(in), {}};
}

/// The text of a CMake file's first `command(...)`, without comments; empty if there is none.
std::string arguments_of(const std::string& command, const fs::path& cmake_file) {
  const std::string text = std::regex_replace(read_file(cmake_file), std::regex("#[^\n]*"), "");
  std::smatch found;
  return std::regex_search(text, found, std::regex(command + "\\s*\\(([^)]*)\\)")) ? found[1].str() : "";
}

/// What `include` names after `#include`, if the line is one.
bool read_include(const std::string& code, Include& include) {
  static const std::regex pattern(R"(^\s*#\s*include\s*([<"])([^>"]+)[>"])");
  std::smatch found;
  if (!std::regex_search(code, found, pattern)) return false;
  include = {found[1] == "\"", found[2]};
  return true;
}

/// <vector>, <cmath>: no folder and no suffix. C sources also use the headers of C11.
bool is_standard(const std::string& header) {
  static const std::set<std::string> c_headers = {
      "assert.h",  "ctype.h",  "errno.h",  "float.h", "inttypes.h", "limits.h", "math.h", "stdarg.h",
      "stdbool.h", "stddef.h", "stdint.h", "stdio.h", "stdlib.h",   "string.h", "time.h"};
  return header.find_first_of("/.") == std::string::npos || c_headers.count(header) > 0;
}

/// Both relative to the same folder and in normal form.
bool is_inside(const fs::path& file, const fs::path& folder) {
  return *file.lexically_relative(folder).begin() != "..";
}

/// "units" of "bathwright/units/read.hpp"; empty for any other header.
std::string engine_part(const std::string& header) {
  static const std::regex pattern("^bathwright/([^/]+)/");
  std::smatch found;
  return std::regex_search(header, found, pattern) ? found[1].str() : "";
}

bool prints(const std::string& code) {
  static const std::regex pattern(
      R"(\bstd::(cout|cerr|clog|print(ln)?)\b|\b(v?f?printf|f?puts|putchar)\s*\(|<iostream>)");
  return std::regex_search(code, pattern);
}

class Inspector {
 public:
  explicit Inspector(fs::path root) : root_(std::move(root)) { read_parts(); }

  Inspection run() {
    for (const std::string& part : parts_) read_folder({fs::path("engine") / part, true, false});
    read_folder({"app", false, false});
    if (fs::exists(root_ / "plugins"))
      for (const auto& entry : fs::directory_iterator(root_ / "plugins"))
        if (entry.is_directory()) read_folder({fs::path("plugins") / entry.path().filename(), false, true});
    std::sort(result_.faults.begin(), result_.faults.end());
    return std::move(result_);
  }

 private:
  void fault(const std::string& where, const std::string& what) {
    result_.faults.push_back(where + ": " + what);
  }

  bool is_above(const std::string& part, const std::string& other) const {
    const auto place = std::find(parts_.begin(), parts_.end(), part);
    return std::find(parts_.begin(), place, other) != place;
  }

  void read_parts() {
    const std::string list = "engine/CMakeLists.txt";
    parts_ = words(arguments_of("foreach", root_ / list));
    if (parts_.empty()) return fault(list, "no foreach(part ...) lists the parts");
    parts_.erase(parts_.begin());  // the loop's variable
    for (const std::string& part : parts_) {
      const std::string file = "engine/" + part + "/CMakeLists.txt";
      const std::string uses = arguments_of("bathwright_part", root_ / file);
      std::smatch found;
      reach_[part] = {part};
      if (!std::regex_search(uses, found, std::regex(R"(\bUSES\b([^A-Z]*))"))) continue;
      for (const std::string& used : words(found[1])) {
        if (!is_above(part, used)) fault(file, "USES " + used + ", which does not stand above " + part);
        reach_[part].insert(reach_[used].begin(), reach_[used].end());
      }
    }
  }

  void read_folder(const Home& home) {
    static const std::set<std::string> suffixes = {".c", ".h", ".cpp", ".hpp"};
    if (!fs::exists(root_ / home.folder)) return fault(home.folder, "no such folder");
    for (const auto& entry : fs::recursive_directory_iterator(root_ / home.folder))
      if (suffixes.count(entry.path().extension())) read_source(home, fs::relative(entry.path(), root_));
  }

  void read_source(const Home& home, const fs::path& file) {
    ++result_.sources_read;
    std::ifstream in(root_ / file);
    std::string text;
    for (int number = 1; std::getline(in, text); ++number) {
      const Line line{file.string() + ":" + std::to_string(number), text.substr(0, text.find("//"))};
      if (home.is_engine && prints(line.code)) fault(line.where, "the engine prints nothing");
      Include include;
      if (read_include(line.code, include)) check(home, file, line, include);
    }
  }

  void check(const Home& home, const fs::path& file, const Line& line, const Include& include) {
    if (include.quoted) {
      const fs::path target = (file.parent_path() / include.path).lexically_normal();
      if (!is_inside(target, home.folder))
        return fault(line.where, include.path + " leaves " + home.folder.string());
      if (fs::exists(root_ / target)) return;  // otherwise the compiler goes on as with <...>
    }
    const std::string used = engine_part(include.path);
    const bool is_library =
        !is_standard(include.path) && used.empty() && include.path != "bathwright_plugin.h";
    if (home.is_plugin && (is_library || !used.empty()))
      fault(line.where,
            "a plugin sees only bathwright_plugin.h and the standard library, not " + include.path);
    if (!home.is_engine) return;
    const std::string part = home.folder.filename();
    if (!used.empty() && used != part && !is_above(part, used))
      fault(line.where, part + " includes " + include.path + ", but " + used + " does not stand above it");
    else if (!used.empty() && !reach_[part].count(used))
      fault(line.where, part + " includes " + include.path + ", but its USES do not reach " + used);
    if (is_library && is_inside(file, home.folder / "include"))
      fault(line.where, "a public header names the library " + include.path);
  }

  fs::path root_;
  std::vector<std::string> parts_;                      ///< in the order of the arrows
  std::map<std::string, std::set<std::string>> reach_;  ///< a part, itself and all that its USES lead to
  Inspection result_;
};

}  // namespace

Inspection inspect_includes(const fs::path& root) { return Inspector(root).run(); }

}  // namespace house
