#pragma once
#include <QString>
#include <string_view>

namespace probewright::windows {

/// The check's name in the language of the screen (context "Check" of languages/tables_*.ts); the slug where the
/// catalogue does not know it.
QString check_words(std::string_view slug);

}  // namespace probewright::windows
