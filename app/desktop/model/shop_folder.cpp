#include "shop_folder.hpp"

#include <algorithm>
#include <bathwright/shopfiles/tank_file.hpp>

namespace bathwright::desktop {

namespace fs = std::filesystem;

std::vector<fs::path> ShopFolder::policies(std::size_t tank) const {
  std::vector<fs::path> found;
  const std::string stem = files[tank].stem().string();
  std::error_code failed;
  for (const auto& entry : fs::directory_iterator(folder / "policies", failed)) {
    const std::string name = entry.path().stem().string();
    if (entry.path().extension() == ".toml" && (name == stem || name.starts_with(stem + "-")))
      found.push_back(entry.path());
  }
  std::ranges::sort(found);
  return found;
}

Result<ShopFolder> read_shop(const fs::path& folder) {
  ShopFolder shop;
  shop.folder = folder;
  std::error_code failed;
  std::vector<fs::path> candidates;
  for (const auto& entry : fs::directory_iterator(folder, failed))
    if (entry.path().extension() == ".toml") candidates.push_back(entry.path());
  if (failed)
    return Problem{Fault::bad_input, folder.string(), failed.message(), "the folder of a shop's tank files",
                   ""};
  std::vector<std::pair<bath::Tank, fs::path>> tanks;
  for (const fs::path& file : candidates) {
    auto tank = shopfiles::read_tank(file.string(), matter::StockCatalogue::built_in());
    if (tank)
      tanks.emplace_back(*std::move(tank), file);
    else
      shop.unread.push_back({file, tank.problems()});
  }
  if (tanks.empty()) {
    Problems all;
    for (const UnreadFile& one : shop.unread) all.insert(all.end(), one.problems.begin(), one.problems.end());
    if (!all.empty()) return all;
    return Problem{Fault::bad_input, folder.string(), "has no tank file", "files such as n-07.toml",
                   "Copy one from the demonstration shop and enter your tank."};
  }
  std::ranges::sort(shop.unread, {}, &UnreadFile::file);
  std::ranges::sort(tanks, [](const auto& a, const auto& b) {
    return std::pair(a.first.line, a.first.name) < std::pair(b.first.line, b.first.name);
  });
  std::vector<bath::Tank> values;
  for (auto& [tank, file] : tanks) {
    values.push_back(std::move(tank));
    shop.files.push_back(file);
  }
  shop.tanks = std::make_shared<const std::vector<bath::Tank>>(std::move(values));
  return shop;
}

}  // namespace bathwright::desktop
