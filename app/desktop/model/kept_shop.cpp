#include "kept_shop.hpp"

namespace bathwright::desktop {

Result<std::shared_ptr<const work::Shop>> KeptShop::open(const work::Session& session,
                                                         const std::filesystem::path& tank_file) {
  std::error_code failed;
  const auto time = std::filesystem::last_write_time(tank_file, failed);
  if (shop_ && file_ == tank_file && time == time_) return shop_;
  auto shop = work::open_shop(session, tank_file.string());
  if (!shop) return shop.problems();
  shop_ = std::make_shared<const work::Shop>(*std::move(shop));
  file_ = tank_file;
  time_ = time;
  return shop_;
}

}  // namespace bathwright::desktop
