//! The functions of mathematics that a formula may use.

/// A function of one or more values.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Function {
    Sqrt,
    Abs,
    Min,
    Max,
    Sin,
    Cos,
    Tan,
    Asin,
    Acos,
    Atan,
    Exp,
    Ln,
    Log10,
    Floor,
    Ceil,
    Sign,
}

impl Function {
    pub const ALL: [Self; 16] = [
        Self::Sqrt,
        Self::Abs,
        Self::Min,
        Self::Max,
        Self::Sin,
        Self::Cos,
        Self::Tan,
        Self::Asin,
        Self::Acos,
        Self::Atan,
        Self::Exp,
        Self::Ln,
        Self::Log10,
        Self::Floor,
        Self::Ceil,
        Self::Sign,
    ];

    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Self::Sqrt => "sqrt",
            Self::Abs => "abs",
            Self::Min => "min",
            Self::Max => "max",
            Self::Sin => "sin",
            Self::Cos => "cos",
            Self::Tan => "tan",
            Self::Asin => "asin",
            Self::Acos => "acos",
            Self::Atan => "atan",
            Self::Exp => "exp",
            Self::Ln => "ln",
            Self::Log10 => "log10",
            Self::Floor => "floor",
            Self::Ceil => "ceil",
            Self::Sign => "sign",
        }
    }

    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|function| function.name() == name)
    }

    /// Takes any number of values, at least one; the others take exactly one.
    #[must_use]
    pub const fn takes_many(self) -> bool {
        matches!(self, Self::Min | Self::Max)
    }
}
