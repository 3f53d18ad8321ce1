// The bath types that this run of the program knows, and what became of every plugin file it saw.
#pragma once

#include <bathwright/bath/bath_type.hpp>
#include <bathwright/plugin_host/discovery.hpp>
#include <bathwright/plugin_host/probe_report.hpp>
#include <span>

namespace bathwright::plugin_host {

enum class State : std::uint8_t {
  ready,
  shadowed,     ///< sound, but an earlier folder (or file name) has a bath type with this id
  not_allowed,  ///< its hash is in no list of allowed plugins; nothing of it has run
  quarantined,  ///< the program died while loading it
  refused
};

[[nodiscard]] std::string_view name(State state);

/// Reads a .bathtype.toml file; engine/described has the one there is.
using ReadDataFile = Result<bath::BathType> (*)(const std::string& path);

/// Where bath types come from and what is known of them. An empty path is a place that is not there.
struct Places {
  std::vector<SearchFolder> folders;          ///< earlier ones win
  std::filesystem::path data;                 ///< the user's: what is allowed
  std::filesystem::path state;                ///< the user's: what is being loaded, what is in quarantine
  std::filesystem::path cache;                ///< the user's: results of probes
  std::filesystem::path probe;                ///< bathwright_probe
  std::span<const std::string_view> allowed;  ///< SHA-256 of plugins that need no permission, in hexadecimal
  ReadDataFile read_data_file = nullptr;      ///< files of data are passed over where there is none
};

/// What this program was built with: its own folders and probe, and the SHA-256 of its plugins as allowed.
/// Written in plugins/ at build time; a program that uses it links bathwright::built_in_plugins.
[[nodiscard]] Places built_in_places();

/// A bath type of a file, or a file or folder that gave none.
struct Listed {
  std::filesystem::path path;
  std::string sha256;       ///< empty when the file itself was refused
  std::string id, version;  ///< empty when nothing of it has run, or its tables were refused
  State state = State::refused;
  Problems problems;  ///< why it is not ready: every reason
  std::vector<std::string>
      notes;  ///< what the plugin had to say while loading, and what the host could not do
};

class BathTypes {
 public:
  /// Every plugin of the folders, earlier folders first. Each is copied and hashed; one that is allowed is
  /// probed in a child process, unless the cache has the result, and one without a fault is loaded. A file
  /// of data runs no code: others must not be able to write it, and that is all. One that cannot be used is
  /// listed with its problems and hinders no other.
  static BathTypes discover(const Places& places);

  [[nodiscard]] const bath::BathType* find(std::string_view id) const;  ///< nullptr if there is none
  [[nodiscard]] const std::vector<bath::BathType>& ready() const { return types_; }  ///< in the order found
  [[nodiscard]] const std::vector<Listed>& list() const { return list_; }            ///< in the order found

 private:
  /// Sound bath types of one file: ready, or shadowed by earlier ones. `listed` holds what they share.
  void take(std::vector<bath::BathType> types, const Listed& listed);

  std::vector<bath::BathType> types_;
  std::vector<Listed> list_;
};

/// One file, hashed and probed anew (the result goes into the cache) but not loaded: what to show before it
/// is allowed.
struct Examined {
  std::string sha256;
  bool built_in = false;
  ProbeReport report;
};
Result<Examined> examine(const std::filesystem::path& file, const Places& places);

/// Lets a plugin be loaded again that is in quarantine.
void release_from_quarantine(const std::string& sha256, const Places& places);

}  // namespace bathwright::plugin_host
