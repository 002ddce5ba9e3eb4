#pragma once
#include <cstddef>
#include <filesystem>
#include <string>

#include "station/base/result.h"

namespace probewright {

/// The whole of a regular file, at most `max_bytes`. Errors: file_unreadable, file_too_large.
Result<std::string> read_file(const std::filesystem::path& path, std::size_t max_bytes);

}  // namespace probewright
