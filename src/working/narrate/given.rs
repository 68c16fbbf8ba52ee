//! What was given, in the working's units: rigidities, lengths, loads.

use std::collections::BTreeMap;

use super::{Narrator, finding};
use crate::analysis::Model;
use crate::analysis::action::weight_per_length;
use crate::analysis::equilibrium as sums;
use crate::analysis::stiffness::{rigidity, shear};
use crate::member::{Hold, LoadKind, Member, Place, Section, Weight};
use crate::quantity::{GRAVITY, Typed};
use crate::working::draft::{Likes, Slot, Symbol};
use crate::working::step::Chapters;
use crate::working::trace::Traced;
use crate::working::units::What;

/// Figures of the deck that steps refer to.
#[derive(Debug, Default)]
pub struct Book {
    /// Names of cuts in symbols.
    pub names: BTreeMap<Place, String>,
    /// By section.
    pub sections: Vec<SectionBook>,
    /// By case, by load.
    pub loads: Vec<Vec<LoadBook>>,
    /// By support: stiffness of its springs.
    pub springs: Vec<(Option<Traced>, Option<Traced>)>,
    /// By combination, by case.
    pub factors: Vec<Vec<Traced>>,
    /// By segment: its length.
    pub segments: Vec<Traced>,
    /// Units of the unit state being told; `None` outside of one.
    pub scale: Option<super::Scale>,
    /// Constants of quadratures and tapers, by what they are.
    pub constants: BTreeMap<Symbol, Traced>,
    /// Loads of the combination whose places are being worked out, by piece.
    pub combined: Vec<Vec<super::acts::Act>>,
    differences: Vec<(Vec<crate::working::trace::Source>, Traced)>,
    gravity: Option<Traced>,
    /// The head of the unit state's column, where unit states stand side by side.
    pub column: Option<String>,
    /// Whether combinations are being summed.
    pub combining: bool,
    places: BTreeMap<Place, Traced>,
    distances: BTreeMap<(Place, Place), Traced>,
    /// Where places and distances are written.
    pub geometry: Slot,
    /// Where what follows from several figures is written.
    pub derived: Slot,
}

/// Figures of a section.
#[derive(Clone, Debug)]
pub struct SectionBook {
    /// EI.
    pub ei: Traced,
    /// G times shear area.
    pub ga: Option<Traced>,
    /// Weight per length, where self-weight acts.
    pub weight: Option<Traced>,
    /// Depth, where gradients act.
    pub depth: Option<Traced>,
    /// Expansion, where gradients act.
    pub expansion: Option<Traced>,
}

/// Figures of a load.
#[derive(Clone, Debug)]
pub enum LoadBook {
    /// Weights are kept by section.
    SelfWeight,
    /// Intensities at both ends of the part.
    Spread(Traced, Traced),
    /// A force, couple, movement or difference of temperature.
    Single(Traced),
}

impl Book {
    /// Forgets the differences of distances written for one place: the next has its own.
    pub fn leave_place(&mut self) {
        self.differences.clear();
    }

    /// The difference of distances that has been written from these sources, or the number of a new one.
    pub fn difference(&self, sources: &[crate::working::trace::Source]) -> Result<Traced, usize> {
        let known = self.differences.iter().find(|(known, _)| known == sources);
        known.map(|(_, step)| step.clone()).ok_or(self.differences.len() + 1)
    }

    /// Keeps a difference for the rest of the place.
    pub fn keep_difference(&mut self, sources: Vec<crate::working::trace::Source>, step: Traced) {
        self.differences.push((sources, step));
    }
}

impl Narrator<'_> {
    /// Writes the chapter of given figures.
    pub fn given(&mut self) {
        self.name_places();
        self.builder.chapter(Chapters::Given, "Given figures in working units");
        self.builder.block("Factors between units, exact or to sixteen figures.");
        self.builder.conversions_here();
        self.builder.block("Lengths of the segments.");
        self.segments();
        self.book.geometry = self.builder.block("Places and distances along the member, from its left end.");
        if has(self.member, |kind| matches!(kind, LoadKind::SelfWeight)) {
            self.builder.block("Gravity.");
            if self
                .member
                .sections
                .iter()
                .any(|section| matches!(section.weight, Some(Weight::MassPerLength(_) | Weight::Mass(..))))
            {
                self.gravity();
            }
        }
        self.sections();
        self.builder.block("Springs of the supports.");
        self.springs();
        self.builder.block("Loads and imposed movements.");
        self.loads();
        self.book.derived = self.builder.block("What follows from them.");
        self.builder.block("Factors of the combinations.");
        self.factors();
    }

    fn name_places(&mut self) {
        self.book.names = place_names(self.member, &self.analysis.model);
    }

    fn segments(&mut self) {
        let unit = self.builder.base.coherent(0, 1);
        for (index, segment) in self.member.segments.iter().enumerate() {
            let (from, to) = (self.place_name(segment.from), self.place_name(segment.to));
            let symbol = Symbol::new("L", (index + 1).to_string());
            let title = format!("length of segment {} ({from} to {to})", index + 1);
            let length = self.builder.given(title, symbol, &segment.length.typed, &unit, segment.length.value.si());
            self.book.distances.insert((segment.from, segment.to), length.clone());
            self.book.segments.push(length);
        }
    }

    /// The place as a step: typed, or the sum of the segments before it.
    pub fn place(&mut self, place: Place) -> Traced {
        if place == Place::ZERO {
            return Traced::zero();
        }
        if let Some(known) = self.book.places.get(&place) {
            return known.clone();
        }
        let name = match self.book.names.get(&place) {
            Some(name) => name.clone(),
            None => (self.book.places.len() + 1).to_string(),
        };
        let symbol = Symbol::new("x", name.clone());
        let unit = self.builder.base.coherent(0, 1);
        let geometry = self.book.geometry;
        let ends = self.member.segments.iter().take_while(|segment| segment.to <= place).count();
        let closes = self.member.segments.get(ends.saturating_sub(1)).is_some_and(|segment| segment.to == place);
        let step = if closes {
            let before: Vec<Traced> = self.book.segments.iter().take(ends).cloned().collect();
            let what = finding(format!("place of {name}"), symbol, (What::Other, unit), place.x());
            let sum = sums::sum(before);
            self.builder.aside(geometry, |builder| builder.find(what, sum))
        } else {
            let typed = self.member.typed_places.get(&place).cloned().unwrap_or_else(|| exact_metres(place));
            let title = format!("place {name}");
            self.builder.aside(geometry, |builder| builder.given(title, symbol, &typed, &unit, place.x()))
        };
        self.book.places.insert(place, step.clone());
        step
    }

    /// The distance from one place to another as a step; negative leftwards.
    pub fn distance(&mut self, from: Place, to: Place) -> Traced {
        if from == to {
            return Traced::zero();
        }
        if to < from {
            return -self.distance(to, from);
        }
        if let Some(known) = self.book.distances.get(&(from, to)) {
            return known.clone();
        }
        let (near, far) = (self.place(from), self.place(to));
        let symbol = match (self.book.names.get(&from), self.book.names.get(&to)) {
            (Some(from), Some(to)) if !near.is_zero() => Symbol::new("L", format!("{from}{to}")),
            _ => Symbol::new("d", (self.book.distances.len() + 1).to_string()),
        };
        let describe =
            |place: Place| self.book.names.get(&place).cloned().unwrap_or_else(|| format!("x = {} m", place.exact()));
        let title = format!("distance from {} to {}", describe(from), describe(to));
        let unit = self.builder.base.coherent(0, 1);
        let what = finding(title, symbol, (What::Other, unit), to.beyond(from));
        let geometry = self.book.geometry;
        let step = self.builder.aside(geometry, |builder| builder.find(what, far - near));
        self.book.distances.insert((from, to), step.clone());
        step
    }

    fn sections(&mut self) {
        let weighed = has(self.member, |kind| matches!(kind, LoadKind::SelfWeight));
        let warmed = has(self.member, |kind| matches!(kind, LoadKind::Gradient { .. }));
        let used: Vec<bool> = (0..self.member.sections.len())
            .map(|index| {
                self.member
                    .segments
                    .iter()
                    .any(|s| s.section == index || s.taper.is_some_and(|taper| taper.to == index))
            })
            .collect();
        for (section, used) in self.member.sections.iter().zip(used) {
            let book = if used {
                let sentence = "Rigidity of each section, and its weight where it acts.".to_owned();
                let likes = Likes {
                    key: "sections".to_owned(),
                    head: (section.name.clone(), String::new()),
                    fewest: 2,
                    sentence: sentence.clone(),
                };
                self.builder.block_like(sentence, likes);
                self.section(section, weighed, warmed)
            } else {
                SectionBook { ei: Traced::zero(), ga: None, weight: None, depth: None, expansion: None }
            };
            self.book.sections.push(book);
        }
    }

    fn section(&mut self, section: &Section, weighed: bool, warmed: bool) -> SectionBook {
        let name = section.name.clone();
        let base = self.builder.base.clone();
        let of = |letter: &'static str| Symbol::new(letter, name.clone());
        let stress = base.coherent(1, -2);
        let e = self.builder.given(
            format!("modulus of {name}"),
            of("E"),
            &section.modulus.typed,
            &stress,
            section.modulus.value.si(),
        );
        let inertia = &section.second_moment;
        let i = self.builder.given(
            format!("second moment of area of {name}"),
            of("I"),
            &inertia.typed,
            &base.coherent(0, 4),
            inertia.value.si(),
        );
        let what =
            finding(format!("rigidity of {name}"), of("EI"), (What::Other, base.coherent(1, 2)), rigidity(section))
                .bold();
        let ei = self.builder.state(what, Some(e * i));
        let ga = section.shear.as_ref().map(|(g, area)| {
            let g = self.builder.given(format!("shear modulus of {name}"), of("G"), &g.typed, &stress, g.value.si());
            let a = self.builder.given(
                format!("shear area of {name}"),
                of("As"),
                &area.typed,
                &base.coherent(0, 2),
                area.value.si(),
            );
            let what = finding(
                format!("shear rigidity of {name}"),
                of("GA"),
                (What::Other, base.coherent(1, 0)),
                shear(section).unwrap_or_default(),
            );
            self.builder.state(what.bold(), Some(g * a))
        });
        let weight = if weighed { self.weight(section) } else { None };
        let depth = section.depth.as_ref().filter(|_| warmed).map(|depth| {
            self.builder.given(
                format!("depth of {name}"),
                of("h"),
                &depth.typed,
                &base.coherent(0, 1),
                depth.value.si(),
            )
        });
        let expansion = section.expansion.as_ref().filter(|_| warmed).map(|alpha| {
            self.builder.given(
                format!("expansion of {name}"),
                of("alpha"),
                &alpha.typed,
                &base.expansion(),
                alpha.value.si(),
            )
        });
        SectionBook { ei, ga, weight, depth, expansion }
    }

    fn weight(&mut self, section: &Section) -> Option<Traced> {
        let name = &section.name;
        let base = self.builder.base.clone();
        let of = |letter: &'static str| Symbol::new(letter, name.clone());
        let per_length = (What::Other, base.coherent(1, -1));
        let what = finding(format!("weight of {name}"), of("g"), per_length.clone(), weight_per_length(section)).bold();
        let area = |narrator: &mut Self, area: &crate::quantity::Given<crate::quantity::Area>| {
            let unit = narrator.builder.base.coherent(0, 2);
            narrator.builder.given(format!("area of {name}"), of("A"), &area.typed, &unit, area.value.si())
        };
        match section.weight.as_ref()? {
            Weight::PerLength(w) => {
                Some(self.builder.given(format!("weight of {name}"), of("g"), &w.typed, &per_length.1, w.value.si()))
            }
            Weight::MassPerLength(mass) => {
                let m = self.builder.given(
                    format!("mass of {name}"),
                    of("m"),
                    &mass.typed,
                    &base.linear_mass(),
                    mass.value.si(),
                );
                let gravity = self.gravity();
                Some(self.builder.state(what, Some(m * gravity)))
            }
            Weight::Mass(a, density) => {
                let a = area(self, a);
                let rho = self.builder.given(
                    format!("density of {name}"),
                    of("rho"),
                    &density.typed,
                    &base.density(),
                    density.value.si(),
                );
                let gravity = self.gravity();
                Some(self.builder.state(what, Some(a * rho * gravity)))
            }
            Weight::Specific(a, weight) => {
                let a = area(self, a);
                let unit = base.coherent(1, -3);
                let gamma = self.builder.given(
                    format!("specific weight of {name}"),
                    of("rho"),
                    &weight.typed,
                    &unit,
                    weight.value.si(),
                );
                Some(self.builder.state(what, Some(a * gamma)))
            }
        }
    }

    /// Standard gravity, and its conversion where the working's force is not the kilonewton.
    fn gravity(&mut self) -> Traced {
        if let Some(known) = &self.book.gravity {
            return known.clone();
        }
        let newton = Typed { terms: vec![crate::quantity::Term { figure: GRAVITY, unit: newton_per_kilogram() }] };
        let to = self.builder.base.gravity();
        let value = GRAVITY.to_f64();
        let term = newton.terms.first().cloned();
        let Some(term) = term else { return Traced::zero() };
        let standard =
            self.builder.choose("standard gravity", Symbol::new("g", "n"), term.figure, term.unit.clone(), value);
        let factor = self.builder.factor(&term.unit, &to);
        let what = finding("standard gravity in working units", Symbol::new("g", "w"), (What::Other, to), value);
        let gravity = self.builder.find(what, standard * factor);
        self.book.gravity = Some(gravity.clone());
        gravity
    }

    fn springs(&mut self) {
        let base = self.builder.base.clone();
        for support in &self.member.supports {
            let name = &support.name;
            let vertical = match &support.vertical {
                Hold::Spring(k) => Some(self.builder.given(
                    format!("spring of {name}"),
                    Symbol::new("k", name.clone()),
                    &k.typed,
                    &base.coherent(1, -1),
                    k.value.si(),
                )),
                _ => None,
            };
            let rotation = match &support.rotation {
                Hold::Spring(k) => Some(self.builder.given(
                    format!("rotational spring of {name}"),
                    Symbol::new("c", name.clone()),
                    &k.typed,
                    &base.rotational(),
                    k.value.si(),
                )),
                _ => None,
            };
            self.book.springs.push((vertical, rotation));
        }
    }

    fn loads(&mut self) {
        let mut count: BTreeMap<&'static str, usize> = BTreeMap::new();
        for case in &self.member.cases {
            let mut list = Vec::new();
            for load in &case.loads {
                list.push(self.load(&case.name, &load.kind, &mut count));
            }
            self.book.loads.push(list);
        }
    }

    fn load(&mut self, case: &str, kind: &LoadKind, count: &mut BTreeMap<&'static str, usize>) -> LoadBook {
        let base = self.builder.base.clone();
        let mut next = |letter: &'static str| {
            let index = count.entry(letter).or_default();
            *index += 1;
            Symbol::new(letter, index.to_string())
        };
        let intensity = base.coherent(1, -1);
        match kind {
            LoadKind::SelfWeight => LoadBook::SelfWeight,
            LoadKind::Uniform { w, .. } => {
                let w = self.builder.given(
                    format!("uniform load of {case}"),
                    next("w"),
                    &w.typed,
                    &intensity,
                    w.value.si(),
                );
                LoadBook::Spread(w.clone(), w)
            }
            LoadKind::Linear { left, right, .. } => {
                let near = self.builder.given(
                    format!("linear load of {case}, left"),
                    next("w"),
                    &left.typed,
                    &intensity,
                    left.value.si(),
                );
                let far = self.builder.given(
                    format!("linear load of {case}, right"),
                    next("w"),
                    &right.typed,
                    &intensity,
                    right.value.si(),
                );
                LoadBook::Spread(near, far)
            }
            LoadKind::Area { q, width, .. } => {
                let symbol = next("w");
                let pressure = self.builder.given(
                    format!("area load of {case}"),
                    Symbol::new("q", symbol.sub.clone()),
                    &q.typed,
                    &base.coherent(1, -2),
                    q.value.si(),
                );
                let across = self.builder.given(
                    format!("tributary width of {case}"),
                    Symbol::new("b", symbol.sub.clone()),
                    &width.typed,
                    &base.coherent(0, 1),
                    width.value.si(),
                );
                let value = q.value.si() * width.value.si();
                let what = finding(format!("area load of {case} per length"), symbol, (What::Other, intensity), value);
                let w = self.builder.state(what.bold(), Some(pressure * across));
                LoadBook::Spread(w.clone(), w)
            }
            LoadKind::Point { p, .. } => LoadBook::Single(self.builder.given(
                format!("force of {case}"),
                next("P"),
                &p.typed,
                &base.coherent(1, 0),
                p.value.si(),
            )),
            LoadKind::Couple { m, .. } => LoadBook::Single(self.builder.given(
                format!("couple of {case}"),
                next("M"),
                &m.typed,
                &base.coherent(1, 1),
                m.value.si(),
            )),
            LoadKind::Settlement { support, by } => {
                let name = self.support_name(*support);
                LoadBook::Single(self.builder.given(
                    format!("settlement of {name} in {case}"),
                    next("s"),
                    &by.typed,
                    &base.coherent(0, 1),
                    by.value.si(),
                ))
            }
            LoadKind::Rotation { support, by } => {
                let name = self.support_name(*support);
                LoadBook::Single(self.builder.given(
                    format!("imposed turn of {name} in {case}"),
                    next("theta"),
                    &by.typed,
                    &base.turning(0, 0),
                    by.value.si(),
                ))
            }
            LoadKind::Gradient { difference, .. } => LoadBook::Single(self.builder.given(
                format!("difference of temperature, top less bottom, of {case}"),
                next("dT"),
                &difference.typed,
                &base.temperature(),
                difference.value.si(),
            )),
        }
    }

    fn factors(&mut self) {
        for combination in &self.member.combinations {
            self.builder.tag("");
            let mut list = Vec::new();
            for (factor, case) in combination.factors.iter().zip(&self.member.cases) {
                if factor.value == 0.0 {
                    list.push(Traced::zero());
                    continue;
                }
                let symbol = Symbol::new("gamma", format!("{},{}", combination.name, case.name).replace(',', "_"));
                let title = format!("factor of {} in {}", case.name, combination.name);
                list.push(self.builder.given_number(title, symbol, factor.figure));
            }
            self.book.factors.push(list);
        }
    }

    /// A support's name.
    pub fn support_name(&self, index: usize) -> String {
        self.member.supports.get(index).map(|support| support.name.clone()).unwrap_or_default()
    }
}

fn has(member: &Member, wanted: impl Fn(&LoadKind) -> bool) -> bool {
    member.cases.iter().flat_map(|case| &case.loads).any(|load| wanted(&load.kind))
}

fn newton_per_kilogram() -> crate::quantity::Unit {
    let known = |text: &str| crate::quantity::Unit::known(text);
    crate::quantity::Unit::of(known("N").map(|n| (n, 1)).into_iter().chain(known("kg").map(|kg| (kg, -1))))
}

fn exact_metres(place: Place) -> Typed {
    let metre = crate::quantity::Unit::known("m").map(|metre| (metre, 1));
    Typed { terms: vec![crate::quantity::Term { figure: place.exact(), unit: crate::quantity::Unit::of(metre) }] }
}

/// What every cut is called in symbols: by its support or hinge, else by a letter of its own.
pub fn place_names(member: &Member, model: &Model) -> BTreeMap<Place, String> {
    let supports = member.supports.iter().map(|support| support.name.as_str());
    let taken: Vec<&str> = supports.chain(member.hinges.iter().map(|hinge| hinge.name.as_str())).collect();
    let mut letters = ('C'..='Z')
        .map(|letter| letter.to_string())
        .chain((1..).map(|count| format!("c{count}")))
        .filter(|name| !taken.iter().any(|known| known.eq_ignore_ascii_case(name)));
    let mut names: BTreeMap<Place, String> = BTreeMap::new();
    for support in &member.supports {
        names.insert(support.at, support.name.clone());
    }
    for hinge in &member.hinges {
        names.entry(hinge.at).or_insert_with(|| hinge.name.clone());
    }
    names.entry(Place::ZERO).or_insert_with(|| "start".to_owned());
    names.entry(member.end()).or_insert_with(|| "end".to_owned());
    for piece in &model.pieces {
        names.entry(piece.to).or_insert_with(|| letters.next().unwrap_or_default());
    }
    names
}
