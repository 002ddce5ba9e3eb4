#include "station/main_pages.h"

// In place of main_pages.cpp where the program is built without Qt.
namespace probewright {

std::unique_ptr<text::PageMaker> page_maker() { return nullptr; }

}  // namespace probewright
