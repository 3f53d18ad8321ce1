#include <bathwright/base/whole_file.hpp>

#include <fstream>
#include <system_error>

namespace bathwright {

Outcome write_whole(const std::filesystem::path& file, std::string_view contents) {
  std::error_code failed;
  if (file.has_parent_path()) std::filesystem::create_directories(file.parent_path(), failed);
  const std::filesystem::path part = file.string() + ".part";
  {
    std::ofstream out(part, std::ios::binary);
    out << contents;
    out.close();
    if (!out) {
      std::filesystem::remove(part, failed);
      return Problem{Fault::io, part.string(), "cannot be written", "", "Check the folder and the disk."};
    }
  }
  std::filesystem::rename(part, file, failed);
  if (failed)
    return Problem{Fault::io, file.string(), failed.message(), "", "Check the folder and its rights."};
  return Done{};
}

}  // namespace bathwright
