//! Which keys go together: one table drives the messages of the shape pass and the schema's `oneOf`.

use serde_json::{Value, json};

/// The forms that one struct of the file can take; exactly one of them.
pub(super) struct Table {
    /// In messages, e.g. `a load`.
    pub(super) what: &'static str,
    /// Keys allowed in every form.
    pub(super) always: &'static [&'static str],
    pub(super) forms: &'static [Form],
}

/// One form.
pub(super) struct Form {
    /// The form is meant when one of these keys is there.
    pub(super) when: &'static [&'static str],
    /// … and the deciding key holds this word.
    pub(super) word: Option<&'static str>,
    /// Of each group exactly one key.
    pub(super) needs: &'static [&'static [&'static str]],
    pub(super) allows: &'static [&'static str],
}

const fn form(
    when: &'static [&'static str],
    needs: &'static [&'static [&'static str]],
    allows: &'static [&'static str],
) -> Form {
    Form { when, word: None, needs, allows }
}

const fn shape(
    word: &'static str,
    needs: &'static [&'static [&'static str]],
    allows: &'static [&'static str],
) -> Form {
    Form { when: &["shape"], word: Some(word), needs, allows }
}

const MEMBER: &[&str] = &["member", "members"];
const ALONG: &[&str] = &["span", "from", "to", "direction", "per"];

const LOAD: Table = Table {
    what: "a load",
    always: &["source"],
    forms: &[
        form(&["uniform"], &[MEMBER], ALONG),
        form(&["varying"], &[MEMBER], ALONG),
        form(&["area"], &[MEMBER, &["width"]], ALONG),
        form(&["build_up"], &[MEMBER, &["width"]], ALONG),
        form(&["point"], &[MEMBER, &["at"]], &["span", "direction"]),
        form(&["point_moment"], &[MEMBER, &["at"], &["about"]], &["span"]),
        form(
            &["reaction_of"],
            &[&["member", "members", "node"]],
            &["span", "at", "every", "from", "to"],
        ),
        form(&["force", "moment"], &[&["node"]], &[]),
        form(&["displaced"], &[&["node"]], &[]),
        form(&["warming"], &[MEMBER], &[]),
        form(&["lack_of_fit"], &[MEMBER], &[]),
    ],
};

const WARMING: Table = Table {
    what: "`warming`",
    always: &[],
    forms: &[form(&["uniform"], &[], &[]), form(&["top", "bottom"], &[&["top"], &["bottom"]], &[])],
};

const SECTION: Table = Table {
    what: "a section",
    always: &["source"],
    forms: &[
        form(&["catalogue"], &[], &[]),
        form(&["given"], &[], &["axes"]),
        shape("rectangle", &[&["width"], &["depth"]], &[]),
        shape("circle", &[&["diameter"]], &[]),
        shape("tube", &[&["diameter"], &["thickness"]], &[]),
        shape(
            "rectangular hollow",
            &[&["width"], &["depth"], &["thickness"]],
            &["outer_radius", "inner_radius"],
        ),
        shape("I", &[&["depth"], &["width"], &["web"], &["flange"]], &["root_radius"]),
        shape(
            "unequal I",
            &[
                &["depth"],
                &["web"],
                &["top_width"],
                &["top_flange"],
                &["bottom_width"],
                &["bottom_flange"],
            ],
            &["root_radius"],
        ),
        shape(
            "channel",
            &[&["depth"], &["width"], &["web"], &["flange"]],
            &["root_radius", "toe_radius", "taper"],
        ),
        shape("angle", &[&["depth"], &["width"], &["thickness"]], &["root_radius", "toe_radius"]),
        shape("T", &[&["depth"], &["width"], &["web"], &["flange"]], &["root_radius"]),
        shape("polygon", &[&["points"]], &["holes", "torsion_constant"]),
    ],
};

const MATERIAL: Table = Table {
    what: "a material",
    always: &["title", "source", "service_class"],
    forms: &[
        form(&["grade"], &[], &["thickness"]),
        form(
            &["E"],
            &[&["G"], &["density"], &["expansion"]],
            &[
                "family",
                "f_y",
                "f_u",
                "f_o",
                "f_ck",
                "f_m_k",
                "f_t_0_k",
                "f_t_90_k",
                "f_c_0_k",
                "f_c_90_k",
                "f_v_k",
                "E_0_05",
                "E_90_mean",
                "F_b",
                "F_t",
                "F_v",
                "F_c",
                "E_min",
            ],
        ),
    ],
};

const SUPPORT: Table = Table {
    what: "a support",
    always: &["turned", "uplift"],
    forms: &[form(&["kind", "X", "Y", "Z", "RX", "RY", "RZ"], &[], &[])],
};

const CHECK: Table = Table {
    what: "a check",
    always: &[
        "id",
        "purpose",
        "members",
        "groups",
        "spans",
        "node",
        "nodes",
        "relative_to",
        "structure",
        "about",
        "only",
        "from",
        "valid_if",
        "limit",
        "one_sided",
        "relies_on",
        "shows",
        "title",
    ],
    forms: &[
        form(&["sheet"], &[], &["with", "reference"]),
        form(
            &["demand", "capacity"],
            &[&["demand"], &["capacity"], &["title"], &["reference"]],
            &["let"],
        ),
    ],
};

const PROJECT: Table = Table {
    what: "the project file",
    always: &[
        "format",
        "project",
        "basis",
        "units",
        "precision",
        "shear_deformation",
        "analysis",
        "package",
        "values",
        "build_ups",
        "materials",
        "sections",
        "load_cases",
        "combinations",
        "groups",
        "checks",
        "narrative",
    ],
    forms: &[
        form(&["structures"], &[], &[]),
        form(
            &["frame", "nodes", "members", "supports"],
            &[&["frame"], &["nodes"], &["members"]],
            &["supports"],
        ),
    ],
};

/// Definitions that have a table, by their name in the schema.
pub(super) const TABLED: [(&str, &Table); 7] = [
    ("Project", &PROJECT),
    ("Load", &LOAD),
    ("Warming", &WARMING),
    ("Section", &SECTION),
    ("Material", &MATERIAL),
    ("SupportMap", &SUPPORT),
    ("Check", &CHECK),
];

/// The table of a definition of the schema.
pub(super) fn table(definition: &str) -> Option<&'static Table> {
    TABLED.iter().find(|(name, _)| *name == definition).map(|(_, table)| *table)
}

impl Form {
    /// The key, or keys, that decide for this form, as messages name them.
    pub(super) fn name(&self) -> String {
        match self.word {
            Some(word) => format!("`{}: {word}`", self.when[0]),
            None => format!("`{}`", self.when[0]),
        }
    }

    /// The key may stand in this form.
    pub(super) fn takes(&self, table: &Table, key: &str) -> bool {
        self.keys(table).any(|other| other == key)
    }

    fn keys(&self, table: &Table) -> impl Iterator<Item = &'static str> {
        let needs = self.needs.iter().copied().flatten();
        self.when.iter().chain(needs).chain(self.allows).chain(table.always).copied()
    }

    /// This form as a branch of the schema's `oneOf`.
    pub(super) fn schema(&self, table: &Table) -> Value {
        let mut keys: Vec<&str> = Vec::new();
        for key in self.keys(table) {
            if !keys.contains(&key) {
                keys.push(key);
            }
        }
        let required = |key: &&str| json!({ "required": [key] });
        let mut all = vec![json!({ "anyOf": self.when.iter().map(required).collect::<Vec<_>>() })];
        for group in self.needs {
            all.push(json!({ "oneOf": group.iter().map(required).collect::<Vec<_>>() }));
        }
        let title = self.name().replace('`', "");
        let mut branch = json!({ "title": title, "propertyNames": { "enum": keys }, "allOf": all });
        if let Some(word) = self.word {
            branch["properties"] = json!({ self.when[0]: { "const": word } });
        }
        branch
    }
}
