#include <gtest/gtest.h>

#include <QApplication>
#include <QElapsedTimer>
#include <ctime>
#include <iostream>

#include "stage.h"

// What the window costs while everything runs. Bounds are wide, since other programs share the machine; the figures are
// printed.
namespace probewright::windows {
namespace {

double cpu_s() { return static_cast<double>(std::clock()) / CLOCKS_PER_SEC; }

/// All nests running, a little further on in each view, with new marks now and then.
sequence::LineView all_running(int nests, double share) {
  sequence::LineView view = busy_scene(nests).view;
  for (int nest = 1; nest <= nests; ++nest)
    view.berths[static_cast<std::size_t>(nest - 1)] =
        running_berth(nest, "AQ20-048-00137", share, static_cast<unsigned>(nest));
  return view;
}

TEST(Cost, SixteenRunningNestsAtThirtyViewsASecond) {
  Stage stage{busy_scene(16), {QSize{1920, 1080}}};
  constexpr int views = 90;
  std::vector<sequence::LineView> made;
  for (int i = 0; i < views; ++i) made.push_back(all_running(16, static_cast<double>(i) / views));
  const double before = cpu_s();
  for (const auto& view : made) {
    stage.show(view);
    stage.window->repaint();
  }
  const double share_of_a_core = (cpu_s() - before) / (views / 30.0);
  std::cout << "16 running nests, every one drawn whole 30 times a second: " << 100.0 * share_of_a_core
            << " % of a core\n";
  EXPECT_LT(share_of_a_core, 1.0);
}

TEST(Cost, FirstPaint) {
  QElapsedTimer timer;
  timer.start();
  Stage stage{busy_scene(4)};
  stage.window->repaint();
  std::cout << "4 nests from nothing to the first picture: " << timer.elapsed() << " ms\n";
  EXPECT_LT(timer.elapsed(), 3000);
}

}  // namespace
}  // namespace probewright::windows
