#pragma once
#include <filesystem>
#include <string>

namespace probewright::text {

/// Which configuration and station a command works with; the same options on every command that needs them.
struct StationChoice {
  std::string config;               ///< folder of --config; empty: the usual places
  std::string station;              ///< name of --station; empty: the only one of the configuration
  std::filesystem::path installed;  ///< the configuration that came with the program, asked last
};

/// What this program was built from; kept with every run.
struct Build {
  std::string version, commit, compiler;
};

}  // namespace probewright::text
