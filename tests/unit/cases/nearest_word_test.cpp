#include "cases/nearest_word.h"

#include <gtest/gtest.h>

namespace falcate::cases {
namespace {

TEST(NearestWord, CountsTheEditsBetweenTwoWords) {
  // kitten -> sitting takes three, the textbook example; a swap of neighbours counts as one.
  EXPECT_EQ(edit_distance("kitten", "sitting"), 3);
  EXPECT_EQ(edit_distance("", "abc"), 3);
  EXPECT_EQ(edit_distance("abc", "abc"), 0);
  EXPECT_EQ(edit_distance("cuont", "count"), 1);
}

TEST(NearestWord, OffersTheNearestAndNothingFarAway) {
  const std::vector<std::string> keys{"blade_count", "blade_width", "speed", "speeds"};
  EXPECT_EQ(nearest_word("blade_cuont", keys), "blade_count");
  EXPECT_EQ(nearest_word("bladeCount", keys), "blade_count");
  EXPECT_EQ(nearest_word("sped", keys), "speed");
  EXPECT_EQ(nearest_word("ring", {"open", "ringed"}), "ringed");
  EXPECT_EQ(nearest_word("colour", keys), std::nullopt);
}

}  // namespace
}  // namespace falcate::cases
