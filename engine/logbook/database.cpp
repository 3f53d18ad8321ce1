#include "database.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <cerrno>
#include <cstring>
#include <utility>

#include "wal_frames.hpp"

namespace bathwright::logbook {

namespace fs = std::filesystem;

namespace {

Problem io(const std::string& where, std::string what, std::string try_this) {
  return {Fault::io, where, std::move(what), "", std::move(try_this)};
}

fs::path folder_of(const fs::path& path) {
  return path.has_parent_path() ? path.parent_path() : fs::path(".");
}

/// SQLite says little about paths it cannot open, so the likely mistakes are looked for first.
std::optional<Problem> problem_with_path(const fs::path& path, OpenMode mode) {
  const fs::path folder = folder_of(path);
  std::error_code error;
  const fs::file_status folder_status = fs::status(folder, error);
  if (folder_status.type() == fs::file_type::not_found)
    return io(path.string(), "the folder " + folder.string() + " does not exist",
              "make the folder, or check the path");
  if (fs::exists(folder_status) && !fs::is_directory(folder_status))
    return io(path.string(), folder.string() + " is a file, not a folder", "check the path");
  if (access(folder.c_str(), X_OK) != 0)
    return io(path.string(), "you may not look into the folder " + folder.string(),
              "ask for access to it, or name a log elsewhere");
  const fs::file_status status = fs::status(path, error);
  if (fs::is_directory(status))
    return io(path.string(), "this is a folder, not a logbook file", "name the file in it");
  if (status.type() == fs::file_type::not_found && mode != OpenMode::create)
    return io(path.string(), "there is no such file", "check the path, or start a new logbook there");
  return std::nullopt;
}

/// What SQLite last complained about. It quotes the file, which may hold anything where it is damaged.
std::string complaint(sqlite3* connection) {
  std::string words = sqlite3_errmsg(connection);
  std::replace_if(
      words.begin(), words.end(), [](char c) { return c < ' ' || c > '~'; }, '?');
  return words;
}

Problem damaged(const std::string& name, std::string_view how) {
  return {
      Fault::inconsistent_data, name, fmt::format("the file is damaged ({})", how), "",
      "keep a copy of it untouched, with the -wal file beside it; check the disk, and go on with the last good "
      "backup and what the damaged log still holds"};
}

/// SQLite would take the log for one that ends where its write-ahead log is damaged, and write on from there.
std::optional<Problem> problem_with_wal(const fs::path& path) {
  const auto damage = [&] { return damaged_frame(read_wal(wal_bytes(path))); };
  const auto frame = damage();
  // Another program may be writing. What it had half written before has changed by now; damage stays.
  if (!frame || damage() != frame) return std::nullopt;
  return damaged(path.string(), *frame == 0 ? "the head of its -wal file"
                                            : fmt::format("frame {} of its -wal file", *frame));
}

bool writable(const fs::path& path) { return access(path.c_str(), W_OK) == 0; }

/// SQLite reads a log in WAL mode through helper files beside it. A reader that may not write there can still
/// read a log that was closed properly (no -wal file: all is in the main file), as it stands at this moment.
bool must_read_as_it_stands(const fs::path& path) {
  std::error_code error;
  const bool closed = !fs::exists(fs::path(path.string() + "-wal"), error);
  return closed && !(writable(path) && writable(folder_of(path)));
}

std::string file_uri(const fs::path& path, std::string_view query) {
  std::string uri = "file:";
  for (const char c : fs::absolute(path).string())
    uri += c == '%' || c == '?' || c == '#' ? fmt::format("%{:02X}", static_cast<unsigned char>(c))
                                            : std::string(1, c);
  return uri.append("?").append(query);
}

/// SQLITE_FCNTL_FILE_POINTER: the main file; SQLITE_FCNTL_JOURNAL_POINTER: the write-ahead log or rollback
/// journal. Null while it is not open.
sqlite3_file* open_file(sqlite3* connection, int which) {
  sqlite3_file* file = nullptr;
  sqlite3_file_control(connection, "main", which, &file);
  return file && file->pMethods ? file : nullptr;
}

/// After a failed write: whether the disk, a quota or a limit on the file's size was the cause. SQLite itself
/// tells only a write to a full disk from other failures, and keeps no system error for a failed COMMIT but
/// in its files.
bool no_space(sqlite3* connection) {
  const auto means_no_space = [](int error) { return error == ENOSPC || error == EDQUOT || error == EFBIG; };
  if (means_no_space(sqlite3_system_errno(connection))) return true;
  for (const int which : {SQLITE_FCNTL_FILE_POINTER, SQLITE_FCNTL_JOURNAL_POINTER}) {
    int error = 0;
    if (sqlite3_file* file = open_file(connection, which))
      file->pMethods->xFileControl(file, SQLITE_FCNTL_LAST_ERRNO, &error);
    if (means_no_space(error)) return true;
  }
  return false;
}

/// Whether what is open is still what the next program will find under the log's name. The system lets a file
/// be written that was moved or removed; what goes there is lost. A database in memory has no name.
bool still_in_place(sqlite3* connection) {
  const char* name = sqlite3_db_filename(connection, "main");
  if (!name || *name == '\0') return true;
  int moved = 0;
  sqlite3_file_control(connection, "main", SQLITE_FCNTL_HAS_MOVED, &moved);
  if (moved != 0) return false;
  return !open_file(connection, SQLITE_FCNTL_JOURNAL_POINTER) ||
         access(sqlite3_filename_wal(name), F_OK) == 0 || access(sqlite3_filename_journal(name), F_OK) == 0;
}

}  // namespace

Statement::Statement(sqlite3* connection, std::string_view sql) {
  sqlite3_stmt* handle = nullptr;
  code_ = sqlite3_prepare_v2(connection, sql.data(), static_cast<int>(sql.size()), &handle, nullptr);
  handle_.reset(handle);
}

Statement& Statement::bind(int parameter, std::string_view text) {
  if (handle_) {
    // A null pointer would bind NULL instead of an empty text.
    const char* data = text.empty() ? "" : text.data();
    sqlite3_bind_text(handle_.get(), parameter, data, static_cast<int>(text.size()), SQLITE_TRANSIENT);
  }
  return *this;
}

Statement& Statement::bind(int parameter, std::optional<std::int64_t> number) {
  if (handle_ && number) sqlite3_bind_int64(handle_.get(), parameter, *number);
  return *this;
}

bool Statement::step() {
  if (handle_) code_ = sqlite3_step(handle_.get());
  return code_ == SQLITE_ROW;
}

std::int64_t Statement::integer(int column) const { return sqlite3_column_int64(handle_.get(), column); }

std::optional<std::int64_t> Statement::optional_integer(int column) const {
  if (sqlite3_column_type(handle_.get(), column) == SQLITE_NULL) return std::nullopt;
  return integer(column);
}

std::string_view Statement::view(int column) const {
  const auto* data = reinterpret_cast<const char*>(sqlite3_column_text(handle_.get(), column));
  if (!data) return {};
  return {data, static_cast<std::size_t>(sqlite3_column_bytes(handle_.get(), column))};
}

Database::Database(sqlite3* connection, std::string name, std::chrono::milliseconds wait)
    : connection_(connection), name_(std::move(name)), wait_(wait) {}

Result<Database> Database::open(const fs::path& path, OpenMode mode, std::chrono::milliseconds wait) {
  if (auto problem = problem_with_path(path, mode)) return *std::move(problem);
  if (auto problem = problem_with_wal(path)) return *std::move(problem);

  const bool as_it_stands = mode == OpenMode::read_only && must_read_as_it_stands(path);
  // A reader, too, asks SQLite for write access where it has it: only then are the helper files cleared away
  // at the end. query_only keeps it from changing the log.
  const int flags = SQLITE_OPEN_URI | SQLITE_OPEN_EXRESCODE |
                    (as_it_stands ? SQLITE_OPEN_READONLY : SQLITE_OPEN_READWRITE) |
                    (mode == OpenMode::create ? SQLITE_OPEN_CREATE : 0);
  sqlite3* connection = nullptr;
  const int code =
      sqlite3_open_v2(file_uri(path, as_it_stands ? "immutable=1" : "").c_str(), &connection, flags, nullptr);
  Database database(connection, path.string(), wait);
  if (code != SQLITE_OK) return database.problem();

  if (mode != OpenMode::read_only && sqlite3_db_readonly(connection, "main") == 1)
    return io(path.string(), "the file may be read but not written",
              "ask for write permission, or open it for reading only");
  sqlite3_busy_timeout(connection, static_cast<int>(wait.count()));
  if (auto set = database.execute(
          "PRAGMA synchronous = FULL; PRAGMA foreign_keys = ON; PRAGMA trusted_schema = OFF; PRAGMA cache_size = -32768");
      !set)
    return set.problems();
  if (mode == OpenMode::read_only)
    if (auto set = database.execute("PRAGMA query_only = ON"); !set) return set.problems();
  return database;
}

Database Database::in_memory() {
  sqlite3* connection = nullptr;
  sqlite3_open(":memory:", &connection);
  return Database(connection, ":memory:", {});
}

Result<Database> Database::copied_to_memory() const {
  Database copy = in_memory();
  copy.name_ = name_;
  constexpr int all_pages = -1;
  sqlite3_backup* backup = sqlite3_backup_init(copy.connection_.get(), "main", connection_.get(), "main");
  if (!backup) return copy.problem();
  sqlite3_backup_step(backup, all_pages);
  if (sqlite3_backup_finish(backup) != SQLITE_OK) return copy.problem();
  return copy;
}

Database Database::on_image(std::string& image) {
  Database database = in_memory();
  const auto size = static_cast<sqlite3_int64>(image.size());
  sqlite3_deserialize(database.connection_.get(), "main", reinterpret_cast<unsigned char*>(image.data()),
                      size, size, SQLITE_DESERIALIZE_READONLY);
  return database;
}

std::string Database::image() const {
  sqlite3_int64 size = 0;
  unsigned char* bytes = sqlite3_serialize(connection_.get(), "main", &size, 0);
  if (!bytes) return {};
  std::string image(reinterpret_cast<const char*>(bytes), static_cast<std::size_t>(size));
  sqlite3_free(bytes);
  return image;
}

Outcome Database::execute(const char* sql) const {
  if (sqlite3_exec(connection_.get(), sql, nullptr, nullptr, nullptr) != SQLITE_OK) return problem();
  return Done{};
}

Problem Database::problem() const {
  const int extended = sqlite3_extended_errcode(connection_.get());
  const int system = sqlite3_system_errno(connection_.get());
  if (extended == SQLITE_FULL || ((extended & 0xFF) == SQLITE_IOERR && no_space(connection_.get())))
    return io(name_, "the disk is full; nothing was logged", "free some space, then log the entry again");
  switch (extended & 0xFF) {
    case SQLITE_NOTADB:
      return {Fault::bad_input, name_, "this file is not a logbook", "a logbook file", "check the path"};
    case SQLITE_CORRUPT:
      return damaged(name_, complaint(connection_.get()));
    case SQLITE_BUSY:
    case SQLITE_LOCKED:
      return io(name_,
                fmt::format("another program has held the logbook locked for {} s",
                            std::chrono::duration<double>(wait_).count()),
                "close the other program or wait until it is done, then try again");
    case SQLITE_READONLY:
    case SQLITE_PERM:
    case SQLITE_AUTH:
    case SQLITE_CANTOPEN:
      return io(name_,
                "the file or its folder may not be written or opened" +
                    (system != 0 ? fmt::format(" ({})", std::strerror(system)) : std::string()),
                "ask for permission to the file and its folder, or use another folder");
    default:
      return io(name_,
                fmt::format("the logbook could not be used: {}{}", complaint(connection_.get()),
                            (extended & 0xFF) == SQLITE_IOERR && system != 0
                                ? fmt::format(" ({})", std::strerror(system))
                                : ""),
                "check the disk and the file, then try again");
  }
}

WriteTransaction::~WriteTransaction() {
  if (open_) (void)database_.execute("ROLLBACK");
}

Outcome WriteTransaction::begin() {
  auto begun = database_.execute("BEGIN IMMEDIATE");
  open_ = static_cast<bool>(begun);
  return begun;
}

Outcome WriteTransaction::commit() {
  if (!still_in_place(database_.connection_.get()))
    return io(
        database_.name_,
        "the file or its -wal is no longer to be found where it was opened; nothing was logged",
        "put it back, give access to its folder, or open the logbook where it is now; then log the entry again");
  auto committed = database_.execute("COMMIT");
  if (committed) open_ = false;
  return committed;
}

}  // namespace bathwright::logbook
