#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/stat.h>
#include <sys/wait.h>

#include <cstdlib>
#include <fstream>

#include "program.h"

// What an auditor and a steward do with a ledger, each command as a person types it, checked with stock tools.
namespace {

using program::Folder;
using testing::HasSubstr;

constexpr const char* serial = "AQ20-048-00001";

class LedgerCommands : public testing::Test {
 protected:
  LedgerCommands() {
    program::Beside bench{folder, {"bench", "--speed", "20"}, "bench"};
    EXPECT_TRUE(bench.says("ready\n", 20)) << bench.err();
    const auto tested = ask({"test", serial, "--speed", "20", "--json"});
    EXPECT_EQ(tested.status, 0) << tested.out;
    seal = tested.json()["seal"].get<std::string>();
    entry = std::to_string(tested.json()["entry"].get<int>());
  }
  program::Ran ask(const std::vector<std::string>& arguments) { return program::run(folder, arguments); }
  std::string ledger() const { return folder.file("data/probewright/Quay-1/ledger.db"); }
  /// Exit status of a shell command.
  int shell(const std::string& command) const {
    return WEXITSTATUS(std::system((command + " > " + folder.file("shell.out") + " 2>&1").c_str()));
  }
  std::string key() const {
    const std::string file = folder.file("key.pem");
    EXPECT_EQ(shell("umask 077; openssl genpkey -algorithm ed25519 -out " + file), 0);
    return file;
  }

  Folder folder;
  std::string seal, entry;
};

TEST_F(LedgerCommands, BackupRestoreAndDrill) {
  const std::string backup = folder.file("backup.db"), again = folder.file("again.db");
  const auto made = ask({"ledger", "backup", backup, "--who", "Piet Hallgrim", "--json"});
  ASSERT_EQ(made.status, 0) << made.out << made.err;
  EXPECT_EQ(made.json()["recorded"], true);
  EXPECT_EQ(made.json()["seal"], seal);
  EXPECT_EQ(shell("echo '" + made.json()["sha256"].get<std::string>() + "  " + backup + "' | sha256sum -c"), 0);
  EXPECT_EQ(ask({"ledger", "backup", backup}).status, 2) << "nothing is written over";
  const auto drill = ask({"ledger", "restore", backup, "--drill", "--seal", seal, "--entry", entry, "--json"});
  EXPECT_EQ(drill.status, 0) << drill.out;
  EXPECT_EQ(drill.json()["recorded"], true);
  const auto restored =
      ask({"ledger", "restore", backup, again, "--who", "Piet Hallgrim", "--reason", "the disk died", "--json"});
  EXPECT_EQ(restored.status, 0) << restored.out;
  const auto verified = ask({"ledger", "verify", again, "--seal", seal, "--entry", entry, "--json"});
  EXPECT_EQ(verified.status, 0) << verified.out;
  EXPECT_EQ(verified.json()["entries"].get<int>(), std::stoi(entry) + 1) << "and one that says it was restored";
  // The ledger has an entry of the backup and of the drill; the backup itself is a copy and takes none.
  EXPECT_EQ(ask({"ledger", "seal", "--json"}).json()["entry"].get<int>(), std::stoi(entry) + 2);
  EXPECT_EQ(ask({"ledger", "backup", folder.file("of-a-copy.db"), "--ledger", backup, "--json"}).json()["recorded"],
            false);
}

TEST_F(LedgerCommands, ASignedBundleIsCheckedByStockTools) {
  const std::string bundle = folder.file("bundle"), tar = folder.file("bundle.tar");
  const auto made = ask({"ledger", "export", bundle, "--key", key(), "--with-captures", "--json"});
  ASSERT_EQ(made.status, 0) << made.out << made.err;
  ASSERT_EQ(made.json()["check"].size(), 2u);
  std::ifstream readme(bundle + "/README.txt");
  const std::string words{std::istreambuf_iterator<char>(readme), {}};
  for (const auto& command : made.json()["check"]) {
    const std::string typed = command.get<std::string>();
    EXPECT_EQ(shell("cd " + bundle + " && " + typed), 0) << typed;
    EXPECT_THAT(words, HasSubstr(typed));
  }
  ASSERT_EQ(ask({"ledger", "export", tar, "--serial", serial, "--key", key()}).status, 0);
  EXPECT_EQ(shell("mkdir " + folder.file("t") + " && tar -C " + folder.file("t") + " -xf " + tar + " && cd " +
                  folder.file("t") + " && sha256sum --strict -c SHA256SUMS"),
            0);
  // Any file changed, the list changed, another key: each is told.
  EXPECT_EQ(shell("cd " + bundle + " && echo x >> runs.csv && sha256sum -c SHA256SUMS"), 1);
  EXPECT_EQ(shell("cd " + bundle + " && echo x >> SHA256SUMS && " + made.json()["check"][1].get<std::string>()), 1);
  ::chmod(key().c_str(), 0644);
  EXPECT_THAT(ask({"ledger", "export", folder.file("b2"), "--key", folder.file("key.pem")}).err,
              HasSubstr("others may read this private key"));
}

TEST_F(LedgerCommands, TablesReadAsTablesAndJsonAsJson) {
  const std::string csv = folder.file("r.csv"), json = folder.file("r.json");
  ASSERT_EQ(ask({"ledger", "export", csv, "--as", "readings"}).status, 0);
  ASSERT_EQ(ask({"ledger", "export", json, "--as", "json"}).status, 0);
  const std::string script =
      "import csv, json; rows = list(csv.DictReader(open('" + csv +
      "', newline='')));"
      "runs = json.load(open('" +
      json +
      "'))['runs'];"
      "stored = {r['check']: r['value'] for r in runs[0]['readings']};"
      "assert len(rows) == len(stored) > 10;"
      "assert all((float(r['value']) if r['value'] else None) == stored[r['check']] for r in rows)";
  EXPECT_EQ(shell("python3 -c \"" + script + "\""), 0);
  EXPECT_EQ(ask({"ledger", "export", folder.file("n"), "--serial", "AQ20-048-99999"}).status, 1);
}

TEST_F(LedgerCommands, RederiveAndImpact) {
  const auto again = ask({"rederive", serial, "--json"});
  EXPECT_EQ(again.status, 0) << again.out;
  EXPECT_EQ(again.json()["bitwise"], again.json()["readings"]);
  EXPECT_EQ(again.json()["same_build"], 1);
  const std::vector<std::string> question{"impact", "PH-01", "--since", "2020-01-01", "--off", "wavelength", "--by"};
  auto with = [&](const std::vector<std::string>& more) {
    std::vector<std::string> all = question;
    all.insert(all.end(), more.begin(), more.end());
    return ask(all);
  };
  EXPECT_EQ(with({"0", "--json"}).status, 0);
  const auto far = with({"6", "--json", "--hold", "--who", "Maren Quill", "--reason", "PH-01 was off"});
  EXPECT_EQ(far.status, 1) << far.out << far.err;
  EXPECT_EQ(far.json()["would_fail"], 1);
  EXPECT_EQ(far.json()["held"], 1);
  EXPECT_EQ(far.json()["rows"][0]["by"], "rederivation");
  EXPECT_EQ(ask({"impact", "PH-09", "--since", "2020-01-01", "--off", "drive", "--by", "1"}).status, 2);
}

TEST_F(LedgerCommands, AVolumeClosesAndPruneIsOnlyToldUnlessAsked) {
  const auto told = ask({"ledger", "prune", "--record-days", "1", "--json"});
  EXPECT_EQ(told.status, 0) << told.out;
  EXPECT_EQ(told.json()["done"], false);
  EXPECT_EQ(told.json()["left_in_period"], 1);
  const auto closed =
      ask({"ledger", "close-volume", "--who", "Piet Hallgrim", "--reason", "end of the year", "--json"});
  ASSERT_EQ(closed.status, 0) << closed.out << closed.err;
  const auto first = ask({"ledger", "verify", closed.json()["archive"].get<std::string>(), "--json"});
  EXPECT_EQ(first.status, 0) << first.out;
  EXPECT_EQ(first.json()["runs"], 1);
  const auto second = ask({"ledger", "verify", ledger(), "--json"});
  EXPECT_EQ(second.status, 0) << second.out;
  EXPECT_EQ(second.json()["volumes"], 2);
  EXPECT_TRUE(second.json()["broken_link"].is_null());
}

}  // namespace
