//! Generated expressions against another evaluator.
//!
//! The other one has min and max between its values and gives unary minus and the operators other strengths;
//! it is therefore given brackets everywhere, while ours is given as few as our rules allow.

use proptest::prelude::*;

use super::quantity;

#[derive(Clone, Debug)]
enum Tree {
    Number(f64),
    Negate(Box<Tree>),
    Binary(char, Box<Tree>, Box<Tree>),
    Power(Box<Tree>, i32),
    Call(&'static str, Box<Tree>),
    Pair(&'static str, Box<Tree>, Box<Tree>),
}

fn trees() -> impl Strategy<Value = Tree> {
    let number = prop_oneof![(0..10_u8).prop_map(f64::from), 0.001..50.0_f64];
    number.prop_map(Tree::Number).prop_recursive(5, 40, 2, |inner| {
        let one = inner.clone().prop_map(Box::new);
        let two = (one.clone(), inner.prop_map(Box::new));
        prop_oneof![
            1 => one.clone().prop_map(Tree::Negate),
            4 => (prop::sample::select(&['+', '-', '*', '/'][..]), two.clone())
                .prop_map(|(sign, (a, b))| Tree::Binary(sign, a, b)),
            1 => (one.clone(), -3..=3_i32).prop_map(|(a, n)| Tree::Power(a, n)),
            2 => (prop::sample::select(&["sqrt", "abs", "sin", "cos", "exp", "ln"][..]), one)
                .prop_map(|(name, a)| Tree::Call(name, a)),
            1 => (prop::sample::select(&["min", "max"][..]), two)
                .prop_map(|(name, (a, b))| Tree::Pair(name, a, b)),
        ]
    })
}

/// As few brackets as the rules of our language allow.
fn ours(tree: &Tree, level: u8) -> String {
    let (own, text) = match tree {
        Tree::Number(value) => (9, format!("{value}")),
        Tree::Negate(a) => (7, format!("-{}", ours(a, 7))),
        Tree::Binary(sign, a, b) => {
            let own = if matches!(sign, '+' | '-') { 5 } else { 6 };
            (own, format!("{} {sign} {}", ours(a, own), ours(b, own + 1)))
        }
        Tree::Power(a, n) => (8, format!("{}^{n}", ours(a, 9))),
        Tree::Call(name, a) => (9, format!("{name}({})", ours(a, 0))),
        Tree::Pair(name, a, b) => (9, format!("{name}({}, {})", ours(a, 0), ours(b, 0))),
    };
    if own < level { format!("({text})") } else { text }
}

fn theirs(tree: &Tree) -> String {
    match tree {
        Tree::Number(value) => format!("{value}"),
        Tree::Negate(a) => format!("(-({}))", theirs(a)),
        Tree::Binary(sign, a, b) => format!("(({}){sign}({}))", theirs(a), theirs(b)),
        Tree::Power(a, n) => format!("(({})^({n}))", theirs(a)),
        Tree::Call(name, a) => format!("({name}({}))", theirs(a)),
        Tree::Pair(name, a, b) => format!("(({}) {name} ({}))", theirs(a), theirs(b)),
    }
}

/// How far two evaluations of a tree may lie apart, to first order: each operation is off by some units in the
/// last place and carries on what its operands are off by. The value comes from the other evaluator. `None`
/// where a value on the way is not finite, or so near the edge of what has one that round-off decides.
fn apart(tree: &Tree) -> Option<f64> {
    const LAST_PLACES: f64 = 4.0 * f64::EPSILON;
    let value = their_value(tree).filter(|value| value.is_finite())?;
    let error = match tree {
        Tree::Number(_) => return Some(0.0),
        Tree::Negate(a) => return apart(a),
        Tree::Binary(sign, a, b) => {
            let (ea, eb) = (apart(a)?, apart(b)?);
            let (a, b) = (their_value(a)?, their_value(b)?);
            match sign {
                '+' | '-' => ea + eb,
                '*' => ea * b.abs() + eb * a.abs(),
                _ => far(b, eb).then(|| (ea + value.abs() * eb) / b.abs())?,
            }
        }
        Tree::Power(_, 0) => 0.0,
        Tree::Power(a, n) => {
            let (e, a) = (apart(a)?, their_value(a)?);
            if e <= 0.0 {
                0.0
            } else {
                far(a, e).then(|| f64::from(*n).abs() * value.abs() * e / a.abs())?
            }
        }
        Tree::Call(name, a) => {
            let (e, a) = (apart(a)?, their_value(a)?);
            match *name {
                "exp" => value * e,
                "ln" => far(a, e).then(|| e / a)? + f64::EPSILON,
                "sqrt" if e <= 0.0 => 0.0,
                "sqrt" => far(a, e).then(|| e / a.sqrt())?,
                "abs" => e,
                _ => e + f64::EPSILON,
            }
        }
        Tree::Pair(_, a, b) => apart(a)?.max(apart(b)?),
    };
    Some(error + LAST_PLACES * value.abs())
}

fn far(value: f64, error: f64) -> bool {
    value.abs() > 1e3 * error
}

fn their_value(tree: &Tree) -> Option<f64> {
    exmex::eval_str::<f64>(&theirs(tree)).ok()
}

/// Some value on the way is not finite, whatever becomes of it later.
fn breaks(tree: &Tree) -> bool {
    let inner = match tree {
        Tree::Number(_) => false,
        Tree::Negate(a) | Tree::Power(a, _) | Tree::Call(_, a) => breaks(a),
        Tree::Binary(_, a, b) | Tree::Pair(_, a, b) => breaks(a) || breaks(b),
    };
    inner || their_value(tree).is_none_or(|value| !value.is_finite())
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 2000, max_global_rejects: 20_000, ..ProptestConfig::default() })]
    #[test]
    fn expressions_have_the_value_that_another_evaluator_finds(tree in trees()) {
        let text = ours(&tree, 0);
        let found = quantity(&text);
        if breaks(&tree) {
            prop_assert!(found.is_err(), "{text}: {found:?}");
            return Ok(());
        }
        let Some(apart) = apart(&tree) else { return Err(TestCaseError::reject("round-off decides")) };
        let value = their_value(&tree).expect("it does not break");
        let found = found.map_err(|error| TestCaseError::fail(format!("{text}: {error:?}")))?;
        prop_assert!((found.value - value).abs() <= apart, "{text}: {} and {value}", found.value);
    }
}
