#pragma once
#include <filesystem>
#include <fstream>
#include <map>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "drivers/wire/recording.h"
#include "station/base/canonical_json.h"

namespace probewright::wire {

/// A recording as it stands in its folder (RECORDING.md).
struct Recording {
  Body header;                               ///< what was recorded, and from what it can be replayed
  std::vector<LineRecording> lines;          ///< by device
  std::map<std::string, std::string> files;  ///< whatever else lies there: path inside the folder, text
};

/// Most that a file of a recording may have: hours of traffic.
inline constexpr std::size_t most_recording_bytes = std::size_t{1} << 30;

/// Reads a folder. Errors: recording_missing, recording_malformed, file_unreadable, file_too_large.
Result<Recording> read_recording(const std::filesystem::path& folder);
/// Writes one; the folder must not be there, or be empty. Errors: recording_unwritable.
Result<void> write_recording(const std::filesystem::path& folder, const Recording& recording);

/// Writes a recording while it is made. What was noted is in the file at once, so that a killed station leaves it.
/// Line thread only.
class Recorder {
 public:
  /// The folder is made; it must not be there, or be empty. Errors: recording_unwritable.
  static Result<std::unique_ptr<Recorder>> begin(const std::filesystem::path& folder, const Body& header);
  /// Adds to the file of `device`. A disk that fails shows in trouble().
  void note(const std::string& device, const WireEvent& event);
  /// A file beside the lines: `path` inside the folder.
  void add_file(const std::filesystem::path& path, std::string_view text);
  /// Why the recording is not whole.
  const std::optional<Problem>& trouble() const { return trouble_; }

 private:
  explicit Recorder(std::filesystem::path folder) : folder_(std::move(folder)) {}
  void fail(const std::filesystem::path& path);

  std::filesystem::path folder_;
  std::map<std::string, std::ofstream> lines_;
  std::optional<Problem> trouble_;
};

}  // namespace probewright::wire
