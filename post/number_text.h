/// Numbers as people read them: sensible digits, thousands apart, error bars.
#pragma once
#include <string>

namespace falcate::post {

/// `digits` significant digits, no exponent from 1e-4 to 1e7; thousands apart from five digits on
/// (narrow no-break space); a minus sign, not a hyphen; "n/a" where it is not a finite number.
std::string number_text(double value, int digits = 4);

/// Rounded to a whole number, thousands apart.
std::string whole_number_text(double value);

/// "61.24 ± 0.38": the error with two significant digits, the value to the same place. An error
/// below a ten-thousandth of the value counts as that; without a usable error (zero, not finite)
/// the value alone, with four digits.
std::string number_with_error(double value, double error);

/// Step of a scale with about `count` steps over `range` > 0: 1, 2, 2.5 or 5 times a power of ten.
double even_step(double range, int count);

}  // namespace falcate::post
