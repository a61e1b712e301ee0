//! Chemical formulas: elements and molar mass.

use std::collections::BTreeMap;

/// Atoms of each element in a molecule.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Formula(pub BTreeMap<&'static str, f64>);

/// Most atoms of one element that a formula may have.
const MOST_ATOMS: u32 = 100_000;

/// Standard atomic weights, abridged to five digits [g/mol]: IUPAC, Prohaska et al. (2022), Pure Appl. Chem.
/// 94, 573 (from memory).
const ATOMIC_WEIGHTS: &[(&str, f64)] = &[
    ("H", 1.008),
    ("He", 4.0026),
    ("Li", 6.94),
    ("Be", 9.0122),
    ("B", 10.81),
    ("C", 12.011),
    ("N", 14.007),
    ("O", 15.999),
    ("F", 18.998),
    ("Ne", 20.180),
    ("Na", 22.990),
    ("Mg", 24.305),
    ("Al", 26.982),
    ("Si", 28.085),
    ("P", 30.974),
    ("S", 32.06),
    ("Cl", 35.45),
    ("Ar", 39.95),
    ("K", 39.098),
    ("Ca", 40.078),
    ("Sc", 44.956),
    ("Ti", 47.867),
    ("V", 50.942),
    ("Cr", 51.996),
    ("Mn", 54.938),
    ("Fe", 55.845),
    ("Co", 58.933),
    ("Ni", 58.693),
    ("Cu", 63.546),
    ("Zn", 65.38),
    ("Ga", 69.723),
    ("Ge", 72.630),
    ("As", 74.922),
    ("Se", 78.971),
    ("Br", 79.904),
    ("Kr", 83.798),
    ("Rb", 85.468),
    ("Sr", 87.62),
    ("Y", 88.906),
    ("Zr", 91.224),
    ("Nb", 92.906),
    ("Mo", 95.95),
    ("Ru", 101.07),
    ("Rh", 102.91),
    ("Pd", 106.42),
    ("Ag", 107.87),
    ("Cd", 112.41),
    ("In", 114.82),
    ("Sn", 118.71),
    ("Sb", 121.76),
    ("Te", 127.60),
    ("I", 126.90),
    ("Xe", 131.29),
    ("Cs", 132.91),
    ("Ba", 137.33),
    ("La", 138.91),
    ("Ce", 140.12),
    ("W", 183.84),
    ("Re", 186.21),
    ("Os", 190.23),
    ("Ir", 192.22),
    ("Pt", 195.08),
    ("Au", 196.97),
    ("Hg", 200.59),
    ("Pb", 207.2),
    ("Bi", 208.98),
];

impl Formula {
    /// Reads a formula such as `C6H10O4` or `Ca(OH)2`; none if it is not one.
    #[must_use]
    pub fn parse(text: &str) -> Option<Self> {
        let mut groups: Vec<BTreeMap<&'static str, f64>> = vec![BTreeMap::new()];
        let mut rest = text;
        while let Some(first) = rest.chars().next() {
            match first {
                '(' => {
                    groups.push(BTreeMap::new());
                    rest = &rest[1..];
                }
                ')' => {
                    let inner = groups.pop()?;
                    let (count, after) = count(&rest[1..])?;
                    let outer = groups.last_mut()?;
                    for (element, atoms) in inner {
                        *outer.entry(element).or_insert(0.0) += atoms * count;
                    }
                    rest = after;
                }
                _ => {
                    let element = element(rest)?;
                    let (count, after) = count(&rest[element.len()..])?;
                    *groups.last_mut()?.entry(element).or_insert(0.0) += count;
                    rest = after;
                }
            }
        }
        let atoms = groups.pop()?;
        (groups.is_empty() && !atoms.is_empty()).then_some(Self(atoms))
    }

    /// Molar mass, in kg/mol.
    #[must_use]
    pub fn molar_mass(&self) -> f64 {
        let weight = |element: &str| ATOMIC_WEIGHTS.iter().find(|(name, _)| *name == element).map_or(0.0, |e| e.1);
        self.0.iter().map(|(element, atoms)| weight(element) * atoms).sum::<f64>() * 1e-3
    }

    /// Atoms of an element in a molecule.
    #[must_use]
    pub fn atoms(&self, element: &str) -> f64 {
        self.0.get(element).copied().unwrap_or(0.0)
    }
}

/// The element that a text begins with: two letters before one.
fn element(text: &str) -> Option<&'static str> {
    let of_length = |length: usize| {
        let name = text.get(..length)?;
        ATOMIC_WEIGHTS.iter().find(|(element, _)| *element == name).map(|(element, _)| *element)
    };
    of_length(2).or_else(|| of_length(1))
}

/// The count that a text begins with, 1 if there is none, and what follows.
fn count(text: &str) -> Option<(f64, &str)> {
    let digits = text.bytes().take_while(u8::is_ascii_digit).count();
    if digits == 0 {
        return Some((1.0, text));
    }
    let count: u32 = text[..digits].parse().ok()?;
    (1..=MOST_ATOMS).contains(&count).then(|| (f64::from(count), &text[digits..]))
}

#[cfg(test)]
mod tests {
    use super::*;
    use approx::assert_relative_eq;

    #[test]
    fn molar_masses_are_those_of_handbooks() {
        // CRC Handbook of Chemistry and Physics, from memory: water 18.015, styrene 104.15, adipic acid 146.14
        for (formula, mass) in [("H2O", 18.015e-3), ("C8H8", 104.15e-3), ("C6H10O4", 146.14e-3), ("Ca(OH)2", 74.09e-3)]
        {
            let read = Formula::parse(formula).expect("a formula");
            assert_relative_eq!(read.molar_mass(), mass, max_relative = 1e-4);
        }
    }

    #[test]
    fn what_is_no_formula_is_refused() {
        for text in ["", "c8h8", "C8H8)", "(C8H8", "Xx2", "C0", "8C", "H2 O", "C99999999999", "Ü"] {
            assert_eq!(Formula::parse(text), None, "{text}");
        }
    }
}
