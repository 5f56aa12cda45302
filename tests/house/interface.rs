//! Core's public interface as a committed listing, so that a change of it shows in review.
//!
//! Read from the source: modules by their files, items in private modules where a `pub use` brings them out,
//! methods under their type, and the functions that a `calculations!` block declares. Hidden items and tests
//! are left out.

use std::collections::BTreeMap;

use proc_macro2::{Delimiter, TokenTree};
use quote::ToTokens;
use syn::{Attribute, Fields, ImplItem, Item, Type, UseTree, Visibility};

use crate::source::{group, ident, is_punct};
use crate::{compare_committed, root, text};

#[derive(Default)]
struct Module {
    public: bool,
    /// Name and listing of each public item.
    items: Vec<(String, String)>,
    /// Paths brought out by `pub use`, with the name given to them.
    brought_out: Vec<(Vec<String>, String)>,
    inner: BTreeMap<String, Module>,
}

/// Methods and trait implementations by the name of their type.
type Implemented = BTreeMap<String, Vec<String>>;

fn hidden(attributes: &[Attribute]) -> bool {
    attributes.iter().any(|a| {
        let written = a.meta.to_token_stream().to_string().replace(' ', "");
        written.starts_with("cfg(test") || written == "doc(hidden)"
    })
}

fn public(visibility: &Visibility) -> bool {
    matches!(visibility, Visibility::Public(_))
}

/// An item on one line, as rustfmt would space it.
fn one_line(mut item: Item) -> String {
    strip(&mut item);
    let printed = prettyplease::unparse(&syn::File {
        shebang: None,
        frontmatter: None,
        attrs: Vec::new(),
        items: vec![item],
    });
    let words: Vec<_> = printed.split_whitespace().collect();
    words.join(" ").replace("( ", "(").replace(", )", ")").replace(" {}", "").replace(",}", "}")
}

/// Leaves only what a caller sees: no docs and attributes, no bodies, no private fields.
fn strip(item: &mut Item) {
    let keep = |a: &Attribute| a.path().is_ident("non_exhaustive");
    let fields = |fields: &mut Fields| match fields {
        Fields::Named(named) => {
            let seen = std::mem::take(&mut named.named);
            named.named = seen.into_iter().filter(|f| public(&f.vis)).collect();
            named.named.iter_mut().for_each(|f| f.attrs.clear());
        }
        Fields::Unnamed(unnamed) => unnamed.unnamed.iter_mut().for_each(|f| {
            f.attrs.clear();
            if !public(&f.vis) {
                f.ty = Type::Infer(syn::parse_quote!(_));
            }
        }),
        Fields::Unit => {}
    };
    match item {
        Item::Fn(f) => {
            f.attrs.clear();
            f.block.stmts.clear();
        }
        Item::Struct(s) => {
            s.attrs.retain(keep);
            fields(&mut s.fields);
        }
        Item::Enum(e) => {
            e.attrs.retain(keep);
            for variant in &mut e.variants {
                variant.attrs.clear();
                variant.fields.iter_mut().for_each(|f| f.attrs.clear());
            }
        }
        Item::Const(c) => {
            c.attrs.clear();
            c.expr = syn::parse_quote!(_);
        }
        Item::Static(s) => {
            s.attrs.clear();
            s.expr = syn::parse_quote!(_);
        }
        Item::Type(t) => t.attrs.clear(),
        Item::Trait(t) => {
            t.attrs.clear();
            for inner in &mut t.items {
                match inner {
                    syn::TraitItem::Fn(f) => {
                        f.attrs.clear();
                        f.default = f.default.take().map(|_| syn::parse_quote!({}));
                    }
                    syn::TraitItem::Const(c) => c.attrs.clear(),
                    syn::TraitItem::Type(t) => t.attrs.clear(),
                    _ => {}
                }
            }
        }
        _ => {}
    }
}

/// Name, visibility and attributes of the items that are listed by themselves.
fn listed(item: &Item) -> Option<(String, &Visibility, &[Attribute])> {
    Some(match item {
        Item::Fn(i) => (i.sig.ident.to_string(), &i.vis, &i.attrs),
        Item::Struct(i) => (i.ident.to_string(), &i.vis, &i.attrs),
        Item::Enum(i) => (i.ident.to_string(), &i.vis, &i.attrs),
        Item::Const(i) => (i.ident.to_string(), &i.vis, &i.attrs),
        Item::Static(i) => (i.ident.to_string(), &i.vis, &i.attrs),
        Item::Type(i) => (i.ident.to_string(), &i.vis, &i.attrs),
        Item::Trait(i) => (i.ident.to_string(), &i.vis, &i.attrs),
        _ => return None,
    })
}

fn read_module(directory: &str, items: Vec<Item>, implemented: &mut Implemented) -> Module {
    let mut module = Module::default();
    for item in items {
        if let Some((name, visibility, attributes)) = listed(&item) {
            if public(visibility) && !hidden(attributes) {
                module.items.push((name, one_line(item)));
            }
            continue;
        }
        match item {
            Item::Mod(m) if !hidden(&m.attrs) => {
                let name = m.ident.to_string();
                let below = format!("{directory}/{name}");
                let items = m.content.map_or_else(|| items_of(&below), |(_, items)| items);
                let inner = read_module(&below, items, implemented);
                module.inner.insert(name, Module { public: public(&m.vis), ..inner });
            }
            Item::Use(u) if public(&u.vis) && !hidden(&u.attrs) => {
                leaves(&u.tree, &mut Vec::new(), &mut module.brought_out);
            }
            Item::Impl(i) if !hidden(&i.attrs) => {
                let own = i.self_ty.to_token_stream().to_string();
                let name = own
                    .split(|c: char| !c.is_alphanumeric() && c != '_')
                    .find(|w| !w.is_empty())
                    .unwrap_or("");
                let entry = implemented.entry(name.to_owned()).or_default();
                if let Some((path, _)) = &i.trait_ {
                    entry.push(
                        format!("impl {} for {own}", path.to_token_stream())
                            .replace(" <", "<")
                            .replace("< ", "<"),
                    );
                } else {
                    entry.extend(i.items.into_iter().filter_map(method));
                }
            }
            Item::Macro(m) if m.mac.path.is_ident("calculations") => {
                let declared = m.mac.tokens.into_iter().collect::<Vec<_>>();
                module.items.extend(declared_functions(&declared));
            }
            Item::Macro(m)
                if m.attrs.iter().any(|a| a.path().is_ident("macro_export")) && !hidden(&m.attrs) =>
            {
                module.items.extend(m.ident.map(|name| (name.to_string(), format!("macro {name}!"))));
            }
            _ => {}
        }
    }
    module
}

/// A public method or constant of an `impl`.
fn method(item: ImplItem) -> Option<String> {
    match item {
        ImplItem::Fn(f) if public(&f.vis) && !hidden(&f.attrs) => {
            let (vis, sig) = (f.vis, f.sig);
            Some(one_line_of_method(&syn::parse_quote!(#vis #sig {})))
        }
        ImplItem::Const(c) if public(&c.vis) && !hidden(&c.attrs) => {
            Some(format!("pub const {}: {}", c.ident, c.ty.to_token_stream()))
        }
        _ => None,
    }
}

/// `prettyplease` prints whole items, so the method is printed inside an empty `impl`.
fn one_line_of_method(method: &syn::ImplItemFn) -> String {
    let printed = one_line(syn::parse_quote!(impl X { #method }));
    printed.trim_start_matches("impl X {").trim_end_matches('}').trim().to_owned()
}

/// `fn name(…) -> …` as a `calculations!` block declares it.
fn declared_functions(tokens: &[TokenTree]) -> Vec<(String, String)> {
    let mut found = Vec::new();
    for (i, token) in tokens.iter().enumerate() {
        if ident(Some(token)).as_deref() != Some("fn") {
            continue;
        }
        let (Some(name), Some(inputs)) =
            (ident(tokens.get(i + 1)), group(tokens.get(i + 2), Delimiter::Parenthesis))
        else {
            continue;
        };
        let outputs = tokens.iter().skip(i + 3).take_while(|t| {
            !["where", "formula", "source"].contains(&ident(Some(t)).unwrap_or_default().as_str())
        });
        let words = without_docs(inputs.into_iter().collect());
        let outputs = without_docs(outputs.cloned().collect());
        found.push((name.clone(), format!("calculation {name}({words}) {outputs}")));
    }
    found
}

fn without_docs(tokens: Vec<TokenTree>) -> String {
    let mut kept = Vec::new();
    let mut tokens = tokens.into_iter().peekable();
    while let Some(token) = tokens.next() {
        let doc = is_punct(Some(&token), '#') && group(tokens.peek(), Delimiter::Bracket).is_some();
        if doc {
            tokens.next();
        } else if let TokenTree::Group(g) = &token {
            let inner = without_docs(g.stream().into_iter().collect());
            kept.push(if g.delimiter() == Delimiter::Brace {
                format!("{{ {inner} }}")
            } else {
                format!("[{inner}]")
            });
        } else {
            kept.push(token.to_string());
        }
    }
    kept.join(" ")
        .replace(" :", ":")
        .replace(" ,", ",")
        .replace("- >", "->")
        .replace(". . =", "..=")
        .replace("- ", "-")
}

fn leaves(tree: &UseTree, path: &mut Vec<String>, found: &mut Vec<(Vec<String>, String)>) {
    match tree {
        UseTree::Path(p) => {
            path.push(p.ident.to_string());
            leaves(&p.tree, path, found);
            path.pop();
        }
        UseTree::Group(g) => g.items.iter().for_each(|tree| leaves(tree, path, found)),
        UseTree::Name(n) => {
            found.push(([path.as_slice(), &[n.ident.to_string()]].concat(), n.ident.to_string()));
        }
        UseTree::Rename(r) => {
            found.push(([path.as_slice(), &[r.ident.to_string()]].concat(), r.rename.to_string()));
        }
        UseTree::Glob(_) => found.push(([path.as_slice(), &["*".to_owned()]].concat(), "*".to_owned())),
    }
}

fn items_of(module: &str) -> Vec<Item> {
    let file =
        [format!("{module}.rs"), format!("{module}/mod.rs")].into_iter().find(|f| root().join(f).is_file());
    let file = file.unwrap_or_else(|| panic!("no file for the module {module}"));
    syn::parse_file(&text(&file)).unwrap_or_else(|e| panic!("{file}: {e}")).items
}

/// Lists a public module and those below it.
fn list(path: &str, module: &Module, implemented: &Implemented, lines: &mut Vec<String>) {
    let mut here = Vec::new();
    for (name, item) in &module.items {
        here.push(item.clone());
        here.extend(implemented.get(name).into_iter().flatten().map(|m| format!("{name}: {m}")));
    }
    for (from, name) in &module.brought_out {
        let steps: Vec<_> = from.iter().filter(|s| *s != "self").map(String::as_str).collect();
        let private = steps.split_last().and_then(|(last, way)| {
            let inner = way.iter().try_fold(module, |m, step| m.inner.get(*step))?;
            (!way.is_empty()).then_some((*last, inner))
        });
        let Some((last, inner)) = private else {
            here.push(reexport(from, name));
            continue;
        };
        let deeper = inner
            .brought_out
            .iter()
            .filter(|(_, n)| last == "*" || n == last)
            .map(|(path, n)| reexport(path, n));
        here.extend(deeper);
        for (item_name, item) in inner.items.iter().filter(|(n, _)| last == "*" || n == last) {
            here.push(item.clone());
            here.extend(
                implemented.get(item_name).into_iter().flatten().map(|m| format!("{item_name}: {m}")),
            );
        }
    }
    here.sort();
    lines.push(format!("\n[{path}]"));
    lines.extend(here);
    for (name, inner) in module.inner.iter().filter(|(_, m)| m.public) {
        list(&format!("{path}::{name}"), inner, implemented, lines);
    }
}

fn reexport(path: &[String], name: &str) -> String {
    let renamed = path.last().is_some_and(|last| last != name);
    format!("pub use {}{}", path.join("::"), if renamed { format!(" as {name}") } else { String::new() })
}

fn listing(items: Vec<Item>, directory: &str) -> Vec<String> {
    let mut implemented = Implemented::new();
    let module = read_module(directory, items, &mut implemented);
    for methods in implemented.values_mut() {
        methods.sort();
    }
    let mut lines = Vec::new();
    list("ampwright", &module, &implemented, &mut lines);
    lines
}

#[test]
fn the_public_interface_is_the_committed_one() {
    let file = syn::parse_file(&text("core/src/lib.rs")).expect("lib.rs is Rust");
    let lines = listing(file.items, "core/src");
    assert!(lines.len() > 100, "only {} lines: the reader lost its way", lines.len());
    let header = "# Made by `tests/run regenerate`: what core offers, module by module.\n";
    compare_committed("tests/house/public_api.txt", &format!("{header}{}\n", lines.join("\n")));
}

#[test]
fn hidden_things_are_not_listed_and_declared_ones_are() {
    let source: syn::File = syn::parse_quote! {
        mod inner {
            pub struct Shown { pub a: f64, b: f64 }
            impl Shown { pub fn method(&self) -> f64 { 1.0 } fn private(&self) {} }
            pub struct NotBroughtOut;
        }
        pub use inner::Shown;
        #[doc(hidden)] pub fn hidden() {}
        #[cfg(test)] pub fn test_only() {}
        pub(crate) fn internal() {}
        calculations! {
            /// Doc.
            fn ohm_current(/// Doc.
                voltage: V in volt [any]) -> current: A in ampere source "I = U/R." { voltage }
        }
    };
    let lines = listing(source.items, "nowhere");
    assert_eq!(
        lines,
        [
            "\n[ampwright]",
            "Shown: pub fn method(&self) -> f64",
            "calculation ohm_current(voltage: V in volt [any]) -> current: A in ampere",
            "pub struct Shown { pub a: f64, }",
        ]
    );
}
