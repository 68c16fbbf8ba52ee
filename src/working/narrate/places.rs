//! Values at places inside the member: extremes, stations, the places of checks.

use super::acts::Act;
use super::sums::Totals;
use super::{Demand, Narrator};
use crate::analysis::Field;
use crate::analysis::extreme::{Extreme, Spot};
use crate::working::draft::Likes;
use crate::working::step::Chapters;
use crate::working::trace::Traced;

/// A place that has been worked out.
#[derive(Clone, Debug)]
pub struct Worked {
    /// Index of the combination.
    pub combination: usize,
    /// Where.
    pub spot: Spot,
    /// Distance from the left end of the piece.
    pub x: Traced,
    /// Deflection.
    pub v: Traced,
}

/// A place that is wanted.
pub struct Wish {
    pub spot: Spot,
    pub want: Want,
    pub title: String,
    /// The same in a word or two, for the head of a column.
    pub short: String,
}

/// What a place is worked out under.
pub struct Under<'u> {
    /// The combination.
    pub name: &'u str,
    pub field: &'u Field<'u>,
    pub totals: &'u Totals,
    /// By piece.
    pub acts: &'u [Vec<Act>],
}

/// How much of a place is wanted.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Want {
    Shear,
    Moment,
    Deflection,
}

impl Narrator<'_> {
    /// Works out every place that results report, combination by combination; those of one piece stand side by side.
    pub fn places(&mut self, combinations: &[Totals], demands: &[Demand]) -> Vec<Worked> {
        let mut worked = Vec::new();
        self.builder.chapter(Chapters::Places, "Places of interest");
        for (index, totals) in combinations.iter().enumerate() {
            let (member, analysis) = (self.member, self.analysis);
            let Some(name) = member.combinations.get(index).map(|combination| combination.name.clone()) else {
                continue;
            };
            let Some(field) = Field::of_combination(analysis, member, index) else { continue };
            self.builder.tag(name.clone());
            let likes = Likes {
                key: "loads".to_owned(),
                head: (name.clone(), String::new()),
                fewest: 2,
                sentence: "Loads of each combination: factors times loads of the same kind and extent.".to_owned(),
            };
            let sentence = format!("Loads of combination {name}: factors times loads of the same kind and extent.");
            self.builder.block_like(sentence, likes);
            let acts = self.combined(index);
            self.book.combined.clone_from(&acts);
            let length = member.end().x();
            let under = Under { name: &name, field: &field, totals, acts: &acts };
            for wish in self.wishes(&field, demands, index) {
                let done = |known: &&Worked| known.combination == index && near(known.spot, wish.spot, length);
                let known = worked.iter().find(done).map(|known: &Worked| known.x.clone());
                if wish.want == Want::Deflection && known.is_some() {
                    continue;
                }
                let place = self.work(&under, &wish, known);
                if wish.want == Want::Deflection {
                    worked.push(Worked { combination: index, ..place });
                }
            }
            for station in member.stations.clone() {
                self.station(&under, station);
            }
        }
        self.builder.tag("");
        worked
    }

    /// Extremes of a combination and the places of its checks.
    fn wishes(&self, field: &Field<'_>, demands: &[Demand], combination: usize) -> Vec<Wish> {
        let extremes = field.extremes();
        let wish = |extreme: Extreme, want: Want, title: &str, short: &str| Wish {
            spot: extreme.spot,
            want,
            title: title.to_owned(),
            short: short.to_owned(),
        };
        let mut wishes = vec![
            wish(extremes.moment.max, Want::Moment, "greatest bending moment", "M greatest"),
            wish(extremes.moment.min, Want::Moment, "least bending moment", "M least"),
            wish(extremes.shear.max, Want::Shear, "greatest shear", "V greatest"),
            wish(extremes.shear.min, Want::Shear, "least shear", "V least"),
            wish(extremes.deflection.max, Want::Deflection, "greatest downward deflection", "v down"),
            wish(extremes.deflection.min, Want::Deflection, "greatest upward deflection", "v up"),
        ];
        for demand in demands.iter().filter(|demand| demand.combination == combination) {
            let span = self.member.spans.get(demand.span).map_or("", |span| span.name.as_str());
            wishes.push(Wish {
                spot: demand.spot,
                want: Want::Deflection,
                title: format!("greatest deflection of span {span} as its limit measures it"),
                short: "for a limit".to_owned(),
            });
        }
        wishes
    }
}

/// Whether two places are one: extremes of the deflection and of its distance from a level chord are found apart.
pub fn near(left: Spot, right: Spot, length: f64) -> bool {
    left.piece == right.piece && left.side == right.side && (left.x - right.x).abs() <= 1e-8 * length
}
