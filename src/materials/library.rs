//! The library: the records shipped in the program, with the user's folders laid over them by id.

use std::cell::RefCell;
use std::collections::BTreeMap;
use std::rc::Rc;

use crate::documents::fault::{Fault, Source, Wrong};
use crate::documents::reader::Faults;
use crate::documents::tree;

use super::file::{Content, read_file};
use super::record::{Common, InterfaceEntry, Material, Prior};
use super::references::References;

/// What a shipped file is, read off its head lines at build time.
#[derive(Clone, Copy, Debug)]
pub enum Role {
    /// A material.
    Material {
        /// Its class, as the word in the file.
        class: &'static str,
        /// Its other names.
        aliases: &'static [&'static str],
    },
    /// An interface.
    Interface {
        /// Ferromagnet.
        ferromagnet: &'static str,
        /// Barrier.
        barrier: Option<&'static str>,
        /// Channel.
        channel: Option<&'static str>,
    },
    /// The priors.
    Priors,
}

/// A file of the shipped library.
#[derive(Clone, Copy, Debug)]
pub struct ShippedFile {
    /// Path inside the project.
    pub path: &'static str,
    /// Id of the material or interface.
    pub id: &'static str,
    /// Its name.
    pub name: &'static str,
    /// What it is.
    pub role: Role,
    /// Its text.
    pub text: &'static str,
}

include!(concat!(env!("OUT_DIR"), "/library_index.rs"));

/// One line of a listing.
#[derive(Clone, PartialEq, Eq, Debug)]
pub struct Listed {
    /// Id.
    pub id: String,
    /// Name.
    pub name: String,
    /// Class, or `interface`.
    pub class: String,
    /// Other names.
    pub aliases: Vec<String>,
    /// Whether a folder of the user holds it, or records of it.
    pub from_user: bool,
}

/// The library in use.
#[derive(Debug)]
pub struct Library {
    user_materials: Vec<Material>,
    user_interfaces: Vec<InterfaceEntry>,
    priors: Vec<Prior>,
    references: References,
    replaced: Vec<String>,
    laid_over: Vec<String>,
    materials: RefCell<BTreeMap<String, Rc<Material>>>,
    interfaces: RefCell<BTreeMap<String, Rc<InterfaceEntry>>>,
}

fn parse_shipped(file: &ShippedFile, faults: &Faults) -> Option<Content> {
    parse_text(file.path, file.text, false, faults)
}

/// Reads one text of records.
pub(super) fn parse_text(
    name: &str,
    text: &str,
    from_user: bool,
    faults: &Faults,
) -> Option<Content> {
    let source = Source::new(name, text);
    match tree::parse(&source) {
        Ok(root) => read_file(&root, from_user, faults),
        Err(found) => {
            found.into_iter().for_each(|f| faults.push(f));
            None
        }
    }
}

impl Library {
    /// The shipped library alone.
    #[must_use]
    pub fn shipped() -> Self {
        let faults = Faults::default();
        let priors = SHIPPED
            .iter()
            .filter(|f| matches!(f.role, Role::Priors))
            .filter_map(|f| match parse_shipped(f, &faults) {
                Some(Content::Priors(p)) => Some(p),
                _ => None,
            })
            .flatten()
            .collect();
        Self {
            user_materials: Vec::new(),
            user_interfaces: Vec::new(),
            priors,
            references: References::new(REFERENCES),
            replaced: Vec::new(),
            laid_over: Vec::new(),
            materials: RefCell::default(),
            interfaces: RefCell::default(),
        }
    }

    /// Lays files of the user over the library: `(name shown, text)`. A name that ends in `.bib` is taken
    /// as references. A record whose id the library already has takes its place and is listed in
    /// [`Library::replaced`]; all others are added.
    ///
    /// # Errors
    /// Into `faults`: every fault of every file, and ids that stand twice in what the user gave.
    pub fn lay_over(&mut self, files: &[(String, String)], faults: &Faults) {
        for (name, text) in files {
            if name.ends_with(".bib") {
                let own = References::new(text);
                let known = |key: &&str| {
                    self.references
                        .bibtex(key)
                        .is_some_and(|b| own.bibtex(key) != Some(b))
                };
                let other: Vec<String> = own
                    .keys()
                    .filter(known)
                    .map(|k| format!("reference {k}"))
                    .collect();
                self.laid_over.extend(other);
                self.references.lay_over(text);
                continue;
            }
            match parse_text(name, text, true, faults) {
                Some(Content::Material(m)) => self.user_materials.push(*m),
                Some(Content::Interface(i)) => self.user_interfaces.push(*i),
                Some(Content::Priors(mut p)) => {
                    let known = |q: &&Prior| self.priors.iter().any(|k| k.property == q.property);
                    let other: Vec<String> = p
                        .iter()
                        .filter(known)
                        .map(|q| format!("prior of {}", q.property))
                        .collect();
                    self.laid_over.extend(other);
                    p.append(&mut self.priors);
                    self.priors = p;
                }
                None => {}
            }
        }
        self.refuse_doubles(faults);
        self.refuse_other_heads(faults);
        self.materials.borrow_mut().clear();
        self.interfaces.borrow_mut().clear();
        let mut replaced = self.laid_over.clone();
        let own: Vec<String> = self.user_materials.iter().map(|m| m.id.clone()).collect();
        for id in own {
            replaced.extend(
                self.material_with_replaced(&id, faults)
                    .map(|(_, r)| r)
                    .unwrap_or_default(),
            );
        }
        let own: Vec<String> = self.user_interfaces.iter().map(|i| i.id.clone()).collect();
        for id in own {
            replaced.extend(
                self.interface_with_replaced(&id, faults)
                    .map(|(_, r)| r)
                    .unwrap_or_default(),
            );
        }
        replaced.sort();
        replaced.dedup();
        self.replaced = replaced;
    }

    /// A file laid over a shipped id has to be of the same material or contact, and a shipped record can only
    /// be replaced where it stands.
    fn refuse_other_heads(&self, faults: &Faults) {
        let conflict = |common: Option<&&Common>, field: &str, reason: String| {
            faults.push(Fault {
                place: common.map(|c| c.place.clone()),
                field: field.to_owned(),
                wrong: Wrong::Conflict {
                    reason,
                    help: Some(
                        "give the file an id of its own, or make it agree with the shipped one"
                            .to_owned(),
                    ),
                },
            });
        };
        for m in &self.user_materials {
            let commons = commons_of_material(m);
            for file in SHIPPED.iter().filter(|f| f.id == m.id) {
                match file.role {
                    Role::Material { class, .. } if class == m.class.word() => {}
                    Role::Material { class, .. } => conflict(
                        commons.first(),
                        &m.id,
                        format!(
                            "the shipped `{}` is a {class}, this file makes it a {}",
                            m.id,
                            m.class.word()
                        ),
                    ),
                    _ => conflict(
                        commons.first(),
                        &m.id,
                        format!("`{}` is shipped as an interface", m.id),
                    ),
                }
            }
        }
        for i in &self.user_interfaces {
            let commons = commons_of_interface(i);
            for file in SHIPPED.iter().filter(|f| f.id == i.id) {
                let same = matches!(file.role, Role::Interface { ferromagnet, barrier, channel }
                    if ferromagnet == i.ferromagnet
                        && barrier == i.barrier.as_deref()
                        && channel == i.channel.as_deref());
                if !same {
                    conflict(
                        commons.first(),
                        &i.id,
                        format!("the shipped `{}` is another contact than this file's", i.id),
                    );
                }
            }
        }
        self.refuse_strayed_records(faults);
    }

    /// Records of the user whose id a shipped record of another file has.
    fn refuse_strayed_records(&self, faults: &Faults) {
        let quiet = Faults::default();
        let mut homes: BTreeMap<String, &str> = BTreeMap::new();
        for file in SHIPPED {
            let ids: Vec<String> = match parse_shipped(file, &quiet) {
                Some(Content::Material(m)) => commons_of_material(&m)
                    .iter()
                    .map(|c| c.id.clone())
                    .collect(),
                Some(Content::Interface(i)) => commons_of_interface(&i)
                    .iter()
                    .map(|c| c.id.clone())
                    .collect(),
                _ => continue,
            };
            homes.extend(ids.into_iter().map(|id| (id, file.id)));
        }
        let own = self
            .user_materials
            .iter()
            .flat_map(|m| {
                commons_of_material(m)
                    .into_iter()
                    .map(|c| (m.id.as_str(), c))
            })
            .chain(self.user_interfaces.iter().flat_map(|i| {
                commons_of_interface(i)
                    .into_iter()
                    .map(|c| (i.id.as_str(), c))
            }));
        for (home, common) in own {
            if let Some(other) = homes.get(&common.id)
                && *other != home
            {
                faults.push(Fault {
                    place: Some(
                        common
                            .fields
                            .id
                            .clone()
                            .unwrap_or_else(|| common.place.clone()),
                    ),
                    field: common.id.clone(),
                    wrong: Wrong::Conflict {
                        reason: format!(
                            "the id `{}` belongs to a shipped record of `{other}`",
                            common.id
                        ),
                        help: Some("give each record an id of its own".to_owned()),
                    },
                });
            }
        }
    }

    fn refuse_doubles(&self, faults: &Faults) {
        let mut seen: BTreeMap<&str, &Common> = BTreeMap::new();
        let all = self
            .user_materials
            .iter()
            .flat_map(commons_of_material)
            .chain(self.user_interfaces.iter().flat_map(commons_of_interface));
        for common in all {
            if let Some(first) = seen.insert(&common.id, common) {
                faults.push(Fault {
                    place: Some(common.place.clone()),
                    field: common.id.clone(),
                    wrong: Wrong::Conflict {
                        reason: format!(
                            "the record id `{}` stands twice, first in {} line {}",
                            common.id,
                            first.place.source.name,
                            first.place.line()
                        ),
                        help: Some("give each record an id of its own".to_owned()),
                    },
                });
            }
        }
    }

    /// Ids of shipped records that a record of the user has replaced.
    #[must_use]
    pub fn replaced(&self) -> &[String] {
        &self.replaced
    }

    /// The references.
    #[must_use]
    pub fn references(&self) -> &References {
        &self.references
    }

    /// The prior spread of a property class, as the text that follows a value.
    #[must_use]
    pub fn prior(&self, property: &str) -> Option<&Prior> {
        self.priors.iter().find(|p| p.property == property)
    }

    /// All materials and interfaces.
    #[must_use]
    pub fn listed(&self) -> Vec<Listed> {
        let mut all: BTreeMap<String, Listed> = BTreeMap::new();
        for file in SHIPPED {
            let (class, aliases) = match file.role {
                Role::Material { class, aliases } => (
                    class.to_owned(),
                    aliases.iter().map(|a| (*a).to_owned()).collect(),
                ),
                Role::Interface { .. } => ("interface".to_owned(), Vec::new()),
                Role::Priors => continue,
            };
            let listed = Listed {
                id: file.id.to_owned(),
                name: file.name.to_owned(),
                class,
                aliases,
                from_user: false,
            };
            all.insert(file.id.to_owned(), listed);
        }
        let mut add = |id: &str, name: &str, class: &str, aliases: &[String]| {
            all.entry(id.to_owned())
                .and_modify(|l| {
                    l.from_user = true;
                    let new: Vec<String> = aliases
                        .iter()
                        .filter(|a| !l.aliases.contains(a))
                        .cloned()
                        .collect();
                    l.aliases.extend(new);
                })
                .or_insert_with(|| Listed {
                    id: id.to_owned(),
                    name: name.to_owned(),
                    class: class.to_owned(),
                    aliases: aliases.to_vec(),
                    from_user: true,
                });
        };
        for m in &self.user_materials {
            add(&m.id, &m.name, m.class.word(), &m.aliases);
        }
        for i in &self.user_interfaces {
            add(&i.id, &i.name, "interface", &[]);
        }
        let order = [
            "ferromagnet",
            "semiconductor",
            "metal",
            "barrier",
            "interface",
        ];
        let mut list: Vec<Listed> = all.into_values().collect();
        list.sort_by_key(|l| (order.iter().position(|o| *o == l.class), l.id.clone()));
        list
    }

    /// The id that a name or alias means. Case does not matter unless an alias differs only by case.
    #[must_use]
    pub fn id_of(&self, name: &str) -> Option<String> {
        let list = self.listed();
        let exact = |l: &&Listed| l.id == name || l.aliases.iter().any(|a| a == name);
        let loose = |l: &&Listed| {
            l.id.eq_ignore_ascii_case(name)
                || l.aliases.iter().any(|a| a.eq_ignore_ascii_case(name))
        };
        list.iter()
            .find(exact)
            .or_else(|| list.iter().find(loose))
            .map(|l| l.id.clone())
    }

    /// A material by id, with the user's records laid over it.
    pub fn material(&self, id: &str, faults: &Faults) -> Option<Rc<Material>> {
        if let Some(known) = self.materials.borrow().get(id) {
            return Some(Rc::clone(known));
        }
        let (material, _) = self.material_with_replaced(id, faults)?;
        let shared = Rc::new(material);
        self.materials
            .borrow_mut()
            .insert(id.to_owned(), Rc::clone(&shared));
        Some(shared)
    }

    fn material_with_replaced(&self, id: &str, faults: &Faults) -> Option<(Material, Vec<String>)> {
        let shipped = SHIPPED
            .iter()
            .find(|f| f.id == id && matches!(f.role, Role::Material { .. }))
            .and_then(|f| match parse_shipped(f, faults) {
                Some(Content::Material(m)) => Some(*m),
                _ => None,
            });
        let own = self.user_materials.iter().filter(|m| m.id == id).cloned();
        let mut replaced = Vec::new();
        let mut merged = shipped;
        for m in own {
            merged = Some(match merged {
                None => m,
                Some(mut base) => {
                    base.aliases.extend(
                        m.aliases
                            .into_iter()
                            .filter(|a| !base.aliases.contains(a))
                            .collect::<Vec<_>>(),
                    );
                    lay(&mut base.values, m.values, |r| &r.common, &mut replaced);
                    lay(&mut base.pairs, m.pairs, |r| &r.common, &mut replaced);
                    lay(
                        &mut base.calibrations,
                        m.calibrations,
                        |r| &r.common,
                        &mut replaced,
                    );
                    lay(&mut base.laws, m.laws, |r| &r.common, &mut replaced);
                    lay(&mut base.notes, m.notes, |r| &r.common, &mut replaced);
                    base
                }
            });
        }
        merged.map(|m| (m, replaced))
    }

    /// An interface by id, with the user's records laid over it.
    pub fn interface(&self, id: &str, faults: &Faults) -> Option<Rc<InterfaceEntry>> {
        if let Some(known) = self.interfaces.borrow().get(id) {
            return Some(Rc::clone(known));
        }
        let (interface, _) = self.interface_with_replaced(id, faults)?;
        let shared = Rc::new(interface);
        self.interfaces
            .borrow_mut()
            .insert(id.to_owned(), Rc::clone(&shared));
        Some(shared)
    }

    fn interface_with_replaced(
        &self,
        id: &str,
        faults: &Faults,
    ) -> Option<(InterfaceEntry, Vec<String>)> {
        let shipped = SHIPPED
            .iter()
            .find(|f| f.id == id && matches!(f.role, Role::Interface { .. }))
            .and_then(|f| match parse_shipped(f, faults) {
                Some(Content::Interface(i)) => Some(*i),
                _ => None,
            });
        let own = self.user_interfaces.iter().filter(|i| i.id == id).cloned();
        let mut replaced = Vec::new();
        let mut merged = shipped;
        for i in own {
            merged = Some(match merged {
                None => i,
                Some(mut base) => {
                    lay(&mut base.contacts, i.contacts, |r| &r.common, &mut replaced);
                    lay(
                        &mut base.calibrations,
                        i.calibrations,
                        |r| &r.common,
                        &mut replaced,
                    );
                    lay(&mut base.values, i.values, |r| &r.common, &mut replaced);
                    lay(&mut base.notes, i.notes, |r| &r.common, &mut replaced);
                    base
                }
            });
        }
        merged.map(|m| (m, replaced))
    }

    /// Ids of the interfaces of a ferromagnet: `(id, barrier, channel)`.
    #[must_use]
    pub fn interfaces_of(
        &self,
        ferromagnet: &str,
    ) -> Vec<(String, Option<String>, Option<String>)> {
        let mut all: BTreeMap<String, (Option<String>, Option<String>)> = BTreeMap::new();
        for file in SHIPPED {
            if let Role::Interface {
                ferromagnet: f,
                barrier,
                channel,
            } = file.role
                && f == ferromagnet
            {
                all.insert(
                    file.id.to_owned(),
                    (barrier.map(str::to_owned), channel.map(str::to_owned)),
                );
            }
        }
        for i in self
            .user_interfaces
            .iter()
            .filter(|i| i.ferromagnet == ferromagnet)
        {
            all.entry(i.id.clone())
                .or_insert_with(|| (i.barrier.clone(), i.channel.clone()));
        }
        all.into_iter().map(|(id, (b, c))| (id, b, c)).collect()
    }

    /// Every shipped file, for checks over the whole library.
    #[must_use]
    pub fn shipped_files() -> &'static [ShippedFile] {
        SHIPPED
    }
}

fn lay<T>(
    base: &mut Vec<T>,
    own: Vec<T>,
    common: impl Fn(&T) -> &Common,
    replaced: &mut Vec<String>,
) {
    for record in own {
        let id = common(&record).id.clone();
        if let Some(old) = base.iter_mut().find(|r| common(r).id == id) {
            replaced.push(id);
            *old = record;
        } else {
            base.push(record);
        }
    }
}

/// The common part of every record of a material.
#[must_use]
pub fn commons_of_material(m: &Material) -> Vec<&Common> {
    m.values
        .iter()
        .map(|r| &r.common)
        .chain(m.pairs.iter().map(|r| &r.common))
        .chain(m.calibrations.iter().map(|r| &r.common))
        .chain(m.laws.iter().map(|r| &r.common))
        .chain(m.notes.iter().map(|r| &r.common))
        .collect()
}

/// The common part of every record of an interface.
#[must_use]
pub fn commons_of_interface(i: &InterfaceEntry) -> Vec<&Common> {
    i.contacts
        .iter()
        .map(|r| &r.common)
        .chain(i.calibrations.iter().map(|r| &r.common))
        .chain(i.values.iter().map(|r| &r.common))
        .chain(i.notes.iter().map(|r| &r.common))
        .collect()
}

impl Library {
    /// Path and text of every shipped file, the references last: what a check of the whole library reads.
    #[must_use]
    pub fn shipped_texts() -> Vec<(String, String)> {
        let references = ("materials/references.bib".to_owned(), REFERENCES.to_owned());
        SHIPPED
            .iter()
            .map(|f| (f.path.to_owned(), f.text.to_owned()))
            .chain([references])
            .collect()
    }
}
