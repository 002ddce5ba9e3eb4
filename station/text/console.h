#pragma once
#include <iosfwd>
#include <string>
#include <string_view>

#include "station/base/problem.h"
#include "station/text/exit_status.h"
#include "station/text/json_out.h"

namespace probewright::text {

/// How a command talks: set once by main from --json and from what its output is connected to.
struct Manner {
  bool json = false;             ///< data and problems as JSON on `out`
  bool out_is_terminal = false;  ///< somebody may be reading `out`
  bool err_is_terminal = false;  ///< progress may be drawn on `err`
};

/// Where a command prints. Answers go to `out`; problems, warnings and progress to `err`, so that an answer can be
/// piped. With JSON a problem is the answer and goes to `out`. One thread at a time; the streams must outlive it.
class Console {
 public:
  Console(std::ostream& out, std::ostream& err, Manner manner) : out_(out), err_(err), manner_(manner) {}
  Console(const Console&) = delete;
  Console& operator=(const Console&) = delete;

  bool json() const { return manner_.json; }
  bool out_is_terminal() const { return manner_.out_is_terminal; }

  /// One line of the answer; a line feed is added.
  void print(std::string_view line);
  /// Text that ends its own lines.
  void print_text(std::string_view text);
  /// The answer as JSON.
  void print_json(const Json& answer);
  /// Makes what was printed visible to whoever reads it now.
  void flush();

  /// "where: what (remedy)" for each problem; with JSON {"problem": ...}, and "problems" too when there are several.
  /// Returns the exit status of the kind of the worst one, or the status that is handed in.
  int refuse(const Problem& problem);
  int refuse(const Problems& problems);
  int refuse(const Problem& problem, ExitStatus status);
  /// What is going on, for whoever waits; not part of the answer. Silent with JSON.
  void say(std::string_view line);
  /// A problem that does not end the command.
  void warn(const Problem& problem);

 private:
  friend class Progress;
  friend class LiveBlock;
  std::ostream& out_;
  std::ostream& err_;
  Manner manner_;
};

/// {"what", "where", "remedy"}
Json json_of(const Problem& problem);

/// How far a long job is, on one line of a terminal that is overwritten and taken away at the end. Prints nothing
/// where nobody watches, or with JSON.
class Progress {
 public:
  /// `what` is done to `total` things: "entries checked", 1200. The console must outlive it.
  Progress(Console& console, std::string_view what);
  Progress(const Progress&) = delete;
  Progress& operator=(const Progress&) = delete;
  ~Progress();
  /// Redraws when the whole percentage has changed.
  void at(long long done, long long total);

 private:
  Console& console_;
  std::string what_;
  int shown_percent_ = -1;
};

}  // namespace probewright::text
