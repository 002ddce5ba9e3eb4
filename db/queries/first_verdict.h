#pragma once
#include <string>
#include <string_view>

#include "db/reader.h"

namespace probewright::db {

/// The first production verdict that a serial ever had in this ledger, "pass" or "fail"; a void is none. Empty: it had
/// none. Throws db::Error.
std::string first_production_verdict(Reader& reader, std::string_view serial);

}  // namespace probewright::db
