#include "recording_disk.hpp"

#include <unistd.h>

#include <new>
#include <stdexcept>
#include <string_view>

namespace faults {
namespace {

using Kind = DiskEvent::Kind;
using OpenDirectory = int (*)(const char*, int*);

/// SQLite calls back with plain functions, so what they need stands here while a RecordingDisk lives.
std::vector<DiskEvent>* recorded = nullptr;
sqlite3_vfs* system_vfs = nullptr;
OpenDirectory open_directory = nullptr;

std::string name_of(const char* path) {
  const std::string_view whole = path;
  return std::string(whole.substr(whole.rfind('/') + 1));
}

void record(DiskEvent event) { recorded->push_back(std::move(event)); }

/// SQLite's handle of an open file, as C has it: our part, then the system's own handle in the same storage.
struct File {
  sqlite3_file base;
  const char* path;  ///< lives as long as the file is open (sqlite3_vfs::xOpen); null: a file without a name
};

sqlite3_file* system_file(sqlite3_file* file) {
  return reinterpret_cast<sqlite3_file*>(reinterpret_cast<File*>(file) + 1);
}
const char* path_of(sqlite3_file* file) { return reinterpret_cast<File*>(file)->path; }

template <auto Method, class... Arguments>
int pass(sqlite3_file* file, Arguments... arguments) {
  sqlite3_file* const real = system_file(file);
  return (real->pMethods->*Method)(real, arguments...);
}

int write(sqlite3_file* file, const void* bytes, int size, sqlite3_int64 offset) {
  const int code = pass<&sqlite3_io_methods::xWrite>(file, bytes, size, offset);
  if (code == SQLITE_OK && path_of(file))
    record({Kind::write, name_of(path_of(file)), offset,
            std::string(static_cast<const char*>(bytes), static_cast<std::size_t>(size))});
  return code;
}

int truncate(sqlite3_file* file, sqlite3_int64 size) {
  const int code = pass<&sqlite3_io_methods::xTruncate>(file, size);
  if (code == SQLITE_OK && path_of(file)) record({Kind::truncate, name_of(path_of(file)), size});
  return code;
}

int sync(sqlite3_file* file, int flags) {
  // The file is on the disk before its folder is, as in the system's own layer.
  if (path_of(file)) record({Kind::sync, name_of(path_of(file))});
  return pass<&sqlite3_io_methods::xSync>(file, flags);
}

/// Called by the system's own layer where it is about to sync a folder.
int open_directory_to_sync(const char* path, int* descriptor) {
  record({Kind::sync_folder});
  return open_directory(path, descriptor);
}

const sqlite3_io_methods methods{
    .iVersion = 2,  // shared memory, but no memory mapping: every change comes through xWrite
    .xClose = pass<&sqlite3_io_methods::xClose>,
    .xRead = pass<&sqlite3_io_methods::xRead, void*, int, sqlite3_int64>,
    .xWrite = write,
    .xTruncate = truncate,
    .xSync = sync,
    .xFileSize = pass<&sqlite3_io_methods::xFileSize, sqlite3_int64*>,
    .xLock = pass<&sqlite3_io_methods::xLock, int>,
    .xUnlock = pass<&sqlite3_io_methods::xUnlock, int>,
    .xCheckReservedLock = pass<&sqlite3_io_methods::xCheckReservedLock, int*>,
    .xFileControl = pass<&sqlite3_io_methods::xFileControl, int, void*>,
    .xSectorSize = pass<&sqlite3_io_methods::xSectorSize>,
    .xDeviceCharacteristics = pass<&sqlite3_io_methods::xDeviceCharacteristics>,
    .xShmMap = pass<&sqlite3_io_methods::xShmMap, int, int, int, void volatile**>,
    .xShmLock = pass<&sqlite3_io_methods::xShmLock, int, int, int>,
    .xShmBarrier = [](sqlite3_file* file) { system_file(file)->pMethods->xShmBarrier(system_file(file)); },
    .xShmUnmap = pass<&sqlite3_io_methods::xShmUnmap, int>,
    .xFetch = nullptr,
    .xUnfetch = nullptr,
};

int open(sqlite3_vfs*, const char* path, sqlite3_file* file, int flags, int* flags_out) {
  const bool new_name = path && access(path, F_OK) != 0;
  auto* const ours = new (file) File{{nullptr}, path};
  const int code = system_vfs->xOpen(system_vfs, path, system_file(file), flags, flags_out);
  if (system_file(file)->pMethods) ours->base.pMethods = &methods;
  if (code == SQLITE_OK && new_name && access(path, F_OK) == 0) record({Kind::create, name_of(path)});
  return code;
}

int remove(sqlite3_vfs*, const char* path, int sync_folder) {
  const bool there = access(path, F_OK) == 0;
  // Recorded first: the folder is synced after the name has left it.
  if (there) record({Kind::remove, name_of(path)});
  return system_vfs->xDelete(system_vfs, path, sync_folder);
}

/// The system's own VFS in all else; its functions know their object by pAppData and sqlite3_vfs::szOsFile.
sqlite3_vfs recording_vfs;

constexpr const char* open_directory_call = "openDirectory";

}  // namespace

RecordingDisk::RecordingDisk() {
  if (recorded) throw std::runtime_error("another recording disk lives");
  system_vfs = sqlite3_vfs_find("unix");
  if (!system_vfs) throw std::runtime_error("SQLite has no VFS \"unix\"");
  open_directory =
      reinterpret_cast<OpenDirectory>(system_vfs->xGetSystemCall(system_vfs, open_directory_call));
  recording_vfs = *system_vfs;
  recording_vfs.zName = "recording";
  recording_vfs.pNext = nullptr;
  recording_vfs.szOsFile += static_cast<int>(sizeof(File));
  recording_vfs.xOpen = open;
  recording_vfs.xDelete = remove;
  recorded = &events_;
  if (system_vfs->xSetSystemCall(system_vfs, open_directory_call,
                                 reinterpret_cast<sqlite3_syscall_ptr>(open_directory_to_sync)) !=
          SQLITE_OK ||
      sqlite3_vfs_register(&recording_vfs, 1) != SQLITE_OK)
    throw std::runtime_error("SQLite takes no recording VFS");
}

RecordingDisk::~RecordingDisk() {
  sqlite3_vfs_unregister(&recording_vfs);
  sqlite3_vfs_register(system_vfs, 1);
  system_vfs->xSetSystemCall(system_vfs, open_directory_call, nullptr);  // null: the original again
  recorded = nullptr;
}

}  // namespace faults
