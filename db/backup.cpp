#include "db/backup.h"

#include <sqlite3.h>

#include "db/file_work.h"
#include "db/lease.h"
#include "db/queries/seal.h"
#include "db/transaction.h"

namespace probewright::db {
namespace {

constexpr int pages_a_step = 2000;

/// SQLite's own copying of pages. Source: sqlite.org/c3ref/backup_finish.html
class PageCopy {
 public:
  PageCopy(Connection& to, Connection& from)
      : to_(to), backup_(sqlite3_backup_init(to.handle(), "main", from.handle(), "main")) {
    if (!backup_) raise(to.handle(), sqlite3_extended_errcode(to.handle()), to.path(), "copy pages");
  }
  ~PageCopy() { sqlite3_backup_finish(backup_); }
  PageCopy(const PageCopy&) = delete;
  /// False when all pages are there.
  bool step() {
    const int code = sqlite3_backup_step(backup_, pages_a_step);
    if (code != SQLITE_OK && code != SQLITE_DONE) raise(to_.handle(), code, to_.path(), "copy pages");
    return code == SQLITE_OK;
  }
  std::int64_t total() const { return sqlite3_backup_pagecount(backup_); }
  std::int64_t done() const { return total() - sqlite3_backup_remaining(backup_); }

 private:
  Connection& to_;
  sqlite3_backup* backup_;
};

/// All pages under one snapshot: a snapshot that is held keeps SQLite from beginning anew when somebody writes.
Seal copy_pages(Connection& from, Connection& to, const CopyOptions& options) {
  const Snapshot moment(from);
  Reader reader(from);
  const Seal seal = newest_seal(reader);
  PageCopy copy(to, from);
  while (copy.step()) {
    if (options.stop.stop_requested()) throw ProblemError({"copy_stopped", to.path()});
    if (options.progress) options.progress(copy.done() / 2, copy.total());
  }
  return seal;
}

Seal copy_into(const std::string& from, const std::string& to, const CopyOptions& options) {
  const auto source = open_readable(from, options.from);
  refuse_foreign_file(*source);
  Connection target(to, Access::create_read_write);
  target.run("PRAGMA synchronous=OFF");  // the whole file is synced at its end
  const Seal seal = copy_pages(*source, target, options);
  target.demand("journal_mode", "DELETE", "delete");
  return seal;
}

VerifyReport checked(const std::string& path, const Seal& seal, const CopyOptions& options) {
  VerifyOptions how;
  how.archive = true;
  how.printed = seal;
  how.stop = options.stop;
  if (options.progress)
    how.progress = [&](std::int64_t done, std::int64_t total) { options.progress(total + done, 2 * total); };
  const VerifyReport report = verify(path, how).value();
  if (!report.ok())
    throw ProblemError({"backup_differs", path, {{"what", altered_problem(path, *report.first_fault).what()}}});
  return report;
}

CheckedCopy copied(const std::string& from, const std::string& to, const CopyOptions& options) {
  Unfinished part(to + ".part");
  if (file_exists(part.path())) throw ProblemError({"file_exists", part.path()});
  const Seal seal = copy_into(from, part.path(), options);
  sync_file(part.path()).value();
  CheckedCopy copy{to, checked(part.path(), seal, options), {}, 0};
  const FileDigest digest = digest_of_file(part.path()).value();
  copy.sha256 = digest.digest;
  copy.size = digest.size;
  name_file(part.path(), to).value();
  part.keep();
  return copy;
}

}  // namespace

Result<CheckedCopy> copy_ledger(const std::string& from, const std::string& to, const CopyOptions& options) {
  if (file_exists(to)) return Problem{"file_exists", to};
  try {
    return copied(from, to, options);
  } catch (const ProblemError& error) {
    return error.problem();
  }
}

Body copy_body(const CheckedCopy& copy) {
  return Body::Object{{"entry", copy.report.seal.entry},
                      {"file", copy.path},
                      {"seal", to_hex(copy.report.seal.hash)},
                      {"sha256", to_hex(copy.sha256)},
                      {"size", copy.size}};
}

}  // namespace probewright::db
