// A tank's shop that stays open from question to question, until its file is changed.
#pragma once

#include <filesystem>
#include <memory>

#include "work/shop.hpp"

namespace bathwright::desktop {

class KeptShop {
 public:
  /// The same as last time while neither the tank nor its file has changed. Fails as work::open_shop.
  Result<std::shared_ptr<const work::Shop>> open(const work::Session& session,
                                                 const std::filesystem::path& tank_file);

 private:
  std::filesystem::path file_;
  std::filesystem::file_time_type time_{};
  std::shared_ptr<const work::Shop> shop_;
};

}  // namespace bathwright::desktop
