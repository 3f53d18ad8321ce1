// The tanks of a shop: the tank files of a folder, each with its policies, in the order of the line.
#pragma once

#include <bathwright/bath/tank.hpp>
#include <filesystem>
#include <memory>

namespace bathwright::desktop {

/// A file that is no tank file as it stands.
struct UnreadFile {
  std::filesystem::path file;
  Problems problems;
};

struct ShopFolder {
  std::filesystem::path folder;
  std::vector<std::filesystem::path> files;              ///< of the tanks
  std::shared_ptr<const std::vector<bath::Tank>> tanks;  ///< as many
  std::vector<UnreadFile> unread;

  /// Files of policies/ whose name begins with that of the tank's file.
  [[nodiscard]] std::vector<std::filesystem::path> policies(std::size_t tank) const;
};

/// Fails (bad_input) where the folder is not there or has no tank file.
Result<ShopFolder> read_shop(const std::filesystem::path& folder);

}  // namespace bathwright::desktop
