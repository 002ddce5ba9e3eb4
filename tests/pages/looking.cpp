#include "looking.h"

#include <stdlib.h>

#include <QProcess>
#include <QString>
#include <QStringList>
#include <sstream>
#include <stdexcept>

namespace looking {

namespace fs = std::filesystem;

Folder::Folder() {
  if (const char* kept = std::getenv("PW_KEEP_PAGES")) {
    path_ = kept;
    keep_ = true;
    fs::create_directories(path_);
    return;
  }
  std::string name = (fs::temp_directory_path() / "probewright-pages-XXXXXX").string();
  if (mkdtemp(name.data()) == nullptr) throw std::runtime_error("no folder for the test");
  path_ = name;
}

Folder::~Folder() {
  if (!keep_) fs::remove_all(path_);
}

std::string output_of(const std::string& program, const std::vector<std::string>& arguments) {
  QStringList words;
  for (const std::string& argument : arguments) words << QString::fromStdString(argument);
  QProcess process;
  process.start(QString::fromStdString(program), words);
  if (!process.waitForStarted(10'000)) throw std::runtime_error(program + " cannot be started; see tests/packages.txt");
  process.closeWriteChannel();
  const bool ended = process.waitForFinished(60'000);
  const QByteArray printed = process.readAllStandardOutput();
  if (!ended || process.exitStatus() != QProcess::NormalExit || process.exitCode() != 0)
    throw std::runtime_error(program + ": " + process.readAllStandardError().toStdString() + printed.toStdString());
  return printed.toStdString();
}

std::string text_of(const fs::path& pdf, bool layout) {
  std::vector<std::string> words{pdf.string(), "-"};
  if (layout) words.insert(words.begin(), "-layout");
  return output_of("pdftotext", words);
}

PdfFacts facts_of(const fs::path& pdf) {
  constexpr double mm_per_point = 25.4 / 72;
  PdfFacts facts;
  std::istringstream lines{output_of("pdfinfo", {pdf.string()})};
  for (std::string line; std::getline(lines, line);) {
    std::istringstream words{line.substr(line.find(':') + 1)};
    std::string times;
    if (line.starts_with("Pages:")) words >> facts.pages;
    if (line.starts_with("Page size:")) words >> facts.width_mm >> times >> facts.height_mm;
  }
  facts.width_mm *= mm_per_point;
  facts.height_mm *= mm_per_point;
  return facts;
}

std::string data_matrix_in(const fs::path& png, char separator) {
  return output_of("dmtxread", {"-N1", "-m20000", "-G" + std::to_string(static_cast<int>(separator)), png.string()});
}

std::string code_128_in(const fs::path& png) {
  std::string text = output_of("zbarimg", {"--quiet", "--raw", "-Sdisable", "-Scode128.enable", png.string()});
  if (text.ends_with('\n')) text.pop_back();
  return text;
}

fs::path picture_of(const fs::path& pdf, int dots_per_inch) {
  fs::path stem = pdf;
  stem.replace_extension();
  output_of("pdftoppm", {"-r", std::to_string(dots_per_inch), "-gray", "-png", "-singlefile", pdf.string(),
                         stem.string() + "-drawn"});
  return stem.string() + "-drawn.png";
}

}  // namespace looking
