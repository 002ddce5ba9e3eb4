#include <gtest/gtest.h>

#include <QScrollBar>

#include "stage.h"
#include "station/windows/line/berth_grid.h"
#include "station/windows/look/label.h"

namespace probewright::windows {
namespace {

struct Case {
  int nests;
  Showing showing;
};

std::string name_of(const Case& one) {
  return "nests" + std::to_string(one.nests) + "_" + std::to_string(one.showing.size.width()) +
         (one.showing.dark ? "_dark_" : "_light_") + std::to_string(one.showing.percent) + "_" +
         one.showing.language.toStdString();
}

std::vector<Case> all_cases() {
  std::vector<Case> cases;
  for (const int nests : {1, 4, 16})
    for (const QSize size : {QSize{1280, 800}, QSize{1920, 1080}})
      for (const bool dark : {false, true})
        for (const int percent : {100, 150})
          for (const char* language : {"en", "de"}) cases.push_back({nests, {size, dark, percent, language}});
  return cases;
}

class Pictures : public testing::TestWithParam<Case> {};

// Everything that a person needs is in sight: no berth scrolls, no label is cut off.
TEST_P(Pictures, AllFits) {
  Stage stage{busy_scene(GetParam().nests), GetParam().showing};
  const QImage image = stage.picture(QString::fromStdString(name_of(GetParam())));
  EXPECT_EQ(image.size(), GetParam().showing.size);
  EXPECT_EQ(stage.window->line().grid().verticalScrollBar()->maximum(), 0);
  for (const Label* label : stage.window->findChildren<Label*>()) {
    if (!label->isVisible()) continue;
    const int wanted = label->wordWrap() ? label->heightForWidth(label->width()) : label->sizeHint().height();
    EXPECT_LE(wanted, label->height() + 1) << label->text().toStdString();
    if (!label->wordWrap()) EXPECT_LE(label->sizeHint().width(), label->width()) << label->text().toStdString();
  }
}

INSTANTIATE_TEST_SUITE_P(All, Pictures, testing::ValuesIn(all_cases()),
                         [](const auto& one) { return name_of(one.param); });

}  // namespace
}  // namespace probewright::windows
