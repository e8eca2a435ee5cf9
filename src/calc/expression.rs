//! The tree of a formula.

use std::ops::Range;

use super::Function;
use crate::quantity::{Quantity, Unit};

/// A formula, parsed.
#[derive(Clone, Debug, PartialEq)]
pub struct Formula {
    /// As written, without a stated unit of printing.
    pub text: String,
    pub(super) root: Expr,
    /// What it reads, each once, in order of first use; the values are handed over in this order.
    pub readings: Vec<Reading>,
    /// The unit in which the result is to be printed, where stated: `span / 360 [mm]`.
    pub unit: Option<Unit>,
}

/// Something that a formula reads: a plain name, or a call such as `greatest(M_y)` that is not one of
/// the functions of mathematics.
#[derive(Clone, Debug, PartialEq)]
pub struct Reading {
    /// As written, blanks taken out; equal texts read the same.
    pub text: String,
    pub name: String,
    /// `None` for a plain name.
    pub arguments: Option<Vec<(Option<String>, Argument)>>,
    /// Where it stands first.
    pub range: Range<usize>,
}

/// What stands in the brackets of a [`Reading`].
#[derive(Clone, Debug, PartialEq)]
pub enum Argument {
    Name(String),
    Text(String),
    Quantity(Quantity),
}

#[derive(Clone, Debug, PartialEq)]
pub(super) struct Expr {
    pub(super) range: Range<usize>,
    pub(super) kind: ExprKind,
}

#[derive(Clone, Debug, PartialEq)]
pub(super) enum ExprKind {
    /// A number with its unit, both as written.
    Quantity {
        quantity: Quantity,
        number: String,
        unit: String,
    },
    Pi,
    /// A word in quotes.
    Word(String),
    /// Index into [`Formula::readings`].
    Read(usize),
    Negate(Box<Expr>),
    Not(Box<Expr>),
    Binary(Binary, Box<Expr>, Box<Expr>),
    Call(Function, Vec<Expr>),
    /// The number of units in a value: `value_in(f_c, MPa)`.
    ValueIn(Box<Expr>, Unit),
    If {
        condition: Box<Expr>,
        then: Box<Expr>,
        otherwise: Box<Expr>,
    },
    /// Linear between rows (x, y) of ascending x.
    Interpolate(Box<Expr>, Vec<[Expr; 2]>),
    /// The row whose first entry equals the value.
    Choose(Box<Expr>, Vec<[Expr; 2]>),
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Binary {
    Add,
    Subtract,
    Multiply,
    Divide,
    Power,
    Less,
    LessOrEqual,
    Greater,
    GreaterOrEqual,
    Equal,
    NotEqual,
    And,
    Or,
}

impl Binary {
    /// How tightly it binds; unary minus stands between [`Binary::Divide`] and [`Binary::Power`].
    pub(super) const fn level(self) -> u8 {
        match self {
            Self::Or => 1,
            Self::And => 2,
            Self::Less
            | Self::LessOrEqual
            | Self::Greater
            | Self::GreaterOrEqual
            | Self::Equal
            | Self::NotEqual => 4,
            Self::Add | Self::Subtract => 5,
            Self::Multiply | Self::Divide => 6,
            Self::Power => 8,
        }
    }

    /// As messages name it.
    pub(super) const fn sign(self) -> &'static str {
        match self {
            Self::Add => "+",
            Self::Subtract => "-",
            Self::Multiply => "*",
            Self::Divide => "/",
            Self::Power => "^",
            Self::Less => "<",
            Self::LessOrEqual => "<=",
            Self::Greater => ">",
            Self::GreaterOrEqual => ">=",
            Self::Equal => "==",
            Self::NotEqual => "!=",
            Self::And => "and",
            Self::Or => "or",
        }
    }
}

impl Expr {
    /// The number nought, which goes with every dimension.
    pub(super) fn is_nought(&self) -> bool {
        matches!(&self.kind, ExprKind::Quantity { quantity, unit, .. } if unit.is_empty() && quantity.value.abs() <= 0.0)
    }
}
