#include <gelf.h>

#include <bathwright/plugin_host/shared_object.hpp>
#include <memory>

namespace bathwright::plugin_host {
namespace {

using Handle = std::unique_ptr<Elf, decltype([](Elf* elf) { ::elf_end(elf); })>;

/// Whether the table could be read to its end.
bool read_symbols(Elf* elf, Elf_Scn* section, const GElf_Shdr& head, SharedObject& into) {
  Elf_Data* data = ::elf_getdata(section, nullptr);
  if (!data || head.sh_entsize == 0) return false;
  for (int i = 1; i < static_cast<int>(head.sh_size / head.sh_entsize); ++i) {
    GElf_Sym symbol;
    if (!::gelf_getsym(data, i, &symbol)) return false;
    const char* name = ::elf_strptr(elf, head.sh_link, symbol.st_name);
    if (!name) return false;
    if (GELF_ST_BIND(symbol.st_info) == STB_LOCAL) continue;
    (symbol.st_shndx == SHN_UNDEF ? into.imported : into.exported).emplace_back(name);
  }
  return true;
}

void read_dynamic(Elf_Scn* section, const GElf_Shdr& head, SharedObject& into) {
  Elf_Data* data = ::elf_getdata(section, nullptr);
  if (!data || head.sh_entsize == 0) return;
  for (int i = 0; i < static_cast<int>(head.sh_size / head.sh_entsize); ++i) {
    GElf_Dyn entry;
    if (!::gelf_getdyn(data, i, &entry)) return;
    const auto has = [&](GElf_Xword flag) { return (entry.d_un.d_val & flag) != 0; };
    if (entry.d_tag == DT_TEXTREL || (entry.d_tag == DT_FLAGS && has(DF_TEXTREL)))
      into.text_relocations = true;
    if (entry.d_tag == DT_BIND_NOW || (entry.d_tag == DT_FLAGS && has(DF_BIND_NOW)) ||
        (entry.d_tag == DT_FLAGS_1 && has(DF_1_NOW)))
      into.bound_at_once = true;
  }
}

}  // namespace

Result<SharedObject> read_shared_object(std::span<const std::byte> file) {
  const Problem no_library{Fault::bad_input, "", "has no table of dynamic symbols",
                           "a shared object built for this machine", ""};
  ::elf_version(EV_CURRENT);
  // libelf takes memory that it could write to, and does not where it only reads.
  const Handle elf(::elf_memory(reinterpret_cast<char*>(const_cast<std::byte*>(file.data())), file.size()));
  constexpr int word = sizeof(void*) == 8 ? ELFCLASS64 : ELFCLASS32;
  if (!elf || ::elf_kind(elf.get()) != ELF_K_ELF || ::gelf_getclass(elf.get()) != word) return no_library;
  SharedObject object;
  bool has_symbols = false;
  for (Elf_Scn* section = nullptr; (section = ::elf_nextscn(elf.get(), section));) {
    GElf_Shdr head;
    if (!::gelf_getshdr(section, &head)) return no_library;
    if (head.sh_type == SHT_DYNSYM) has_symbols = read_symbols(elf.get(), section, head, object);
    if (head.sh_type == SHT_DYNAMIC) read_dynamic(section, head, object);
  }
  if (!has_symbols) return no_library;
  return object;
}

}  // namespace bathwright::plugin_host
