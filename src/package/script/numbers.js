// Numbers as the package prints them: significant digits, rounded half away from zero, thin spaces between
// thousands, powers of ten where a number is very large or very small.

/** A number with so many significant digits. */
function printed(value, significant) {
  const [mantissa, power] = Math.abs(value).toExponential(13).split("e");
  let exponent = Number(power);
  let digits = mantissa.replace(".", "").split("").map(Number);
  const up = digits[significant] >= 5;
  digits = digits.slice(0, significant);
  if (up) {
    while (digits.length > 0 && digits.at(-1) === 9) digits.pop();
    if (digits.length > 0) digits[digits.length - 1] += 1;
    else (digits = [1]), (exponent += 1);
  }
  while (digits.at(-1) === 0) digits.pop();
  if (digits.length === 0) return "0";
  const sign = value < 0 ? "\u2212" : "";
  const text = digits.join("");
  if (exponent < -4 || exponent >= 7) {
    const raised = String(exponent).replace(/./g, (c) => (c === "-" ? "⁻" : "⁰¹²³⁴⁵⁶⁷⁸⁹"[c]));
    return `${sign}${text[0]}${text.length > 1 ? "." : ""}${text.slice(1)}×10${raised}`;
  }
  const whole = exponent < 0 ? "0" : text.slice(0, exponent + 1).padEnd(exponent + 1, "0");
  const decimals = exponent < 0 ? "0".repeat(-exponent - 1) + text : text.slice(exponent + 1);
  return sign + whole.replace(/\B(?=(\d{3})+$)/g, "\u2009") + (decimals && `.${decimals}`);
}
