#include <gtest/gtest.h>

#include <QLocale>
#include <QStyleFactory>

#include "station/windows/watchdog.h"

// Screens are made without a display, and as on a German machine: a decimal comma must not get into a number.
int main(int argc, char** argv) {
  testing::InitGoogleTest(&argc, argv);
  qputenv("QT_QPA_PLATFORM", "offscreen");
  probewright::windows::WatchedApplication application{argc, argv};
  QApplication::setStyle(QStyleFactory::create(QStringLiteral("Fusion")));
  QLocale::setDefault(QLocale{QLocale::German, QLocale::Germany});
  return RUN_ALL_TESTS();
}
