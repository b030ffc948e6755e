//! Does the shipped library keep its own rules?

#![allow(clippy::unwrap_used)]

use injectance::documents::reader::Faults;
use injectance::materials::check::check;
use injectance::materials::library::{Library, Role, commons_of_interface, commons_of_material};
use injectance::materials::record::{ContactKind, Obtained};
use injectance::quantities::spread::Spread;

/// Least numbers of what the library holds: a check that reads fewer has lost something on the way.
const LEAST_MATERIALS: usize = 18;
const LEAST_INTERFACES: usize = 22;
const LEAST_RECORDS: usize = 300;

#[test]
fn every_file_passes_the_check() {
    let faults = Faults::default();
    let counted = check(&Library::shipped_texts(), None, false, &faults);
    let found = faults.take();
    assert!(found.is_empty(), "{found:#?}");
    assert!(counted.materials >= LEAST_MATERIALS, "{counted:?}");
    assert!(counted.interfaces >= LEAST_INTERFACES, "{counted:?}");
    assert!(counted.records >= LEAST_RECORDS, "{counted:?}");
}

#[test]
fn every_reference_is_used() {
    let faults = Faults::default();
    let library = Library::shipped();
    let mut used = std::collections::BTreeSet::new();
    for listed in library.listed() {
        if let Some(m) = library.material(&listed.id, &faults) {
            used.extend(
                commons_of_material(&m)
                    .iter()
                    .filter_map(|c| c.source.clone()),
            );
        }
        if let Some(i) = library.interface(&listed.id, &faults) {
            used.extend(
                commons_of_interface(&i)
                    .iter()
                    .filter_map(|c| c.source.clone()),
            );
        }
    }
    let unused: Vec<&str> = library
        .references()
        .keys()
        .filter(|k| !used.contains(*k))
        .collect();
    assert!(unused.is_empty(), "{unused:?}");
    assert!(used.len() >= 100, "{}", used.len());
}

/// The index that a run goes by is made from the head lines alone: it has to say what the files say.
#[test]
fn the_index_agrees_with_the_files() {
    let faults = Faults::default();
    let library = Library::shipped();
    let mut compared = 0;
    for file in Library::shipped_files() {
        match file.role {
            Role::Material { class, aliases } => {
                let m = library.material(file.id, &faults).unwrap();
                assert_eq!((m.id.as_str(), m.name.as_str()), (file.id, file.name));
                assert_eq!(m.class.word(), class);
                assert_eq!(m.aliases, aliases.to_vec());
                assert!(
                    file.path.ends_with(&format!("/{}.toml", file.id)),
                    "{}",
                    file.path
                );
                compared += 1;
            }
            Role::Interface {
                ferromagnet,
                barrier,
                channel,
            } => {
                let i = library.interface(file.id, &faults).unwrap();
                assert_eq!((i.id.as_str(), i.name.as_str()), (file.id, file.name));
                assert_eq!(i.ferromagnet, ferromagnet);
                assert_eq!(
                    (i.barrier.as_deref(), i.channel.as_deref()),
                    (barrier, channel)
                );
                assert!(
                    file.path.ends_with(&format!("/{}.toml", file.id)),
                    "{}",
                    file.path
                );
                compared += 1;
            }
            Role::Priors => {}
        }
    }
    assert!(compared >= LEAST_MATERIALS + LEAST_INTERFACES, "{compared}");
    assert_eq!(faults.count(), 0);
}

#[test]
fn names_mean_one_thing() {
    let mut seen = std::collections::BTreeMap::new();
    for listed in Library::shipped().listed() {
        for name in std::iter::once(&listed.id).chain(&listed.aliases) {
            if let Some(other) = seen.insert(name.to_lowercase(), listed.id.clone()) {
                assert_eq!(other, listed.id, "`{name}` means {other} and {}", listed.id);
            }
        }
    }
    assert!(seen.len() >= 40, "{}", seen.len());
}

/// A number without a stated uncertainty is never taken as exact.
#[test]
fn no_record_is_exact_and_each_unknown_has_a_prior() {
    let faults = Faults::default();
    let library = Library::shipped();
    let mut looked_at = 0;
    for listed in library.listed() {
        let Some(m) = library.material(&listed.id, &faults) else {
            continue;
        };
        for v in &m.values {
            looked_at += 1;
            assert!(
                !matches!(v.reading.spread, Spread::Exact),
                "{}",
                v.common.id
            );
            if matches!(v.reading.spread, Spread::Unknown) && v.property.name != "monolayer" {
                assert!(
                    library.prior(v.property.name).is_some(),
                    "no prior for {}",
                    v.property.name
                );
            }
        }
    }
    assert!(looked_at >= 150, "{looked_at}");
}

/// Polarizations already reduced by mismatch, optical, density and product values are never an input.
#[test]
fn only_fits_give_an_interface_asymmetry() {
    let faults = Faults::default();
    let library = Library::shipped();
    let mut gammas = 0;
    for listed in library.listed() {
        let Some(i) = library.interface(&listed.id, &faults) else {
            continue;
        };
        for c in &i.contacts {
            if c.interface_asymmetry.is_some() {
                gammas += 1;
                assert!(
                    matches!(c.kind, ContactKind::DeviceFit | ContactKind::MultilayerFit),
                    "{}",
                    c.common.id
                );
            }
        }
    }
    assert!(gammas >= 15, "{gammas}");
}

/// A derived resistivity follows from its law and parents. The law is written out again here: the record
/// was not made by this code.
///
/// Law: ASTM F723-99 (now SEMI MF723), n-type silicon with phosphorus: ρ = (6.242e18/N)·10^Z with
/// y = log10 N − 16 and Z a ratio of polynomials, ρ in Ω cm, N in cm⁻³ [coefficients as in the record, read].
#[test]
fn silicon_resistivities_follow_from_their_law() {
    let faults = Faults::default();
    let library = Library::shipped();
    let silicon = library.material("silicon", &faults).unwrap();
    let law = silicon
        .laws
        .iter()
        .find(|l| l.property.name == "resistivity")
        .unwrap();
    let c = |name: &str| -> f64 {
        let text = &law
            .coefficients
            .iter()
            .find(|(k, _)| k.eq_ignore_ascii_case(name))
            .unwrap()
            .1;
        text.replace('\u{2212}', "-")
            .split(' ')
            .next()
            .unwrap()
            .parse()
            .unwrap()
    };
    let mut checked = 0;
    for record in silicon.values.iter().filter(|v| {
        v.property.name == "resistivity"
            && v.common.obtained == Obtained::Derived
            && v.common.parents.contains(&law.common.id)
    }) {
        let n = record.common.conditions.doping.as_ref().unwrap().si / 1e6;
        let y = n.log10() - 16.0;
        let z = (c("c0") + c("c1") * y + c("c2") * y * y + c("c3") * y.powi(3))
            / (1.0 + c("d1") * y + c("d2") * y * y + c("d3") * y.powi(3));
        let rho = 6.242e18 / n * 10.0_f64.powf(z) * 1e-2;
        // Four digits are written in the record.
        assert!(
            (record.reading.si / rho - 1.0).abs() < 5e-4,
            "{}: {rho}",
            record.common.id
        );
        checked += 1;
    }
    assert_eq!(checked, 3);
}
