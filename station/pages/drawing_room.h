#pragma once
#include <memory>
#include <optional>

#include "station/base/problem.h"

namespace probewright::pages {

/// What the tool kit needs before anything can be drawn: an application, made without a display if there is none yet.
/// Windows have one already and need no room. Make one at the start of a command that draws; it must outlive every
/// page. Main thread only.
class DrawingRoom {
 public:
  DrawingRoom();
  ~DrawingRoom();
  DrawingRoom(const DrawingRoom&) = delete;
  DrawingRoom& operator=(const DrawingRoom&) = delete;

 private:
  struct Application;
  std::unique_ptr<Application> own_;  ///< empty where there was one
};

/// Why pages cannot be drawn on this machine: page_no_application, page_no_font (without it text would come out in
/// another width, or as boxes). Empty: they can. Main thread only.
std::optional<Problem> not_drawable();

}  // namespace probewright::pages
