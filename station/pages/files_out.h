#pragma once
#include <QByteArray>
#include <filesystem>

#include "station/base/result.h"

namespace probewright::pages {

/// Puts `bytes` in place of the file at once, or leaves what was there. Errors: page_not_written.
Result<void> replace_file(const std::filesystem::path& path, const QByteArray& bytes);

}  // namespace probewright::pages
