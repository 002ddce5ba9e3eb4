#pragma once
#include <filesystem>
#include <string>
#include <vector>

/// Looking at pages with programs that know nothing of ours: poppler, dmtx, zbar.
namespace looking {

/// A folder of its own, removed with all that is in it. With PW_KEEP_PAGES set, files go there and stay.
class Folder {
 public:
  Folder();
  ~Folder();
  Folder(const Folder&) = delete;
  Folder& operator=(const Folder&) = delete;
  std::filesystem::path operator/(const std::string& name) const { return path_ / name; }

 private:
  std::filesystem::path path_;
  bool keep_ = false;
};

/// What a program printed. Throws std::runtime_error with its complaint if it cannot be started or fails.
std::string output_of(const std::string& program, const std::vector<std::string>& arguments);

/// The text of a PDF, in the order of the page; `layout` keeps columns side by side.
std::string text_of(const std::filesystem::path& pdf, bool layout = false);

struct PdfFacts {
  int pages = 0;
  double width_mm = 0.0, height_mm = 0.0;
};
PdfFacts facts_of(const std::filesystem::path& pdf);

/// What a DataMatrix in a picture says; FNC1 comes as `separator`, in front too.
std::string data_matrix_in(const std::filesystem::path& png, char separator);
/// What a Code 128 in a picture says.
std::string code_128_in(const std::filesystem::path& png);

/// A page of a PDF as a picture beside it, in black and grey.
std::filesystem::path picture_of(const std::filesystem::path& pdf, int dots_per_inch);

}  // namespace looking
