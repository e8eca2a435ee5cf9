//! Results that working blocks and narrative ask for by call: `effect('B1', 'M_y', 'max', purpose='strength')`.
//!
//! Names and arguments are bound here, before anything is solved. No result is computed here.

use super::reach::{Arguments, COMPONENTS, of, unknown_function};
use super::{
    Bound, CaseId, Effect, MemberId, Model, NodeId, Of, On, Purpose, Query, Side, Source, State,
    Unbound,
};
use crate::calc::{Argument, Reading, Value};
use crate::quantity::{Dimension, Quantity};

impl Model {
    /// What a working block or the narrative asks for: `effect('B1', 'M_y', 'max', purpose='strength')`,
    /// `effect('B1', 'M_y', at=2.7 m, state='G')`, `reaction('A', 'Z', …)`, `displacement('C', 'X',
    /// state='…')`, `member('B1', 'length')`, `check('B1-bending')`, or a value of the project.
    ///
    /// # Errors
    /// When something of this name is not there.
    pub fn bind_result(&self, reading: &Reading, checks: &[String]) -> Result<Bound, Unbound> {
        let Some(arguments) = &reading.arguments else {
            let value = self.values.iter().find(|value| value.name == reading.name);
            return match value {
                Some(value) => Ok(Bound {
                    source: Source::Constant(Value::number(value.value, value.dimension)),
                    kind: None,
                }),
                None => Err(Unbound {
                    message: format!("no value named `{}`", reading.name),
                    hint: None,
                    known: self.values.iter().map(|value| value.name.clone()).collect(),
                }),
            };
        };
        let call = Call { model: self, reading, arguments };
        match reading.name.as_str() {
            "effect" => call.effect(),
            "reaction" => call.reaction(),
            "displacement" => call.displacement(),
            "member" => call.member_value(),
            "check" => {
                let id = call.text(0, "the id of a check")?;
                call.only(1, &[])?;
                if checks.contains(&id) {
                    return Ok(asked(Query::Check(id)));
                }
                Err(no("check", &id, checks.iter().cloned()))
            }
            _ => Err(unknown_function(
                reading,
                &["effect", "reaction", "displacement", "member", "check"],
            )),
        }
    }
}

fn asked(query: Query) -> Bound {
    let kind = query.kind();
    of(Source::Result(query), kind)
}

fn no(what: &str, name: &str, known: impl Iterator<Item = String>) -> Unbound {
    Unbound { message: format!("no {what} named `{name}`"), hint: None, known: known.collect() }
}

/// Most combinations that a hint lists.
const OFFERED: usize = 12;

/// A call for a result.
struct Call<'m> {
    model: &'m Model,
    reading: &'m Reading,
    arguments: &'m Arguments,
}

impl Call<'_> {
    fn wrong(&self, message: String) -> Unbound {
        let hint = match self.reading.name.as_str() {
            "effect" => {
                "for example `effect('B1', 'M_y', 'max', purpose='strength')` or `effect('B1', 'M_y', at=2.7 m, state='G')`"
            }
            "reaction" => {
                "for example `reaction('A', 'Z', 'max', purpose='strength')` or `reaction('A', 'Z', state='G')`"
            }
            "displacement" => "for example `displacement('C', 'X', state='G')`",
            _ => "for example `member('B1', 'length')`, `check('B1-bending')`",
        };
        Unbound { message, hint: Some(hint.to_owned()), known: Vec::new() }
    }

    /// The text at a place among those without a key.
    fn text(&self, index: usize, what: &str) -> Result<String, Unbound> {
        let mut plain = self.arguments.iter().filter(|(key, _)| key.is_none());
        match plain.nth(index) {
            Some((_, Argument::Text(text) | Argument::Name(text))) => Ok(text.clone()),
            _ => Err(self.wrong(format!("`{}` needs {what}", self.reading.name))),
        }
    }

    fn keyed(&self, wanted: &str) -> Option<&Argument> {
        let of = |key: &Option<String>| key.as_deref() == Some(wanted);
        self.arguments.iter().find(|(key, _)| of(key)).map(|(_, argument)| argument)
    }

    /// Nothing but these stands in the brackets.
    fn only(&self, plain: usize, keys: &[&str]) -> Result<(), Unbound> {
        let count = self.arguments.iter().filter(|(key, _)| key.is_none()).count();
        if count > plain {
            return Err(
                self.wrong(format!("`{}` takes {plain} plain arguments", self.reading.name))
            );
        }
        let given: Vec<&str> =
            self.arguments.iter().filter_map(|(key, _)| key.as_deref()).collect();
        for (index, key) in given.iter().enumerate() {
            if !keys.contains(key) {
                return Err(self.wrong(format!("`{}` has no argument `{key}`", self.reading.name)));
            }
            if given[..index].contains(key) {
                return Err(self.wrong(format!("`{key}` is given twice")));
            }
        }
        Ok(())
    }

    fn member(&self) -> Result<MemberId, Unbound> {
        let name = self.text(0, "the name of a member")?;
        let members = &self.model.members;
        let found = members.iter().position(|member| member.name == name);
        let known = members.iter().map(|member| member.name.clone());
        found.map(MemberId).ok_or_else(|| no("member", &name, known))
    }

    fn node(&self) -> Result<NodeId, Unbound> {
        let name = self.text(0, "the name of a node")?;
        let nodes = &self.model.nodes;
        let found = nodes.iter().position(|node| node.name == name);
        found
            .map(NodeId)
            .ok_or_else(|| no("node", &name, nodes.iter().map(|node| node.name.clone())))
    }

    fn component(&self) -> Result<usize, Unbound> {
        let name = self.text(1, "a component: X, Y, Z, RX, RY or RZ")?;
        let found = COMPONENTS.iter().position(|component| *component == name);
        found.ok_or_else(|| no("component", &name, COMPONENTS.iter().map(|c| (*c).to_owned())))
    }

    fn state(&self) -> Result<Option<State>, Unbound> {
        let name = match self.keyed("state") {
            None => return Ok(None),
            Some(Argument::Text(name) | Argument::Name(name)) => name,
            Some(Argument::Quantity(_)) => {
                return Err(self.wrong("`state` is a load case or a combination".to_owned()));
            }
        };
        let cases = self.model.cases.iter().position(|case| case.name == *name);
        if let Some(case) = cases {
            return Ok(Some(State::Case(CaseId(case))));
        }
        let combinations = &self.model.combinations;
        match self.model.combinations_meant(name)[..] {
            [one] => Ok(Some(State::Combination(one))),
            [] => {
                let known = self.model.cases.iter().map(|case| case.name.clone());
                let titles = combinations.iter().map(|combination| combination.title.clone());
                Err(no("load case or combination", name, known.chain(titles)))
            }
            ref several => Err(self.ambiguous(name, several)),
        }
    }

    /// Several combinations of one title: each can be named by its content.
    fn ambiguous(&self, name: &str, several: &[usize]) -> Unbound {
        let content = |index: &usize| {
            let name = &self.model.combinations[*index].name;
            format!("`{}`", name.rsplit_once(" | ").map_or(name.as_str(), |(_, content)| content))
        };
        let mut contents: Vec<String> = several.iter().take(OFFERED).map(content).collect();
        if several.len() > OFFERED {
            contents.push("…".to_owned());
        }
        Unbound {
            message: format!("{} combinations are titled `{name}`", several.len()),
            hint: Some(format!("name one by its content: {}", contents.join(", "))),
            known: Vec::new(),
        }
    }

    /// `'max'` or `'min'` with a purpose, or one state.
    fn which(&self, at: Option<(f64, Side)>, of_member: bool) -> Result<Of, Unbound> {
        if let Some(state) = self.state()? {
            let (x, side) = at.unwrap_or((0.0, Side::Before));
            self.only(2, if of_member { &["state", "at", "side", "span"] } else { &["state"] })?;
            return Ok(Of::State(state, x, side));
        }
        let which = self.text(2, "`max` or `min`, or a `state`")?;
        let purpose = match self.keyed("purpose") {
            Some(Argument::Text(name) | Argument::Name(name)) => Purpose::from_name(name)
                .ok_or_else(|| {
                    let known = Purpose::ALL.iter().map(|purpose| purpose.name().to_owned());
                    no("purpose", name, known)
                })?,
            _ => return Err(self.wrong(format!("`{}` needs a `purpose`", self.reading.name))),
        };
        self.only(3, if of_member { &["purpose", "span"] } else { &["purpose"] })?;
        let combinations = &self.model.combinations;
        if !combinations.iter().any(|combination| combination.purpose == purpose) {
            let message = format!("the project has no combination of purpose `{}`", purpose.name());
            return Err(self.wrong(message));
        }
        match which.as_str() {
            "max" => Ok(Of::Greatest(purpose)),
            "min" => Ok(Of::Least(purpose)),
            _ => Err(self.wrong(format!("`{which}` is neither `max` nor `min`"))),
        }
    }

    fn effect(&self) -> Result<Bound, Unbound> {
        let member = self.member()?;
        let name = self.text(1, "an effect such as 'M_y'")?;
        let effect = Effect::from_name(&name).ok_or_else(|| {
            no("effect", &name, super::EFFECTS.iter().map(|effect| effect.name().to_owned()))
        })?;
        let spans = self.model[member].spans.len();
        let span = match self.keyed("span") {
            None => None,
            Some(Argument::Quantity(Quantity { value, dimension }))
                if *dimension == Dimension::NONE =>
            {
                let found = (0..spans).find(|span| {
                    #[expect(clippy::cast_precision_loss, reason = "few spans")]
                    let number = (*span + 1) as f64;
                    number.total_cmp(value).is_eq()
                });
                Some(found.ok_or_else(|| self.wrong(format!("there are {spans} spans")))?)
            }
            Some(_) => return Err(self.wrong("`span` is a number".to_owned())),
        };
        let at = match self.keyed("at") {
            None => None,
            Some(Argument::Quantity(Quantity { value, dimension }))
                if *dimension == Dimension::LENGTH =>
            {
                let (from, to) = self.model.ends(&self.model[member], span);
                let x = from + value;
                if !(from..=to).contains(&x) {
                    let what = if span.is_some() { "span" } else { "member" };
                    return Err(self.wrong(format!("{value} m is not on the {what}")));
                }
                let side = match self.keyed("side") {
                    None => Side::Before,
                    Some(Argument::Text(side) | Argument::Name(side)) if side == "before" => {
                        Side::Before
                    }
                    Some(Argument::Text(side) | Argument::Name(side)) if side == "after" => {
                        Side::After
                    }
                    Some(_) => {
                        let message = "`side` is `before` or `after`".to_owned();
                        return Err(self.wrong(message));
                    }
                };
                Some((x, side))
            }
            Some(_) => return Err(self.wrong("`at` is a length".to_owned())),
        };
        let of = self.which(at, true)?;
        if matches!(of, Of::State(..)) && at.is_none() {
            return Err(self.wrong("an effect in a state needs its place: `at=2.7 m`".to_owned()));
        }
        let query = Query::Effect { member, span, effect, of };
        Ok(asked(query))
    }

    fn reaction(&self) -> Result<Bound, Unbound> {
        let node = self.node()?;
        if self.model[node].support.is_none() {
            return Err(self.wrong(format!("node `{}` has no support", self.model[node].name)));
        }
        let component = self.component()?;
        let of = self.which(None, false)?;
        let query = Query::Reaction { node, component, of };
        Ok(asked(query))
    }

    fn displacement(&self) -> Result<Bound, Unbound> {
        let node = self.node()?;
        let component = self.component()?;
        self.only(2, &["state"])?;
        let state = self.state()?;
        let state = state.ok_or_else(|| self.wrong("`displacement` needs a `state`".to_owned()))?;
        let query = Query::Displacement { node, component, state };
        Ok(asked(query))
    }

    /// A property of a member by the name that checks have for it.
    fn member_value(&self) -> Result<Bound, Unbound> {
        let member = self.member()?;
        let name = self.text(1, "a property such as 'length' or 'I_y'")?;
        self.only(2, &[])?;
        let on = On::Member { member, span: None };
        let (found, missing) = self.model.of_member(&self.model[member], None, &name);
        match found {
            Some(bound) if matches!(bound.source, Source::Constant(_)) => Ok(bound),
            _ => Err(self.model.unknown(on, &name, missing)),
        }
    }
}
