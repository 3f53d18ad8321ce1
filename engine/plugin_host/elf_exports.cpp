#include "elf_exports.hpp"

#include <elf.h>
#include <link.h>

#include <cstring>
#include <optional>

namespace bathwright::plugin_host {
namespace {

/// The `index`-th T from `offset` on; nothing where it lies outside the file.
template <class T>
std::optional<T> at(std::span<const std::byte> file, std::size_t offset, std::size_t index = 0) {
  if (offset > file.size() || index >= (file.size() - offset) / sizeof(T)) return {};
  T value;
  std::memcpy(&value, file.data() + offset + index * sizeof(T), sizeof(T));
  return value;
}

std::optional<std::string> text_at(std::span<const std::byte> file, std::size_t offset) {
  if (offset >= file.size()) return {};
  const auto* first = reinterpret_cast<const char*>(file.data()) + offset;
  const std::size_t length = ::strnlen(first, file.size() - offset);
  if (length == file.size() - offset) return {};
  return std::string(first, length);
}

bool is_exported(const ElfW(Sym) & symbol) {
  const unsigned binding = symbol.st_info >> 4u,
                 visibility = symbol.st_other & 3u;  // the same in 32 and 64 bit
  return symbol.st_shndx != SHN_UNDEF && binding != STB_LOCAL &&
         (visibility == STV_DEFAULT || visibility == STV_PROTECTED);
}

Problem no_library() {
  return {Fault::bad_input, "", "has no table of dynamic symbols", "a shared object built for this machine",
          ""};
}

}  // namespace

Result<std::vector<std::string>> exported_symbols(std::span<const std::byte> file) {
  const auto head = at<ElfW(Ehdr)>(file, 0);
  constexpr unsigned char word = sizeof(void*) == 8 ? ELFCLASS64 : ELFCLASS32;
  if (!head || std::memcmp(head->e_ident, ELFMAG, SELFMAG) != 0 || head->e_ident[EI_CLASS] != word)
    return no_library();
  for (std::size_t i = 0; i < head->e_shnum; ++i) {
    const auto section = at<ElfW(Shdr)>(file, head->e_shoff, i);
    if (!section) return no_library();
    if (section->sh_type != SHT_DYNSYM) continue;
    const auto names = at<ElfW(Shdr)>(file, head->e_shoff, section->sh_link);
    if (!names) return no_library();
    std::vector<std::string> exported;
    for (std::size_t s = 0; s < section->sh_size / sizeof(ElfW(Sym)); ++s) {
      const auto symbol = at<ElfW(Sym)>(file, section->sh_offset, s);
      if (!symbol) return no_library();
      if (!is_exported(*symbol)) continue;
      const auto name = text_at(file, names->sh_offset + symbol->st_name);
      if (!name) return no_library();
      exported.push_back(*name);
    }
    return exported;
  }
  return no_library();
}

}  // namespace bathwright::plugin_host
