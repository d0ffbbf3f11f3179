#include "tests/validation/page_section.h"

#include <gtest/gtest.h>

namespace falcate::validation {
namespace {

TEST(PageSection, IsWrittenAnewAndLeavesTheRest) {
  const std::string page =
      "Head\n<!-- begin a -->\nold\n<!-- end a -->\nmiddle\n<!-- begin b -->\nb\n<!-- end b -->\n";
  EXPECT_EQ(with_section(page, "a", "new\n"),
            "Head\n<!-- begin a -->\nnew\n<!-- end a -->\nmiddle\n<!-- begin b -->\nb\n<!-- end b "
            "-->\n");
  EXPECT_EQ(with_section("Head\n", "c", "c\n"), "Head\n\n<!-- begin c -->\nc\n<!-- end c -->\n");
}

}  // namespace
}  // namespace falcate::validation
