#include <gtest/gtest.h>

#include <clocale>
#include <locale>

// Tests run under the locale of the environment, as a program with windows does: the tool kit sets it at start.
// So one run with LC_ALL=de_DE.UTF-8 shows whether a decimal comma or a thousands point gets into a number.
int main(int argc, char** argv) {
  testing::InitGoogleTest(&argc, argv);
  if (std::setlocale(LC_ALL, "") != nullptr) std::locale::global(std::locale{""});
  return RUN_ALL_TESTS();
}
