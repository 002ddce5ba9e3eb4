#include "db/lease.h"

#include <gtest/gtest.h>

#include "sample.h"

namespace probewright::db {
namespace {

TEST(Lease, OneAtATimeAndFreeWhenItGoes) {
  sample::Folder folder;
  const std::string path = folder.file("ledger.db");
  {
    const auto first = Lease::take(path);
    ASSERT_TRUE(first);
    const auto second = Lease::take(path);
    ASSERT_FALSE(second);
    EXPECT_EQ(second.error().id, "ledger_in_use");
    EXPECT_EQ(second.error().kind(), ProblemKind::not_ready);
  }
  EXPECT_TRUE(Lease::take(path));
  EXPECT_EQ(Lease::take(folder.file("no/such/ledger.db")).error().id, "ledger_cannot_open");
}

// Source: <linux/magic.h> for the numbers; /proc/self/mountinfo, proc(5), for the names.
TEST(Lease, KnowsNetworkFileSystems) {
  EXPECT_TRUE(is_network_file_system(0x6969, "nfs4"));
  EXPECT_TRUE(is_network_file_system(0xff534d42, "cifs"));
  EXPECT_TRUE(is_network_file_system(0x01021997, "9p"));
  EXPECT_FALSE(is_network_file_system(0xef53, "ext4"));
  EXPECT_FALSE(is_network_file_system(0x01021994, "tmpfs"));
  EXPECT_FALSE(is_network_file_system(0x794c7630, "overlay"));
  EXPECT_TRUE(is_network_file_system(0x65735546, "fuse.sshfs"));
  EXPECT_FALSE(is_network_file_system(0x65735546, "fuse.fuse-overlayfs"));
}

TEST(Lease, SaysWhichFolderAPathIsIn) {
  EXPECT_EQ(folder_of("/a/b.db"), "/a");
  EXPECT_EQ(folder_of("/b.db"), "/");
  EXPECT_EQ(folder_of("b.db"), ".");
  EXPECT_EQ(network_file_system_of("/no/such/folder"), "");
}

}  // namespace
}  // namespace probewright::db
