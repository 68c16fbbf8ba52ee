//! Members with room for mistakes: the examples, and small ones of every kind. All figures are invented.

/// A member's deck, its combination under review, and four figures asked of it.
pub struct Sample {
    pub name: &'static str,
    pub deck: String,
    pub of: &'static str,
    pub asked: [&'static str; 4],
}

const HEAD: &str =
    "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n";

const SECTIONS: &str = r#"
[section.heavy]
E = "210 GPa"
I = "23128 cm^4"
weight = "0.66 kN/m"
depth = "400 mm"
alpha = "12e-6 1/K"
[section.light]
E = "210 GPa"
I = "8356 cm^4"
weight = "0.42 kN/m"
depth = "300 mm"
alpha = "12e-6 1/K"
[section.mid]
E = "210 GPa"
I = "13910 cm^4"
weight = "0.5 kN/m"
depth = "330 mm"
alpha = "12e-6 1/K"
"#;

fn deck(
    segments: &[(&str, &str)],
    supports: &[(&str, &str, &str)],
    more: &str,
    cases: &[(&str, &str, &str)],
) -> String {
    let mut text = format!("{HEAD}{SECTIONS}");
    for (length, section) in segments {
        text += &format!("[[segment]]\nlength = \"{length}\"\nsection = \"{section}\"\n");
    }
    for (name, at, kind) in supports {
        text += &format!("[support.{name}]\nat = \"{at}\"\n{kind}\n");
    }
    text += more;
    let mut factors = Vec::new();
    let mut design = Vec::new();
    for (name, nature, loads) in cases {
        text += &format!("[case.{name}]\nnature = \"{nature}\"\nloads = [{loads}]\n");
        factors.push(format!("{name} = 1.0"));
        let factor = match *nature {
            "permanent" => 1.35,
            "imposed" => 1.5,
            _ => 1.0,
        };
        design.push(format!("{name} = {factor}"));
    }
    text += &format!("[combination.S]\npurpose = \"serviceability\"\nfactors = {{ {} }}\n", factors.join(", "));
    text + &format!("[combination.U]\npurpose = \"strength\"\nfactors = {{ {} }}\n", design.join(", "))
}

const PIN: &str = "kind = \"pinned\"";
const ROLLER: &str = "kind = \"roller\"";
const FIXED: &str = "kind = \"fixed\"";

pub fn samples() -> Vec<Sample> {
    let example = |name: &'static str, text: &str, of: &'static str, asked: [&'static str; 4]| Sample {
        name,
        deck: text.to_owned(),
        of,
        asked,
    };
    let mut list = vec![
        example("intake beam", include_str!("../../examples/intake-beam.toml"), "U2", ["R A", "R B", "m A", "v 5.5"]),
        example(
            "gallery girder",
            include_str!("../../examples/gallery-girder.toml"),
            "U1",
            ["R B", "R D", "M 6", "v 9"],
        ),
        example("jetty bracket", include_str!("../../examples/jetty-bracket.toml"), "U1", ["R P", "R W", "m W", "v 5"]),
        example(
            "service walkway",
            include_str!("../../examples/service-walkway.toml"),
            "S1",
            ["R B", "R C", "m A", "v 7"],
        ),
        example("roof beam", include_str!("../../examples/us-roof-beam.toml"), "L1", ["R A", "R B", "m A", "v 4.5"]),
    ];
    let mut add = |name, asked, deck| list.push(Sample { name, deck, of: "U", asked });
    let dead = ("G", "permanent", "{ kind = \"self_weight\" }, { kind = \"uniform\", w = \"5.5 kN/m\" }");
    add(
        "propped, stepped, overhanging, settling",
        ["R B", "m A", "M 3", "v 7.5"],
        deck(
            &[("3 m", "heavy"), ("4.5 m", "light")],
            &[("A", "0 m", FIXED), ("B", "6 m", ROLLER)],
            "",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"uniform\", w = \"9 kN/m\", to = \"6 m\" }, { kind = \"point\", p = \"20 kN\", at = \"3 m\" }, { kind = \"couple\", m = \"12 kN m\", at = \"end\" }",
                ),
                ("S", "movement", "{ kind = \"settlement\", support = \"B\", by = \"8 mm\" }"),
            ],
        ),
    );
    add(
        "simple span, stepped",
        ["R A", "R B", "M 2.5", "vmax A-B"],
        deck(
            &[("2 m", "light"), ("3.2 m", "heavy"), ("1.6 m", "mid")],
            &[("A", "0 m", PIN), ("B", "end", ROLLER)],
            "",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"point\", p = \"31 kN\", at = \"2.5 m\" }, { kind = \"linear\", w = [\"4 kN/m\", \"11 kN/m\"], from = \"2 m\", to = \"6.8 m\" }",
                ),
            ],
        ),
    );
    add(
        "three spans, pattern loads",
        ["R B", "R C", "Mmin B-C", "vmax A-B"],
        deck(
            &[("5 m", "light"), ("3 m", "heavy"), ("10.5 m", "light")],
            &[("A", "0 m", PIN), ("B", "6 m", ROLLER), ("C", "12.5 m", ROLLER), ("D", "end", ROLLER)],
            "",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"uniform\", w = \"12 kN/m\", to = \"6 m\" }, { kind = \"uniform\", w = \"12 kN/m\", from = \"12.5 m\", to = \"18.5 m\" }",
                ),
                ("P", "imposed", "{ kind = \"point\", p = \"25 kN\", at = \"9.2 m\" }"),
            ],
        ),
    );
    add(
        "fixed at both ends, stepped, a gradient",
        ["R A", "m A", "m B", "v 2.8"],
        deck(
            &[("2.8 m", "mid"), ("4.1 m", "light")],
            &[("A", "0 m", FIXED), ("B", "end", FIXED)],
            "",
            &[
                dead,
                ("Q", "imposed", "{ kind = \"point\", p = \"40 kN\", at = \"2.8 m\" }"),
                ("T", "thermal", "{ kind = \"gradient\", difference = \"18 K\" }"),
            ],
        ),
    );
    add(
        "two spans, a spring in the middle",
        ["R A", "R B", "M 5", "v 2.4"],
        deck(
            &[("5 m", "light"), ("6 m", "mid")],
            &[
                ("A", "0 m", PIN),
                ("B", "5 m", "kind = \"elastic\"\nvertical = \"3.1 kN/mm\"\nrotation = \"free\""),
                ("C", "end", ROLLER),
            ],
            "",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"area\", q = \"4 kN/m^2\", width = \"2.1 m\", to = \"5 m\" }, { kind = \"point\", p = \"18 kN\", at = \"7.5 m\" }",
                ),
            ],
        ),
    );
    add(
        "hinged girder",
        ["R A", "R C", "M 6", "v 8"],
        deck(
            &[("7 m", "heavy"), ("9 m", "light")],
            &[("A", "0 m", FIXED), ("B", "6 m", ROLLER), ("C", "12 m", ROLLER), ("D", "end", ROLLER)],
            "[hinge.H]\nat = \"8 m\"\n[hinge.K]\nat = \"3.5 m\"\n",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"uniform\", w = \"7 kN/m\", from = \"6 m\", to = \"12 m\" }, { kind = \"couple\", m = \"15 kN m\", at = \"14 m\" }",
                ),
            ],
        ),
    );
    add(
        "overhangs at both ends",
        ["R A", "R B", "M 1.8", "v 9.4"],
        deck(
            &[("1.8 m", "light"), ("4 m", "heavy"), ("3.6 m", "light")],
            &[("A", "1.8 m", PIN), ("B", "7.4 m", ROLLER)],
            "",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"point\", p = \"9 kN\", at = \"0 m\" }, { kind = \"point\", p = \"14 kN\", at = \"end\" }, { kind = \"uniform\", w = \"6 kN/m\", from = \"1.8 m\", to = \"7.4 m\" }",
                ),
                ("S", "movement", "{ kind = \"settlement\", support = \"A\", by = \"11 mm\" }"),
            ],
        ),
    );
    add(
        "rotational spring, a turn imposed",
        ["R A", "R B", "m A", "v 3.3"],
        deck(
            &[("3.3 m", "light"), ("3.3 m", "mid")],
            &[
                ("A", "0 m", "kind = \"elastic\"\nvertical = \"rigid\"\nrotation = \"6 MN m/rad\""),
                ("B", "end", ROLLER),
            ],
            "",
            &[
                dead,
                (
                    "Q",
                    "imposed",
                    "{ kind = \"point\", p = \"22 kN\", at = \"4.5 m\" }, { kind = \"uniform\", w = \"3 kN/m\", to = \"3.3 m\" }",
                ),
                (
                    "S",
                    "movement",
                    "{ kind = \"settlement\", support = \"B\", by = \"5 mm\" }, { kind = \"rotation\", support = \"A\", by = \"1.5 mrad\" }",
                ),
            ],
        ),
    );
    add(
        "linear taper, a spring held by both movements, snow, a load that helps",
        ["R A", "R B", "m A", "v 3"],
        deck(
            &[("3 m", "mid"), ("3 m", "mid")],
            &[
                ("A", "0 m", "kind = \"elastic\"\nvertical = \"9 kN/mm\"\nrotation = \"4 MN m/rad\""),
                ("B", "end", ROLLER),
            ],
            "",
            &[dead, ("Q", "snow", "{ kind = \"area\", q = \"1.9 kN/m^2\", width = \"3.5 m\" }")],
        )
        .replacen("section = \"mid\"", "section = \"mid\"\ntaper = { to = \"light\", law = \"linear\" }", 1)
        .replace("G = 1.35", "G = 1.0"),
    );
    let tapered = "[[segment]]\nlength = \"4.2 m\"\nsection = \"heavy\"\ntaper = { to = \"light\", law = \"cubic\" }\n";
    let text = deck(
        &[("2.6 m", "light")],
        &[("A", "0 m", FIXED), ("B", "4.2 m", ROLLER), ("C", "end", ROLLER)],
        "",
        &[
            dead,
            (
                "Q",
                "imposed",
                "{ kind = \"point\", p = \"27 kN\", at = \"2.1 m\" }, { kind = \"linear\", w = [\"10 kN/m\", \"2 kN/m\"], from = \"4.2 m\", to = \"6.8 m\" }",
            ),
        ],
    );
    let text = text.replacen("[[segment]]", &format!("{tapered}[[segment]]"), 1);
    add("tapered, then even, over three supports", ["R A", "R B", "m A", "v 2.1"], text);
    list
}
