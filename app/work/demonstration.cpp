#include "demonstration.hpp"

#include "user_folders.hpp"

namespace bathwright::work {

namespace fs = std::filesystem;

Result<fs::path> demonstration_shop() {
  const fs::path own = data_folder() / "demonstration";
  std::error_code failed;
  if (fs::exists(own / "n-07.toml", failed)) return own;
  const fs::path program = fs::read_symlink("/proc/self/exe", failed);
  const fs::path shipped = program.parent_path().parent_path() / "share" / "bathwright" / "baths";
  if (failed || !fs::exists(shipped, failed))
    return Problem{Fault::io, shipped.string(), "the demonstration shop is not beside the program", "",
                   "Install the program whole, or open the folder of your own tank files."};
  fs::create_directories(own, failed);
  if (!failed)
    fs::copy(shipped, own, fs::copy_options::recursive | fs::copy_options::overwrite_existing, failed);
  if (failed)
    return Problem{Fault::io, own.string(), failed.message(), "room for the demonstration shop",
                   "Check the folder and the disk."};
  return own;
}

}  // namespace bathwright::work
