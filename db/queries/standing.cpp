#include "db/queries/standing.h"

#include <algorithm>
#include <limits>
#include <map>

namespace probewright::db {
namespace {

std::vector<EntryRecord> of_kinds(Reader& reader, std::string_view begins, std::string_view ends) {
  constexpr auto all = std::numeric_limits<std::int64_t>::max();
  std::vector<EntryRecord> found = entries(reader, 1, all, begins);
  for (EntryRecord& entry : entries(reader, 1, all, ends)) found.push_back(std::move(entry));
  std::sort(found.begin(), found.end(), [](const auto& a, const auto& b) { return a.number < b.number; });
  return found;
}

/// The last entry of each key, oldest first.
template <class Key>
std::vector<EntryRecord> last_of_each(std::vector<EntryRecord> all, const Key& key) {
  std::map<HoldSubject, EntryRecord> last;
  for (EntryRecord& entry : all) last[key(entry.data)] = std::move(entry);
  std::vector<EntryRecord> kept;
  for (auto& [subject, entry] : last) kept.push_back(std::move(entry));
  std::sort(kept.begin(), kept.end(), [](const auto& a, const auto& b) { return a.number < b.number; });
  return kept;
}

std::vector<EntryRecord> last_of_lots(Reader& reader) {
  return last_of_each(of_kinds(reader, "lot_opened", "lot_closed"), [](const Body& data) {
    return HoldSubject{"lot", data.text("lot")};
  });
}

std::vector<EntryRecord> of_kind(std::vector<EntryRecord> all, std::string_view kind) {
  std::erase_if(all, [kind](const EntryRecord& entry) { return entry.kind != kind; });
  return all;
}

}  // namespace

std::vector<EntryRecord> open_lots(Reader& reader) { return of_kind(last_of_lots(reader), "lot_opened"); }

std::set<std::string> closed_lots(Reader& reader) {
  std::set<std::string> lots;
  for (const EntryRecord& entry : of_kind(last_of_lots(reader), "lot_closed")) lots.insert(entry.data.text("lot"));
  return lots;
}

std::vector<EntryRecord> standing_holds(Reader& reader) {
  return of_kind(last_of_each(of_kinds(reader, "hold", "hold_released"),
                              [](const Body& data) {
                                return HoldSubject{data.text("subject"), data.text("name")};
                              }),
                 "hold");
}

std::set<HoldSubject> held_subjects(Reader& reader) {
  std::set<HoldSubject> subjects;
  for (const EntryRecord& entry : standing_holds(reader))
    subjects.insert({entry.data.text("subject"), entry.data.text("name")});
  return subjects;
}

}  // namespace probewright::db
