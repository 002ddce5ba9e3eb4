#include "db/volumes.h"

#include <sys/stat.h>

#include <algorithm>
#include <cctype>
#include <filesystem>
#include <map>

#include "db/file_work.h"
#include "db/queries/entries.h"
#include "db/queries/open_runs.h"
#include "db/queries/seal.h"
#include "db/queries/standing.h"

namespace probewright::db {

namespace fs = std::filesystem;

namespace {

std::string stem_of(const std::string& ledger) {
  const fs::path path(ledger);
  return (path.parent_path() / path.stem()).string() + "-volume-";
}

std::string three_digits(std::int64_t number) {
  const std::string digits = std::to_string(number);
  return std::string(digits.size() < 3 ? 3 - digits.size() : 0, '0') + digits;
}

}  // namespace

std::string volume_path(const std::string& ledger, std::int64_t volume) {
  return stem_of(ledger) + three_digits(volume) + fs::path(ledger).extension().string();
}

std::string next_volume_path(const std::string& ledger) { return ledger + ".next"; }

std::vector<std::string> volumes_beside(const std::string& ledger) {
  std::vector<std::string> paths;
  const std::string stem = fs::path(stem_of(ledger)).filename().string(), tail = fs::path(ledger).extension().string();
  std::error_code ignored;  // a folder that cannot be listed shows no volumes
  for (const auto& item : fs::directory_iterator(folder_of(ledger), ignored)) {
    const std::string name = item.path().filename().string();
    if (!name.starts_with(stem) || !name.ends_with(tail) || name.size() <= stem.size() + tail.size()) continue;
    const std::string number = name.substr(stem.size(), name.size() - stem.size() - tail.size());
    if (std::all_of(number.begin(), number.end(), [](unsigned char c) { return std::isdigit(c) != 0; }))
      paths.push_back((fs::path(folder_of(ledger)) / name).string());
  }
  std::sort(paths.begin(), paths.end(), [](const std::string& a, const std::string& b) {
    return a.size() != b.size() ? a.size() < b.size() : a < b;
  });
  paths.push_back(ledger);
  return paths;
}

/// What goes into the next volume, read from the one that was closed.
struct Carried {
  struct Document {
    DocumentRow row;
    std::vector<EntryRecord> entries;  ///< its signatures and states, oldest first
  };
  std::vector<Document> documents;
  struct Tries {
    std::string serial, purpose;
    std::int64_t count = 0;
  };
  std::vector<Tries> tries;
  std::vector<EntryRecord> standing;
};

namespace {

/// Documents in force now or put in force from a moment to come, with every entry that signs them or moves their state.
std::vector<Carried::Document> documents_in_force(Reader& reader) {
  std::vector<Carried::Document> documents;
  Row row = reader.begin(
      "SELECT d.digest, d.kind, d.name, d.revision, d.text, e.who FROM document AS d JOIN entry AS e ON e.number = "
      "d.entry"
      " WHERE (SELECT s.state FROM document_state AS s WHERE s.document = d.digest ORDER BY s.entry DESC LIMIT 1)"
      " = 'in_force' ORDER BY d.entry");
  while (row.step()) {
    Carried::Document document{{row.text(1), row.text(2), row.text(3), row.text(4), row.text(5)}, {}};
    Row of_it = reader.begin(
        "SELECT entry FROM signature WHERE document = ?1 UNION ALL SELECT entry FROM document_state WHERE document = ?1"
        " ORDER BY 1");
    for (of_it.values(row.digest(0)); of_it.step();)
      for (EntryRecord& entry : entries(reader, of_it.integer(0), of_it.integer(0)))
        document.entries.push_back(std::move(entry));
    documents.push_back(std::move(document));
  }
  return documents;
}

/// Tries of serials whose newest run of that purpose has not passed. A serial that passed begins anew.
std::vector<Carried::Tries> tries_that_count_on(Reader& reader) {
  std::vector<Carried::Tries> tries;
  Row row = reader.begin(
      "SELECT t.serial, t.purpose, t.tries FROM ("
      " SELECT serial, purpose, sum(tries) AS tries, max(newest) AS newest FROM ("
      "  SELECT serial, purpose, count(*) AS tries, max(run) AS newest FROM run_opened GROUP BY serial, purpose"
      "  UNION ALL SELECT serial, purpose, tries, 0 FROM carried_try) GROUP BY serial, purpose) AS t"
      " LEFT JOIN run_closed AS c ON c.run = t.newest"
      " WHERE coalesce(c.verdict, '') <> 'pass' ORDER BY t.serial, t.purpose");
  while (row.step()) tries.push_back({row.text(0), row.text(1), row.integer(2)});
  return tries;
}

Carried carried_from(Reader& reader) {
  Carried carried{documents_in_force(reader), tries_that_count_on(reader), open_lots(reader)};
  for (EntryRecord& hold : standing_holds(reader)) carried.standing.push_back(std::move(hold));
  return carried;
}

/// The data of a carried entry says which entry of which volume it repeats.
Body repeated(const EntryRecord& entry, std::int64_t volume) {
  Body data = entry.data;
  if (!data.find("carried"))
    (*data.object())["carried"] =
        Body::Object{{"entry", entry.number}, {"time", to_text(entry.time)}, {"volume", volume}};
  return data;
}

}  // namespace

/// Writes carried entries, which need not follow the rules for new ones: what was allowed then stays so.
struct Carrying {
  static void write(Change& change, const Carried& carried, std::int64_t volume) {
    for (const Carried::Document& document : carried.documents) {
      change.add_document(document.row);
      for (const EntryRecord& entry : document.entries) change.append(entry.kind, entry.who, repeated(entry, volume));
    }
    constexpr std::size_t most = 1000;
    for (std::size_t at = 0; at < carried.tries.size(); at += most) {
      Body::Array list;
      for (std::size_t i = at; i < std::min(at + most, carried.tries.size()); ++i)
        list.push_back(Body::Object{{"purpose", carried.tries[i].purpose},
                                    {"serial", carried.tries[i].serial},
                                    {"tries", carried.tries[i].count}});
      change.append("tries_carried", "station", Body::Object{{"tries", std::move(list)}, {"volume", volume}});
    }
    for (const EntryRecord& entry : carried.standing) change.append(entry.kind, entry.who, repeated(entry, volume));
  }
};

namespace {

StoreOptions store_options(const CloseVolumeOptions& options, const std::string& path) {
  StoreOptions store;
  store.path = path;
  store.create = false;
  store.program_version = options.program_version;
  store.program_commit = options.program_commit;
  return store;
}

/// Ends the volume on disk; nothing to do where that was done before.
Result<void> end_volume(const CloseVolumeOptions& options, const Clock& clock) {
  StoreOptions how = store_options(options, options.path);
  how.lease = false;  // the caller holds it
  auto store = Store::open(how, clock);
  if (!store && store.error().id == "ledger_volume_closed") return {};
  if (!store) return store.error();
  Reader reader = (*store)->reader();
  if (const auto open = open_runs(reader); !open.empty())
    return Problem{"volume_runs_open", options.path, {{"count", std::to_string(open.size())}}};
  const std::int64_t volume = (*store)->volume();
  return (*store)->commit([&](Change& change) {
    change.add_entry("volume_closed", options.who,
                     Body::Object{{"next", volume + 1}, {"reason", options.reason}, {"volume", volume}});
  });
}

/// What the first entry of the closed volume says, and its seal.
struct Ended {
  Continuation continuation;
  std::string station;
  bool emulated = false;
};

Ended read_ended(Reader& reader) {
  const auto first = entries(reader, 1, 1);
  if (first.empty()) throw ProblemError({"ledger_not_a_ledger", "", {{"reason", "no first entry"}, {"code", "0"}}});
  const Body& data = first.front().data;
  const Body* emulated = data.find("emulated");
  return {{data.number("volume", 1), newest_seal(reader)},
          data.text("station"),
          emulated && emulated->boolean() && *emulated->boolean()};
}

/// Puts the log into the file and leaves one file.
void settle(const std::string& path) {
  Connection connection(path, Access::read_write);
  connection.wait_for_locks(2000);
  connection.demand("journal_mode", "DELETE", "delete");
}

/// Makes the next volume under a name of its own, whole and synced.
void make_next(const CloseVolumeOptions& options, const Clock& clock, const Ended& ended, const Carried& carried) {
  const std::string next = next_volume_path(options.path);
  if (file_exists(next)) return;  // made before a power cut; it has its name only when it was whole
  Unfinished part(next + ".part");
  for (const char* suffix : {"", "-wal", "-shm", "-journal"}) fs::remove(part.path() + suffix);
  StoreOptions how = store_options(options, part.path());
  how.create = true;
  how.lease = false;
  how.station = ended.station;
  how.emulated = ended.emulated;
  how.continues = ended.continuation;
  {
    auto store = Store::open(how, clock).value();
    const auto written =
        store->commit([&](Change& change) { Carrying::write(change, carried, ended.continuation.volume); });
    if (!written) throw ProblemError(written.error());
  }
  settle(part.path());
  sync_file(part.path()).value();
  name_file(part.path(), next).value();
  part.keep();
}

void give_names(const std::string& path, const std::string& archive) {
  sync_file(path).value();
  name_file(path, archive).value();
  ::chmod(archive.c_str(), 0444);  // a wish: where it is refused, the archive is opened immutable all the same
  name_file(next_volume_path(path), path).value();
}

ClosedVolume closed_volume(const CloseVolumeOptions& options, const Clock& clock, const Lease& lease) {
  settle(options.path);
  Reader reader = Reader::open(options.path, ReadFrom::archive).value();
  const Ended ended = read_ended(reader);
  const Carried carried = carried_from(reader);
  ClosedVolume closed{volume_path(options.path, ended.continuation.volume), ended.continuation.volume,
                      ended.continuation.seal};
  if (file_exists(closed.archive)) throw ProblemError({"file_exists", closed.archive});
  make_next(options, clock, ended, carried);
  give_names(options.path, closed.archive);
  lease.note(Lease::identity_of(options.path).value()).value();
  closed.documents = static_cast<std::int64_t>(carried.documents.size());
  closed.tries = static_cast<std::int64_t>(carried.tries.size());
  closed.standing = static_cast<std::int64_t>(carried.standing.size());
  return closed;
}

}  // namespace

Result<ClosedVolume> close_volume(const CloseVolumeOptions& options, const Clock& clock) {
  if (!file_exists(options.path))
    return Problem{"ledger_cannot_open", options.path, {{"reason", "there is no such file"}, {"code", "14"}}};
  try {
    const Lease lease = Lease::take(options.path).value();
    if (auto ended = end_volume(options, clock); !ended) return ended.error();
    return closed_volume(options, clock, lease);
  } catch (const ProblemError& error) {
    return error.problem();
  }
}

Result<std::optional<BrokenLink>> broken_link(const std::vector<std::string>& paths) {
  std::optional<Seal> before;
  std::int64_t number = 0;
  for (const std::string& path : paths) {
    auto reader = Reader::open(path);
    if (!reader) return reader.error();
    const auto first = entries(*reader, 1, 1);
    const std::int64_t volume = first.empty() ? 0 : first.front().data.number("volume", 0);
    const std::string previous = first.empty() ? "" : first.front().data.text("previous_seal");
    if (before && volume != number + 1)
      return std::optional{
          BrokenLink{path, "is volume " + std::to_string(volume) + ", not " + std::to_string(number + 1)}};
    if (before && previous != to_hex(before->hash))
      return std::optional{BrokenLink{path, "does not begin with the seal of the volume before it"}};
    before = newest_seal(*reader);
    number = volume;
  }
  return std::optional<BrokenLink>{};
}

}  // namespace probewright::db
