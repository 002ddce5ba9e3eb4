#include "station/pages/files_out.h"

#include <QSaveFile>

namespace probewright::pages {

Result<void> replace_file(const std::filesystem::path& path, const QByteArray& bytes) {
  QSaveFile file{QString::fromStdString(path.string())};
  if (file.open(QIODevice::WriteOnly) && file.write(bytes) == bytes.size() && file.commit()) return {};
  return Problem{"page_not_written", path.string(), {{"reason", file.errorString().toStdString()}}};
}

}  // namespace probewright::pages
