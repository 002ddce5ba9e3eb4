#include <gtest/gtest.h>

#include <QCoreApplication>
#include <QLocale>

#include "station/pages/drawing_room.h"

// The tool kit sets the locale of the environment, and so does a program with windows: a decimal comma must not get
// into a page. Every test runs as on a German machine.
int main(int argc, char** argv) {
  testing::InitGoogleTest(&argc, argv);
  const probewright::pages::DrawingRoom room;
  QLocale::setDefault(QLocale{QLocale::German, QLocale::Germany});
  return RUN_ALL_TESTS();
}
