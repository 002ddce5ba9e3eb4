#include "station/windows/look/contrast.h"

#include <gtest/gtest.h>

#include "station/windows/look/colours.h"

namespace probewright::windows {
namespace {

// Source: WCAG 2.1, definitions of relative luminance and contrast ratio: black on white is 21. The other figure is
// computed by hand from the same formula: 0x76 is 118/255 = 0.46275, linear 0.18116, contrast 1.05/0.23116 = 4.542.
TEST(Contrast, AgreesWithItsDefinition) {
  EXPECT_NEAR(contrast(Qt::black, Qt::white), 21.0, 1e-9);
  EXPECT_NEAR(contrast(QColor{0x76, 0x76, 0x76}, Qt::white), 4.542, 0.001);
  EXPECT_NEAR(contrast(Qt::white, QColor{0x76, 0x76, 0x76}), 4.542, 0.001);
}

struct Pair {
  const char* what;
  QColor Colours::*front;
  QColor Colours::*ground;
  double least;
};

// Every pair of colours that the windows draw upon each other. Text 4.5, what is drawn 3: WCAG 2.1, level AA, 1.4.3 and
// 1.4.11.
const Pair pairs[] = {
    {"ink on card", &Colours::ink, &Colours::card, 4.5},
    {"ink on paper", &Colours::ink, &Colours::paper, 4.5},
    {"ink on well", &Colours::ink, &Colours::well, 4.5},
    {"ink on pass_wash", &Colours::ink, &Colours::pass_wash, 4.5},
    {"ink on fail_wash", &Colours::ink, &Colours::fail_wash, 4.5},
    {"ink on void_wash", &Colours::ink, &Colours::void_wash, 4.5},
    {"ink on wait_wash", &Colours::ink, &Colours::wait_wash, 4.5},
    {"quiet on card", &Colours::quiet, &Colours::card, 4.5},
    {"quiet on paper", &Colours::quiet, &Colours::paper, 4.5},
    {"quiet on pass_wash", &Colours::quiet, &Colours::pass_wash, 4.5},
    {"quiet on fail_wash", &Colours::quiet, &Colours::fail_wash, 4.5},
    {"quiet on void_wash", &Colours::quiet, &Colours::void_wash, 4.5},
    {"quiet on wait_wash", &Colours::quiet, &Colours::wait_wash, 4.5},
    {"pass on card", &Colours::pass, &Colours::card, 4.5},
    {"pass on pass_wash", &Colours::pass, &Colours::pass_wash, 4.5},
    {"pass on paper", &Colours::pass, &Colours::paper, 4.5},
    {"fail on card", &Colours::fail, &Colours::card, 4.5},
    {"fail on fail_wash", &Colours::fail, &Colours::fail_wash, 4.5},
    {"fail on well", &Colours::fail, &Colours::well, 4.5},
    {"fail on paper", &Colours::fail, &Colours::paper, 4.5},
    {"void_run on card", &Colours::void_run, &Colours::card, 4.5},
    {"void_run on void_wash", &Colours::void_run, &Colours::void_wash, 4.5},
    {"wait on card", &Colours::wait, &Colours::card, 4.5},
    {"wait on wait_wash", &Colours::wait, &Colours::wait_wash, 4.5},
    {"wait on paper", &Colours::wait, &Colours::paper, 4.5},
    {"on_accent on accent", &Colours::on_accent, &Colours::accent, 4.5},
    {"accent on paper", &Colours::accent, &Colours::paper, 3.0},
    {"accent on card", &Colours::accent, &Colours::card, 3.0},
    {"red on well", &Colours::red, &Colours::well, 3.0},
    {"infrared on well", &Colours::infrared, &Colours::well, 3.0},
    {"edge on card", &Colours::edge, &Colours::card, 3.0},
    {"edge on well", &Colours::edge, &Colours::well, 3.0},
    {"edge on paper", &Colours::edge, &Colours::paper, 3.0},
    {"guard on card", &Colours::guard, &Colours::card, 3.0},
};

TEST(Contrast, IsEnoughForEveryPairInLightAndDark) {
  for (const Pair& pair : pairs) {
    for (const bool dark : {false, true}) {
      const Colours colours = dark ? dark_colours() : light_colours();
      EXPECT_GE(contrast(colours.*pair.front, colours.*pair.ground), pair.least)
          << pair.what << (dark ? ", dark" : ", light");
    }
  }
}

}  // namespace
}  // namespace probewright::windows
