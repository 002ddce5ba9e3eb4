#pragma once
#include <string>

#include "limits/sheet.h"

namespace probewright::limits {

/// The form of a sheet that people sign and the ledger keeps: YAML that read_sheet reads back to the same sheet, in one
/// fixed order and spelling, every value in the unit of the catalogue, with the acceptance limits as fixed numbers.
/// Two sheets with the same meaning have the same signed form whatever their layout.
std::string signed_form(const Sheet& sheet);

}  // namespace probewright::limits
