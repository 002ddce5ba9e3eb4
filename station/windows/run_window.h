#pragma once
#include <memory>
#include <string>

#include "station/sequence/line_host.h"

namespace probewright::windows {

class BenchPlay;
class LineFeed;
class SetupDoor;

struct WindowOptions {
  std::string version;   ///< as --version prints it
  std::string settings;  ///< file that remembers sizes and colours; empty: $XDG_CONFIG_HOME/probewright/windows.ini
  std::string language;  ///< "en", "de", "es"; empty: as remembered, else the system's
  /// What the host was started with as its listener. Must outlive the host.
  LineFeed* feed = nullptr;
  /// Hands of an emulated bench, offered in a strip; nullptr: none.
  BenchPlay* play = nullptr;
};

/// Whether windows can be shown: there is a display, or the platform was named (QT_QPA_PLATFORM).
bool has_display();

/// Opens the window over a running line and gives when it is closed: exit status 0, or 3 when the line ended by itself.
/// The host goes on; finishing it is the caller's. Main thread only; makes the application.
int run_window(sequence::LineHost& host, WindowOptions options);

/// Closes the window that run_window() has open, if any. Any thread.
void close_window();

/// How the set-up page was left.
enum class SetupEnd {
  left,     ///< the window was closed; nothing is to be done
  kept,     ///< a station file was written: start the line with it
  emulated  ///< the emulated bench is wanted
};
/// The guided page of a first start. Of `options` feed and play are not looked at. Main thread only; makes the
/// application and ends it.
SetupEnd run_setup(SetupDoor& door, WindowOptions options);

}  // namespace probewright::windows
