#include "post/html.h"

#include <gtest/gtest.h>

namespace falcate::post {
namespace {

TEST(Html, MarkupBecomesEntities) {
  EXPECT_EQ(escape_html("<script>alert(\"x\")</script> & 'y'"),
            "&lt;script&gt;alert(&quot;x&quot;)&lt;/script&gt; &amp; &#39;y&#39;");
}

TEST(Html, ControlCharactersBecomeSpacesAndLettersStay) {
  EXPECT_EQ(escape_html(std::string("a\x01"
                                    "b\x7f"
                                    "c\0d\ne\tf",
                                    11)),
            "a b c d\ne\tf");
  EXPECT_EQ(escape_html("20 °C, η = ½"), "20 °C, η = ½");
}

}  // namespace
}  // namespace falcate::post
