//! Words that every package carries, whatever its templates say.

/// Behind the cover.
pub(super) const NOTICE: &str = "\
**Notice of responsibility.**
This package supports and does not replace the judgement of a licensed engineer.
Local codes and national annexes govern wherever they differ from what is shown here.
It has no standing until the engineer who is responsible for it has reviewed it, completed what it defers, and signed it.
";

/// At the end of the chapter on what is deferred.
pub(super) const CAUTIONS: &str = "\
## Cautions

- The actions, factors and combinations are those that the engineer wrote; the program does not know whether they are all that the code asks for.
- Strength, stability, deflection limits, vibration, fatigue, fire, connections and foundations are not shown unless a chapter of this package shows them.
- The analysis is linear and of first order: effects of displacements on equilibrium, imperfections, buckling, and members or supports that act one way only are not in it.
- Section and material values reproduce published tables as their sources say; where a printed value must be matched, compare it before use.
- Before anyone relies on this package, a licensed engineer must check it against the codes and the conditions of the place.
";
