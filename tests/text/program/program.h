#pragma once
#include <sys/types.h>
#include <filesystem>
#include <map>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

/// Starts the built program as a person does, and shows what came of it.
namespace program {

struct Ran {
  int status = -1;       ///< exit status; 128 + n where a signal n ended it
  std::string out, err;  ///< what stood on the two outputs
  /// `out` as JSON; throws nlohmann's error, with the text in it, where it is none.
  nlohmann::json json() const;
};

/// A folder that goes away with the test. Every program of a test runs with it as home, so nothing of the machine's
/// user shows through.
class Folder {
 public:
  Folder();
  ~Folder();
  Folder(const Folder&) = delete;
  std::filesystem::path path;
  std::string file(const std::string& name) const { return (path / name).string(); }
  /// Writes a file and returns its path.
  std::string write(const std::string& name, const std::string& text) const;
};

/// Runs `probewright arguments...` to its end.
Ran run(const Folder& folder, const std::vector<std::string>& arguments,
        const std::map<std::string, std::string>& environment = {});

/// The program that is tested.
extern const std::string probewright;

/// A program that goes on beside the test, its standard input read from a file or FIFO; asked to end (SIGTERM) and
/// waited for when this goes.
class Beside {
 public:
  Beside(const Folder& folder, const std::vector<std::string>& arguments, const std::string& name,
         const std::string& program = probewright, const std::string& input = "/dev/null");
  ~Beside();
  Beside(const Beside&) = delete;
  /// Waits until its output holds `text`; false when it ended or `seconds` have passed.
  bool says(const std::string& text, double seconds);
  std::string out() const;
  std::string err() const;
  /// Waits for its own end; its exit status.
  int wait();
  /// Asks it to end; its exit status.
  int end();
  /// The same by another signal: SIGKILL leaves it no time for anything.
  int end_by(int signal);
  pid_t process() const { return process_; }

 private:
  std::string out_file_, err_file_;
  pid_t process_ = -1;
  int status_ = -1;
};

}  // namespace program
