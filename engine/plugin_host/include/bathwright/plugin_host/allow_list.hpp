// The plugins the user has allowed to run, by the hash of their file: plugins.allow.toml in the data folder.
#pragma once

#include <bathwright/base/result.hpp>
#include <filesystem>
#include <string>
#include <vector>

namespace bathwright::plugin_host {

struct Allowed {
  std::string sha256;
  std::string file, id, author, licence;  ///< as they were when it was allowed; only for people
};

class AllowList {
 public:
  /// A file that is not there is an empty list. Fails on one that somebody else could have changed, or that
  /// cannot be read.
  static Result<AllowList> read(const std::filesystem::path& file);

  [[nodiscard]] bool holds(const std::string& sha256) const;
  [[nodiscard]] const std::vector<Allowed>& all() const { return all_; }
  void add(Allowed plugin);  ///< in place of one with its hash
  void remove(const std::string& sha256);

  /// Replaces the file, which only the user can then read (mode 0600).
  [[nodiscard]] Outcome write(const std::filesystem::path& file) const;

 private:
  std::vector<Allowed> all_;
};

/// The file of a data folder.
[[nodiscard]] std::filesystem::path allow_list_file(const std::filesystem::path& data);

}  // namespace bathwright::plugin_host
