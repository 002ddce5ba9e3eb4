#include "station/pages/drawing_room.h"

#include <QApplication>
#include <QFontDatabase>

#include "station/pages/canvas.h"

namespace probewright::pages {

struct DrawingRoom::Application {
  // The tool kit keeps references to both for as long as it lives.
  int count = 3;
  char name[12] = "probewright";
  char option[10] = "-platform";
  char platform[10] = "offscreen";
  char* words[4] = {name, option, platform, nullptr};
  QApplication application{count, words};
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
