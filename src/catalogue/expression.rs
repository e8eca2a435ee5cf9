//! Expressions of combination rules.
//!
//! A sum of terms; each term is a factor and a kind of action: `1.2 D + 1.6 L + (0.5 Lr | 0.3 S)`,
//! `(gamma_G_sup | gamma_G_inf) permanent + gamma_Q leading + gamma_Q psi0 accompanying`. Factors are numbers,
//! names of values and ψ0 to ψ2 (`psi0`), multiplied by standing side by side. In brackets `|` parts
//! alternatives: of factors (each source of permanent actions chooses for itself), or of terms (one row each).

use indexmap::IndexMap;

/// A factor: a number times, where it says so, a ψ of the action.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Factor {
    pub number: f64,
    /// 0, 1 or 2.
    pub psi: Option<usize>,
}

/// Factors to choose from, on a kind of action.
#[derive(Clone, Debug, PartialEq)]
pub struct Term {
    pub choices: Vec<Factor>,
    pub kind: String,
}

/// What an expression is wrong about.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{0}")]
pub struct ExpressionError(pub String);

/// Kinds of action that an expression can name.
pub const KINDS: [&str; 17] = [
    "permanent",
    "leading",
    "accompanying",
    "variable",
    "accidental",
    "seismic",
    "D",
    "L",
    "Lr",
    "S",
    "R",
    "W",
    "F",
    "H",
    "T",
    "Ev",
    "Eh",
];

/// Deepest nesting of brackets.
const DEEPEST: usize = 8;
/// Most alternatives of one expression.
const MOST: usize = 256;

/// Reads an expression into its alternatives, each a list of terms. Of alternatives in brackets only those
/// count whose actions exist; where none does, nothing stands in their place.
///
/// # Errors
/// A name that is neither a value nor a kind, or what is not an expression.
pub fn branches(
    text: &str,
    values: &IndexMap<String, f64>,
    exists: &dyn Fn(&str) -> bool,
) -> Result<Vec<Vec<Term>>, ExpressionError> {
    let mut reader = Reader { tokens: tokens(text)?, at: 0, depth: 0, values, exists };
    let read = reader.sum()?;
    if let Some(left) = reader.tokens.get(reader.at) {
        return Err(ExpressionError(format!("`{left}` does not belong here")));
    }
    match read {
        Read::Terms(branches) => Ok(branches),
        Read::Numbers(_) => Err(ExpressionError("a factor without an action".to_owned())),
    }
}

enum Read {
    Numbers(Vec<Factor>),
    Terms(Vec<Vec<Term>>),
}

struct Reader<'v> {
    tokens: Vec<String>,
    at: usize,
    depth: usize,
    values: &'v IndexMap<String, f64>,
    exists: &'v dyn Fn(&str) -> bool,
}

fn tokens(text: &str) -> Result<Vec<String>, ExpressionError> {
    let mut out: Vec<String> = Vec::new();
    let mut chars = text.chars().peekable();
    while let Some(c) = chars.next() {
        match c {
            c if c.is_whitespace() => {}
            '(' | ')' | '|' | '+' | '-' | '*' => out.push(c.to_string()),
            c if c.is_alphanumeric() => {
                let mut word = c.to_string();
                while let Some(next) =
                    chars.next_if(|c| c.is_alphanumeric() || matches!(c, '_' | '.'))
                {
                    word.push(next);
                }
                out.push(word);
            }
            c => return Err(ExpressionError(format!("`{c}` has no meaning in a rule"))),
        }
    }
    Ok(out)
}

impl Reader<'_> {
    fn peek(&self) -> Option<&str> {
        self.tokens.get(self.at).map(String::as_str)
    }

    fn takes(&mut self, sign: &str) -> bool {
        let there = self.peek() == Some(sign);
        self.at += usize::from(there);
        there
    }

    fn sum(&mut self) -> Result<Read, ExpressionError> {
        let negative = self.takes("-");
        let mut sum = scaled(self.product()?, if negative { -1.0 } else { 1.0 });
        loop {
            let sign = if self.takes("+") {
                1.0
            } else if self.takes("-") {
                -1.0
            } else {
                return Ok(sum);
            };
            let next = scaled(self.product()?, sign);
            sum = match (sum, next) {
                (Read::Terms(left), Read::Terms(right)) => Read::Terms(joined(&left, &right)?),
                _ => return Err(ExpressionError("a factor without an action".to_owned())),
            };
        }
    }

    fn product(&mut self) -> Result<Read, ExpressionError> {
        let mut product = self.atom()?;
        loop {
            self.takes("*");
            if matches!(self.peek(), None | Some("+" | "-" | ")" | "|")) {
                return Ok(product);
            }
            product = match (product, self.atom()?) {
                (Read::Numbers(a), Read::Numbers(b)) => Read::Numbers(crossed(&a, &b)?),
                (Read::Numbers(a), Read::Terms(branches)) => {
                    let mut out = Vec::new();
                    for branch in branches {
                        let terms: Result<Vec<Term>, ExpressionError> = branch
                            .into_iter()
                            .map(|term| {
                                Ok(Term { choices: crossed(&a, &term.choices)?, kind: term.kind })
                            })
                            .collect();
                        out.push(terms?);
                    }
                    Read::Terms(out)
                }
                (Read::Terms(_), _) => {
                    return Err(ExpressionError("a factor stands before its action".to_owned()));
                }
            };
        }
    }

    fn atom(&mut self) -> Result<Read, ExpressionError> {
        let Some(token) = self.peek().map(str::to_owned) else {
            return Err(ExpressionError("the expression breaks off".to_owned()));
        };
        self.at += 1;
        if token == "(" {
            return self.brackets();
        }
        let number = |number: f64| Ok(Read::Numbers(vec![Factor { number, psi: None }]));
        if token.starts_with(|c: char| c.is_ascii_digit()) {
            return match token.parse() {
                Ok(value) => number(value),
                Err(_) => Err(ExpressionError(format!("`{token}` is not a number"))),
            };
        }
        if let Some(psi) = ["psi0", "psi1", "psi2"].iter().position(|name| *name == token) {
            return Ok(Read::Numbers(vec![Factor { number: 1.0, psi: Some(psi) }]));
        }
        if let Some(value) = self.values.get(&token) {
            return number(*value);
        }
        if KINDS.contains(&token.as_str()) {
            let one = Factor { number: 1.0, psi: None };
            return Ok(Read::Terms(vec![vec![Term { choices: vec![one], kind: token }]]));
        }
        Err(ExpressionError(format!(
            "`{token}` is neither a value of the rule nor a kind of action"
        )))
    }

    fn brackets(&mut self) -> Result<Read, ExpressionError> {
        self.depth += 1;
        if self.depth > DEEPEST {
            return Err(ExpressionError(format!("brackets nest at most {DEEPEST} deep")));
        }
        let mut read = self.sum()?;
        let mut several = false;
        while self.takes("|") {
            several = true;
            read = match (read, self.sum()?) {
                (Read::Numbers(mut a), Read::Numbers(b)) => {
                    a.extend(b);
                    Read::Numbers(a)
                }
                (Read::Terms(mut a), Read::Terms(b)) => {
                    a.extend(b);
                    Read::Terms(a)
                }
                _ => {
                    let message = "alternatives are all factors, or all terms";
                    return Err(ExpressionError(message.to_owned()));
                }
            };
        }
        if let (true, Read::Terms(alternatives)) = (several, &mut read) {
            alternatives.retain(|terms| terms.iter().all(|term| (self.exists)(&term.kind)));
            if alternatives.is_empty() {
                alternatives.push(Vec::new());
            }
        }
        self.depth -= 1;
        if self.takes(")") {
            Ok(read)
        } else {
            Err(ExpressionError("a bracket is not closed".to_owned()))
        }
    }
}

fn scaled(read: Read, by: f64) -> Read {
    let scale = |factors: Vec<Factor>| -> Vec<Factor> {
        factors.into_iter().map(|f| Factor { number: f.number * by, ..f }).collect()
    };
    match read {
        Read::Numbers(factors) => Read::Numbers(scale(factors)),
        Read::Terms(branches) => Read::Terms(
            branches
                .into_iter()
                .map(|branch| {
                    branch
                        .into_iter()
                        .map(|term| Term { choices: scale(term.choices), kind: term.kind })
                        .collect()
                })
                .collect(),
        ),
    }
}

fn crossed(a: &[Factor], b: &[Factor]) -> Result<Vec<Factor>, ExpressionError> {
    let mut out = Vec::with_capacity(a.len() * b.len());
    for left in a {
        for right in b {
            let psi = match (left.psi, right.psi) {
                (Some(_), Some(_)) => {
                    return Err(ExpressionError("a factor has one ψ at most".to_owned()));
                }
                (psi, other) => psi.or(other),
            };
            out.push(Factor { number: left.number * right.number, psi });
        }
    }
    Ok(out)
}

fn joined(a: &[Vec<Term>], b: &[Vec<Term>]) -> Result<Vec<Vec<Term>>, ExpressionError> {
    if a.len() * b.len() > MOST {
        return Err(ExpressionError(format!("more than {MOST} alternatives")));
    }
    Ok(a.iter()
        .flat_map(|left| {
            b.iter().map(move |right| left.iter().chain(right).cloned().collect::<Vec<Term>>())
        })
        .collect())
}
