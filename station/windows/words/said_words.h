#pragma once
#include <QString>
#include <string>

namespace probewright::windows {

/// A sentence that the line says in English, in the language of the screen: the known ones by their pattern, with what
/// stands in their {gaps} taken over; any other as it is.
QString said(const std::string& english);

}  // namespace probewright::windows
