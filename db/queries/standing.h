#pragma once
#include <set>
#include <string>
#include <string_view>
#include <vector>

#include "db/queries/entries.h"
#include "db/reader.h"

// What stands at the moment: lots that are open and holds that were not released, told from their entries alone.
//   lot_opened     data.lot
//   lot_closed     data.lot
//   hold           data.subject (serial, lot, nest, document), data.name, data.reason
//   hold_released  data.subject, data.name, data.reason
namespace probewright::db {

/// What a hold lies on.
struct HoldSubject {
  std::string subject, name;
  auto operator<=>(const HoldSubject&) const = default;
};

/// The newest entry of each lot that was opened and not closed since. Throws as `entries`.
std::vector<EntryRecord> open_lots(Reader& reader);
/// Lots that an entry has closed and none has opened again.
std::set<std::string> closed_lots(Reader& reader);
/// The newest hold of each subject that was not released since.
std::vector<EntryRecord> standing_holds(Reader& reader);
/// Their subjects.
std::set<HoldSubject> held_subjects(Reader& reader);

}  // namespace probewright::db
