// Sheets that were printed to PDF: the last one as a screen shows it, the files of earlier ones, and their
// way to the printer.
#pragma once

#include <bathwright/sheets/page_pdf.hpp>
#include <filesystem>
#include <memory>

#include "../panels/view.hpp"
#include "latest_job.hpp"
#include "signing.hpp"

namespace bathwright::desktop {

struct PrintedSheet {
  sheets::Page page;
  sheets::Paper paper = sheets::Paper::a4;
  std::filesystem::path file;
};

/// Writes the PDF; what came of it, in words: what is signed stands whether or not a file of it could be
/// written, and then has none.
[[nodiscard]] std::string print(PrintedSheet& sheet);

class Printing {
 public:
  explicit Printing(const std::function<void()>& wake);

  /// Where a shop's sheets are kept; nothing of another shop's is shown any more.
  void look_in(const std::filesystem::path& folder);
  [[nodiscard]] const std::filesystem::path& folder() const { return folder_; }
  /// The last one from now on, where it is of this folder; its file is written.
  void add(std::shared_ptr<const PrintedSheet> sheet);
  void show();
  void close();
  /// By the shop's print command. Nothing while another is on its way, or where the folder has no such file.
  void send(const std::string& command, const std::string& file);
  /// Takes what was drawn and sent since; true where the view has changed.
  bool update();
  [[nodiscard]] bool working() const { return preview_job_.working() || sending_.busy(); }
  [[nodiscard]] PrintedView view(const std::string& command) const;

 private:
  struct Preview {
    std::vector<std::shared_ptr<const sheets::Picture>> sheets;
    Problems problems;
  };
  void read_folder();

  std::filesystem::path folder_;
  std::vector<std::string> files_;  ///< newest first
  std::shared_ptr<const PrintedSheet> last_;
  std::optional<Preview> preview_;
  bool shown_ = false;
  std::string said_, fault_;
  Signing sending_;
  LatestJob<std::shared_ptr<const PrintedSheet>, Preview> preview_job_;
};

}  // namespace bathwright::desktop
