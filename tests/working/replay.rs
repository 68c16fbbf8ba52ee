//! An evaluator of `expression` per the contract of the results, on exact fractions; shares nothing with the program.

use std::collections::BTreeMap;

use num_rational::BigRational;
use num_traits::{One, Signed, Zero};
use serde_json::Value;

/// A printed figure as a fraction.
pub fn decimal(text: &str) -> Option<BigRational> {
    let (body, power) = text.split_once('e').map_or((text, 0), |(body, power)| (body, power.parse::<i32>().unwrap()));
    let (whole, fraction) = body.split_once('.').unwrap_or((body, ""));
    let digits: num_rational::BigRational = BigRational::from_integer(format!("{whole}{fraction}").parse().ok()?);
    Some(digits * ten(power - i32::try_from(fraction.len()).ok()?))
}

fn ten(power: i32) -> BigRational {
    let base = BigRational::from_integer(10.into());
    let size = (0..power.abs()).fold(BigRational::one(), |product, _| product * &base);
    if power >= 0 { size } else { size.recip() }
}

struct Parser<'t, F> {
    rest: &'t str,
    names: &'t F,
}

/// The value of an expression; `None` where it does not follow the grammar or a divisor is zero.
pub fn evaluate(text: &str, names: &impl Fn(&str) -> Option<BigRational>) -> Option<BigRational> {
    let mut parser = Parser { rest: text, names };
    let value = parser.sum()?;
    parser.rest.trim().is_empty().then_some(value)
}

impl<F: Fn(&str) -> Option<BigRational>> Parser<'_, F> {
    fn take(&mut self, symbol: char) -> bool {
        let rest = self.rest.trim_start();
        let found = rest.strip_prefix(symbol);
        self.rest = found.unwrap_or(rest);
        found.is_some()
    }

    fn sum(&mut self) -> Option<BigRational> {
        let mut value = self.product()?;
        loop {
            if self.take('+') {
                value += self.product()?;
            } else if self.take('-') {
                value -= self.product()?;
            } else {
                return Some(value);
            }
        }
    }

    fn product(&mut self) -> Option<BigRational> {
        let mut value = self.signed()?;
        loop {
            if self.take('*') {
                value *= self.signed()?;
            } else if self.take('/') {
                let divisor = self.signed()?;
                if divisor.is_zero() {
                    return None;
                }
                value /= divisor;
            } else {
                return Some(value);
            }
        }
    }

    fn signed(&mut self) -> Option<BigRational> {
        if self.take('-') { self.signed().map(|value| -value) } else { self.power() }
    }

    fn power(&mut self) -> Option<BigRational> {
        let base = self.atom()?;
        if !self.take('^') {
            return Some(base);
        }
        let exponent = self.signed()?;
        let whole: i32 = exponent.is_integer().then(|| exponent.to_integer().to_string().parse().ok())??;
        let size = (0..whole.abs()).fold(BigRational::one(), |product, _| product * &base);
        Some(if whole >= 0 { size } else { size.recip() })
    }

    fn atom(&mut self) -> Option<BigRational> {
        if self.take('(') {
            let value = self.sum()?;
            return self.take(')').then_some(value);
        }
        let rest = self.rest.trim_start();
        let letters = rest.starts_with(|letter: char| letter.is_ascii_alphabetic());
        let fits =
            |letter: char| letter.is_ascii_alphanumeric() || (letters && letter == '_') || (!letters && letter == '.');
        let end = rest.find(|letter| !fits(letter)).unwrap_or(rest.len());
        let word = &rest[..end];
        self.rest = &rest[end..];
        if !letters {
            return decimal(word);
        }
        if !self.take('(') {
            return (self.names)(word);
        }
        let first = self.sum()?;
        let value = match word {
            "abs" => first.abs(),
            "min" | "max" => {
                let comma = self.take(',');
                let second = self.sum()?;
                if !comma {
                    return None;
                }
                if (first < second) == (word == "min") { first } else { second }
            }
            _ => return None,
        };
        self.take(')').then_some(value)
    }
}

fn rounded(value: &BigRational, places: usize) -> BigRational {
    let scale = ten(i32::try_from(places).unwrap());
    let scaled = value * &scale;
    let floor = scaled.floor();
    let rest = &scaled - &floor;
    let half = BigRational::new(1.into(), 2.into());
    let odd = !(floor.to_integer() % num_bigint::BigInt::from(2)).is_zero();
    let up = rest > half || (rest == half && odd);
    (if up { floor + BigRational::one() } else { floor }) / scale
}

/// The size of a unit in SI, exact.
fn size(unit: &str) -> BigRational {
    let table = [
        ("m", "1"),
        ("mm", "0.001"),
        ("cm", "0.01"),
        ("in", "0.0254"),
        ("ft", "0.3048"),
        ("N", "1"),
        ("kN", "1000"),
        ("MN", "1000000"),
        ("lbf", "4.4482216152605"),
        ("lb", "4.4482216152605"),
        ("kip", "4448.2216152605"),
        ("Pa", "1"),
        ("kPa", "1000"),
        ("MPa", "1000000"),
        ("GPa", "1000000000"),
        ("kg", "1"),
        ("K", "1"),
        ("degC", "1"),
        ("rad", "1"),
        ("mrad", "0.001"),
    ];
    let inch = decimal("0.0254").unwrap();
    let foot = decimal("0.3048").unwrap();
    let pound = decimal("4.4482216152605").unwrap();
    let thousand = decimal("1000").unwrap();
    let derived = [
        ("psi", &pound / (&inch * &inch)),
        ("ksi", &pound * &thousand / (&inch * &inch)),
        ("psf", &pound / (&foot * &foot)),
        ("ksf", &pound * &thousand / (&foot * &foot)),
        ("plf", &pound / &foot),
        ("klf", &pound * &thousand / &foot),
        ("pcf", &pound / (&foot * &foot * &foot)),
        ("pci", &pound / (&inch * &inch * &inch)),
        ("degF", decimal("5").unwrap() / decimal("9").unwrap()),
    ];
    let of = |word: &str| {
        let (name, power) = word.split_once('^').map_or((word, 1), |(name, power)| (name, power.parse().unwrap()));
        let known = table.iter().find(|(unit, _)| *unit == name).map(|(_, size)| decimal(size).unwrap());
        let base = known.or_else(|| derived.iter().find(|(unit, _)| *unit == name).map(|(_, size)| size.clone()));
        let base = base.unwrap_or_else(|| panic!("unit {word}"));
        (0..power).fold(BigRational::one(), |product, _| product * &base)
    };
    let (top, bottom) = unit.split_once('/').unwrap_or((unit, ""));
    let product =
        |text: &str| text.split_whitespace().filter(|word| *word != "1").fold(BigRational::one(), |p, w| p * of(w));
    product(top) / product(bottom)
}

/// Every line that does not close, with units and without, and every input that is not what its origin printed.
pub fn faults(results: &Value) -> Vec<String> {
    let mut faults = Vec::new();
    let mut known: BTreeMap<&str, &Value> = BTreeMap::new();
    for step in results["working"].as_array().unwrap() {
        let id = step["id"].as_str().unwrap();
        for (name, input) in step["inputs"].as_object().unwrap() {
            let from = input["from"].as_str().unwrap();
            let origin = known.get(from).map(|origin| (&origin["printed"], &origin["unit"]));
            if from != "deck" && origin != Some((&input["printed"], &input["unit"])) {
                faults.push(format!("{id}: {name} is not what {from} gives"));
            }
        }
        if known.insert(id, &step["result"]).is_some() {
            faults.push(format!("{id} stands twice"));
        }
        let Some(expression) = step["expression"].as_str() else { continue };
        let printed = step["result"]["printed"].as_str().unwrap();
        let places = printed.split_once('.').map_or(0, |(_, fraction)| fraction.len());
        let exact = decimal(printed).unwrap();
        let plain = evaluate(expression, &|name| decimal(step["inputs"][name]["printed"].as_str()?));
        if plain.map(|value| rounded(&value, places)) != Some(exact.clone()) {
            faults.push(format!("{id}: {expression} does not give {printed}"));
        }
        let measured = evaluate(expression, &|name| {
            let input = &step["inputs"][name];
            Some(decimal(input["printed"].as_str()?)? * size(input["unit"].as_str()?))
        });
        // A conversion factor that does not end is printed to sixteen figures; it may move a rounding by that much.
        let unit = size(step["result"]["unit"].as_str().unwrap());
        let value = measured.map(|value| value / &unit);
        let allowed = ten(-i32::try_from(places).unwrap()) / decimal("2").unwrap() + exact.abs() * ten(-13);
        if value.is_none_or(|value| (value - &exact).abs() > allowed) {
            faults.push(format!("{id}: {expression} with units does not give {printed} {}", step["result"]["unit"]));
        }
    }
    faults
}

/// Every figure of the results that is the result of no step with an expression.
pub fn missing(results: &Value) -> Vec<String> {
    let steps = results["working"].as_array().unwrap().iter().filter(|step| step["expression"].is_string());
    let values: Vec<f64> = steps.map(|step| step["result"]["value"].as_f64().unwrap()).collect();
    let mut wanted: Vec<(String, f64)> = Vec::new();
    for group in ["cases", "combinations"] {
        for (name, solution) in results[group].as_object().unwrap() {
            for (support, reaction) in solution["reactions"].as_object().unwrap() {
                for (kind, value) in reaction.as_object().unwrap() {
                    wanted.push((format!("{name} {support} {kind}"), value.as_f64().unwrap()));
                }
            }
            for (redundant, value) in solution["redundants"].as_object().unwrap() {
                wanted.push((format!("{name} {redundant}"), value.as_f64().unwrap()));
            }
            for (quantity, range) in solution["extremes"].as_object().into_iter().flatten() {
                for end in ["max", "min"] {
                    wanted.push((format!("{name} {quantity} {end}"), range[end]["value"].as_f64().unwrap()));
                }
            }
            for station in solution["stations"].as_array().into_iter().flatten() {
                wanted.push((format!("{name} station {}", station["at"]), station["deflection"].as_f64().unwrap()));
            }
        }
    }
    for check in results["checks"].as_array().unwrap() {
        wanted.push((format!("check {}", check["limit"]), check["deflection"].as_f64().unwrap()));
        wanted.push((format!("utilisation {}", check["limit"]), check["utilisation"].as_f64().unwrap()));
    }
    let found =
        |value: f64| value.abs() < 1e-12 || values.iter().any(|known| (known - value).abs() <= 1e-9 * value.abs());
    wanted.into_iter().filter(|(_, value)| !found(*value)).map(|(name, value)| format!("{name}: {value}")).collect()
}
