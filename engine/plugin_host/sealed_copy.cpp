#include "sealed_copy.hpp"

#include <fcntl.h>
#include <sodium.h>
#include <sys/mman.h>
#include <sys/stat.h>

#include <array>
#include <cerrno>
#include <system_error>
#include <vector>

namespace bathwright::plugin_host {
namespace {

Problem failed_to(const std::filesystem::path& file, const std::string& what) {
  return {Fault::io, file.string(), what + " (" + std::generic_category().message(errno) + ")", "", ""};
}

/// All bytes; fails when they are not as many as the file has been said to have.
Result<std::vector<unsigned char>> bytes_of(const Descriptor& opened, const std::filesystem::path& file) {
  struct stat status {};
  if (::fstat(opened.get(), &status) != 0) return failed_to(file, "cannot be read");
  const auto stated = static_cast<std::size_t>(status.st_size);
  std::vector<unsigned char> bytes(stated + 1);  // one more, to see it grow
  std::size_t size = 0;
  while (size < bytes.size()) {
    const ssize_t got = ::read(opened.get(), bytes.data() + size, bytes.size() - size);
    if (got == 0) break;
    if (got < 0 && errno != EINTR) return failed_to(file, "cannot be read");
    if (got > 0) size += static_cast<std::size_t>(got);
  }
  if (size != stated) return Problem{Fault::io, file.string(), "changed while it was read", "", "Try again."};
  bytes.resize(size);
  return bytes;
}

bool write_all(const Descriptor& into, const std::vector<unsigned char>& bytes) {
  for (std::size_t done = 0; done < bytes.size();) {
    const ssize_t wrote = ::write(into.get(), bytes.data() + done, bytes.size() - done);
    if (wrote < 0 && errno != EINTR) return false;
    if (wrote > 0) done += static_cast<std::size_t>(wrote);
  }
  return true;
}

/// SHA-256 of what the memory holds now; empty when it cannot be mapped.
std::string sha256_of(const Descriptor& memory, std::size_t size) {
  void* mapped = ::mmap(nullptr, size, PROT_READ, MAP_PRIVATE, memory.get(), 0);
  if (mapped == MAP_FAILED) return {};
  std::array<unsigned char, crypto_hash_sha256_BYTES> hash{};
  crypto_hash_sha256(hash.data(), static_cast<const unsigned char*>(mapped), size);
  ::munmap(mapped, size);
  std::string text(2 * hash.size() + 1, '\0');  // sodium ends the text with a zero
  sodium_bin2hex(text.data(), text.size(), hash.data(), hash.size());
  text.pop_back();
  return text;
}

}  // namespace

Result<SealedCopy> sealed_copy(const std::filesystem::path& file, Above above) {
  const auto opened = open_trusted(file, largest_plugin_bytes, above);
  if (!opened) return opened.problems();
  const auto bytes = bytes_of(*opened, file);
  if (!bytes) return bytes.problems();
  if (bytes->empty()) return Problem{Fault::bad_input, file.string(), "is empty", "a shared object", ""};

  Descriptor memory(::memfd_create("bath type", MFD_CLOEXEC | MFD_ALLOW_SEALING));
  if (!memory || !write_all(memory, *bytes)) return failed_to(file, "cannot be copied into memory");
  if (::fcntl(memory.get(), F_ADD_SEALS, F_SEAL_WRITE | F_SEAL_GROW | F_SEAL_SHRINK | F_SEAL_SEAL) != 0)
    return failed_to(file, "the copy in memory cannot be sealed");
  std::string sha256 = sha256_of(memory, bytes->size());
  if (sha256.empty()) return failed_to(file, "the copy in memory cannot be read");
  return SealedCopy{file, std::move(memory), std::move(sha256)};
}

std::string path_of(const Descriptor& descriptor) {
  return "/proc/self/fd/" + std::to_string(descriptor.get());
}

}  // namespace bathwright::plugin_host
