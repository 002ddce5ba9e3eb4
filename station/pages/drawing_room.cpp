#include "station/pages/drawing_room.h"

#include <QApplication>
#include <QFontDatabase>
#include <QLoggingCategory>
#include <utility>

#include "station/pages/canvas.h"

namespace probewright::pages {

namespace {

// At its start the tool kit says so where it finds no folder for sockets. Drawing needs none, and what a command prints
// is read by programs. Only the start is quiet: a category's rule holds for all that is said in it.
class QuietStart {
 public:
  QuietStart() { QLoggingCategory::setFilterRules("default.warning=false"); }
  ~QuietStart() { QLoggingCategory::setFilterRules({}); }
};

}  // namespace

struct DrawingRoom::Application {
  // The tool kit keeps references to both for as long as it lives.
  int count = 3;
  char name[12] = "probewright";
  char option[10] = "-platform";
  char platform[10] = "offscreen";
  char* words[4] = {name, option, platform, nullptr};
  std::optional<QuietStart> quiet{std::in_place};
  QApplication application{count, words};

  Application() { quiet.reset(); }
};

DrawingRoom::DrawingRoom() {
  if (QCoreApplication::instance() == nullptr) own_ = std::make_unique<Application>();
}

DrawingRoom::~DrawingRoom() = default;

std::optional<Problem> not_drawable() {
  if (qobject_cast<QApplication*>(QCoreApplication::instance()) == nullptr) return Problem{"page_no_application", ""};
  if (!QFontDatabase::hasFamily(font_family)) return Problem{"page_no_font", "", {{"font", font_family}}};
  return std::nullopt;
}

}  // namespace probewright::pages
