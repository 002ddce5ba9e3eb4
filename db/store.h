#pragma once
#include <chrono>
#include <functional>
#include <memory>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "db/connection.h"
#include "db/lease.h"
#include "db/reader.h"
#include "db/rows.h"
#include "db/statement.h"
#include "station/base/clock.h"

namespace probewright::db {

/// The volume that a new ledger goes on from.
struct Continuation {
  std::int64_t volume = 1;  ///< its number
  Seal seal;                ///< of its closing entry
};

struct StoreOptions {
  std::string path;
  std::string vfs;         ///< SQLite VFS by name; empty: the machine's files
  bool exclusive = false;  ///< locking_mode=EXCLUSIVE before WAL: for a VFS without shared memory; nobody else can read
  bool lease = true;       ///< keep a second line out; off for commands that append, and for a VFS in memory
  bool create = true;      ///< make the ledger where there is none
  std::string station;     ///< name of the station; one ledger serves one station. Empty: take what the ledger says
  bool emulated = false;   ///< only when the ledger begins: it is begun on an emulated bench
  /// Only when the ledger begins: it is the next volume of an earlier one (db/volumes.h).
  std::optional<Continuation> continues;
  bool restored = false;  ///< the file was just made from a backup: that it is another file is no news
  std::string program_version, program_commit;
  int wait_for_locks_ms = 5000;
  int checkpoint_pages = 1000;  ///< pages in the write-ahead log after which it is copied into the file
};

/// A clock that stands behind the newest entry by more than this makes a station not ready (Store::clock_behind).
inline constexpr std::chrono::milliseconds clock_tolerance{2000};

class Store;

/// What a job adds to the ledger inside one transaction. Lives only for the job's call. Ledger thread only.
/// All functions throw: db::Error, or ProblemError with the ids named. A job that throws is taken back alone.
class Change {
 public:
  Change(const Change&) = delete;

  /// The newest entry as this job sees it, with its own entries.
  const Seal& seal() const { return seal_; }

  /// Adds an entry of a kind that has no table of its own. Returns its number.
  /// kind  ASCII snake_case; entry_kind_reserved for a kind that has its own function below
  /// who   the person, or "station"
  std::int64_t add_entry(std::string_view kind, std::string_view who, const Body& data);

  /// Opens a run; the RunId is the number of the entry. Throws run_refused_emulated (ledger begun on an emulated bench
  /// and a real production run, or the reverse), document_unknown, run_try_number, reading_not_finite (temperature).
  RunId open_run(const RunOpened& opened);
  /// Adds readings to an open run, each check once. The order is free: digests follow the catalogue.
  /// Throws run_unknown, run_is_closed, reading_check_unknown, reading_not_finite, reading_incomplete.
  void add_readings(RunId run, std::span<const ReadingRow> readings);
  /// Adds a capture to an open run, packed. Returns its number.
  /// kind     what the bytes are ("spectrum_red"), set_label  which of that kind ("1p0", "dark_before")
  /// decoded  the payload in the documented little-endian format of its kind, at most largest_capture bytes
  /// Throws run_unknown, run_is_closed, capture_too_large.
  std::int64_t add_capture(RunId run, std::string_view kind, std::string_view set_label,
                           std::span<const std::byte> decoded);
  /// Closes a run over all its readings and captures, read back from the ledger. Returns the seal with the closing
  /// entry. Throws run_unknown, run_is_closed, run_verdict_contradicts: a pass with a failing check, with a reading not
  /// ok or missing (`none`), or with none that is ok; a fail without a failing check, or with one that has no reading;
  /// a void without a cause.
  Seal close_run(const RunClosed& closed);

  /// Keeps a document; by its digest, so one that is already there is only looked up. Returns the digest.
  /// Throws document_differs (same bytes under another kind, name or revision), document_not_text.
  Digest add_document(const DocumentRow& document);
  /// Signs a document of the ledger. Throws document_unknown, signature_twice (this person already signed it).
  std::int64_t add_signature(const SignatureRow& signature);
  /// Puts a document in force from a moment that is not past. Throws document_unknown, document_unsigned (needs an
  /// engineer and a second person as quality), in_force_past.
  std::int64_t put_in_force(const Digest& document, UtcTime from, std::string_view who, std::string_view reason);
  /// Ends a document's force from a moment that is not past. Throws document_unknown, in_force_past.
  std::int64_t withdraw(const Digest& document, UtcTime from, std::string_view who, std::string_view reason);

  /// Takes the bytes of captures away, named one by one; their digests stay. Throws capture_unknown, run_is_open.
  std::int64_t prune(std::span<const std::int64_t> captures, std::string_view who, std::string_view reason);

  /// How many runs with this purpose a serial has had, voids and open ones with them.
  int tries(std::string_view serial, std::string_view purpose);
  /// Other questions, answered as this job sees the ledger.
  Reader reader();

 private:
  friend class Store;
  friend struct Carrying;  // volumes.cpp
  Change(Store& store, Seal seal) : store_(store), seal_(seal) {}
  std::int64_t append(std::string_view kind, std::string_view who, const Body& data, const std::string& digested = {});
  std::int64_t set_state(const Digest& document, std::string_view state, UtcTime from, std::string_view who,
                         std::string_view reason);
  void need_open(RunId run);
  void need_document(const Digest& digest);
  Store& store_;
  Seal seal_;
};

/// The writing end of a ledger. Ledger thread only, from open to destruction (other threads use Reader).
class Store {
 public:
  using Job = std::function<void(Change&)>;

  /// Opens a ledger or begins one. Checks the layout, the newest 100 entries and the open runs.
  /// `clock` must outlive the store; it gives every time stamp.
  /// A ledger of an earlier layout gets the steps that it lacks, and an entry that says so, but only under the lease.
  /// Under the lease it is also noticed when the file was moved or copied since it was last opened: an entry says so.
  /// Errors: ledger_in_use, ledger_network, ledger_cannot_open, ledger_not_a_ledger, ledger_newer, ledger_older (no
  /// lease), ledger_volume_closed, ledger_layout_altered, ledger_altered, ledger_other_station, ledger_mode, and what
  /// SQLite meets on the way.
  static Result<std::unique_ptr<Store>> open(const StoreOptions& options, const Clock& clock);
  ~Store();

  /// Does all jobs in one transaction with one sync at its end. Each job has a savepoint: one that throws is taken back
  /// alone and gets its problem; the others stay. When this returns, jobs without a problem are on the disk.
  /// Ledger trouble (anything but a refused change) fails all jobs, and the store takes nothing more until it is opened
  /// anew: whether a commit that failed is on the disk is known only then. A file that was moved or exchanged under the
  /// store is such trouble (ledger_moved_away). Where the machine's clock was set since the last commit, an entry
  /// `clock_step` comes first.
  std::vector<Result<void>> commit_group(std::span<const Job> jobs);
  /// commit_group for one job.
  Result<void> commit(const Job& job);

  /// Gives pages that hold nothing back to the disk, after a prune. Throws Error.
  void give_space_back();

  /// The trouble that ended this store, if any.
  const std::optional<Problem>& trouble() const { return trouble_; }
  /// The newest entry that this store knows to be on the disk.
  const Seal& seal() const { return seal_; }
  /// True once after another program added entries to the ledger.
  bool others_wrote();
  /// How far the clock stands behind the newest entry; 0 where it does not.
  std::chrono::microseconds clock_behind();
  const std::string& station() const { return station_; }
  /// Number of this volume, from 1.
  std::int64_t volume() const { return volume_; }
  bool emulated() const { return emulated_; }
  /// Questions over the writing connection, for the ledger thread.
  Reader reader() { return Reader(connection_); }
  const std::string& path() const { return connection_.path(); }

 private:
  friend class Change;
  Store(const StoreOptions& options, const Clock& clock, std::optional<Lease> lease);
  bool is_fresh();
  void refuse_foreign_file();
  void prepare_new_file();
  void set_modes(const StoreOptions& options);
  void begin_ledger(const StoreOptions& options);
  void refuse_closed_volume();
  void climb(const StoreOptions& options);
  void notice_move(bool restored);
  void demand_in_place();
  void note_clock_step(Change& change);
  void read_first_entry(const StoreOptions& options);
  void check_recent();
  void prepare();
  Seal newest_entry();
  Seal notice(const Seal& newest);
  Result<void> attempt(Change& change, const Job& job);

  std::optional<Lease> lease_;  // goes last: the connection is closed before another line may begin
  const Clock& clock_;
  Connection connection_;
  std::vector<std::unique_ptr<Statement>> insert_projected_;
  Seal seal_;
  std::optional<Problem> trouble_;
  std::string station_;
  std::int64_t volume_ = 1;
  bool emulated_ = false;
  bool others_wrote_ = false;
  std::chrono::microseconds utc_minus_steady_{0};
  std::int64_t data_version_ = 0;
};

}  // namespace probewright::db
