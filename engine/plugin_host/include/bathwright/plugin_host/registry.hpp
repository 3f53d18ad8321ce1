// The bath types that this run of the program knows, and what became of every plugin file it saw.
#pragma once

#include <bathwright/plugin_host/loader.hpp>

namespace bathwright::plugin_host {

enum class State : std::uint8_t {
  ready,
  shadowed,  ///< sound, but an earlier folder (or file name) has a bath type with this id
  refused
};

[[nodiscard]] std::string_view name(State state);

/// A bath type of a file, or a file or folder that gave none.
struct Listed {
  std::filesystem::path path;
  std::string id, version;  ///< empty when refused
  State state = State::refused;
  Problems problems;               ///< why refused, or by what shadowed
  std::vector<std::string> notes;  ///< what the plugin had to say while loading
};

/// Reads a .bathtype.toml file; engine/described has the one there is.
using ReadDataFile = Result<bath::BathType> (*)(const std::string& path);

class BathTypes {
 public:
  /// Loads every plugin of the folders, earlier folders first (discovery.hpp). A plugin that cannot be used
  /// is listed with its problems and hinders no other.
  /// A file of data is read by `read_data_file`, and passed over where there is none; others must not be
  /// able to write it either.
  static BathTypes discover(const std::vector<std::filesystem::path>& folders,
                            ReadDataFile read_data_file = nullptr);

  [[nodiscard]] const bath::BathType* find(std::string_view id) const;  ///< nullptr if there is none
  [[nodiscard]] const std::vector<bath::BathType>& ready() const { return types_; }  ///< in the order found
  [[nodiscard]] const std::vector<Listed>& list() const { return list_; }            ///< in the order found

 private:
  void take(LoadedPlugin plugin);

  std::vector<bath::BathType> types_;
  std::vector<Listed> list_;
};

}  // namespace bathwright::plugin_host
