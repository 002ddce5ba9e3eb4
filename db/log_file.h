#pragma once
#include "db/connection.h"

namespace probewright::db {

/// Writes the write-ahead log over itself and syncs it. After a sync that failed, Linux still shows what was written
/// but no longer means to save it: an earlier process may have left a log that can be read and is not on the disk, and
/// copying it into the file would then tear the file at the next power cut. Writing it again makes it whole. Holds the
/// write lock meanwhile. Throws Error.
void save_log_again(Connection& connection);

}  // namespace probewright::db
