//! Rust source as tokens, without its unit tests.

use std::str::FromStr;

use proc_macro2::{Delimiter, TokenStream, TokenTree};

/// The tokens of a file; comments are gone, doc comments are `#[doc = "…"]`.
pub fn tokens(path: &str, text: &str) -> Vec<TokenTree> {
    let stream = TokenStream::from_str(text).unwrap_or_else(|e| panic!("{path}: {e}"));
    without_tests(stream)
}

/// Leaves out every item marked `#[cfg(test)]`.
fn without_tests(stream: TokenStream) -> Vec<TokenTree> {
    let all: Vec<_> = stream.into_iter().collect();
    let mut kept = Vec::new();
    let mut i = 0;
    while i < all.len() {
        let attribute =
            is_punct(all.get(i), '#').then(|| group(all.get(i + 1), Delimiter::Bracket)).flatten();
        let marked = attribute.is_some_and(|a| a.to_string().replace(' ', "").starts_with("cfg(test)"));
        if marked {
            // The item ends at its braces or at a semicolon.
            i += 2;
            while i < all.len() && group(all.get(i), Delimiter::Brace).is_none() && !is_punct(all.get(i), ';')
            {
                i += 1;
            }
        } else {
            kept.push(all[i].clone());
        }
        i += 1;
    }
    kept
}

/// The tokens inside a group of the given kind.
pub fn group(token: Option<&TokenTree>, delimiter: Delimiter) -> Option<TokenStream> {
    match token {
        Some(TokenTree::Group(g)) if g.delimiter() == delimiter => Some(g.stream()),
        _ => None,
    }
}

/// The tokens inside a group, without its tests.
pub fn inside(group: &proc_macro2::Group) -> Vec<TokenTree> {
    without_tests(group.stream())
}

pub fn is_punct(token: Option<&TokenTree>, c: char) -> bool {
    matches!(token, Some(TokenTree::Punct(p)) if p.as_char() == c)
}

pub fn ident(token: Option<&TokenTree>) -> Option<String> {
    match token {
        Some(TokenTree::Ident(i)) => Some(i.to_string()),
        _ => None,
    }
}

/// String literals of the code itself: messages and attributes such as `#[error("…")]`, but no docs.
pub fn string_literals(tokens: &[TokenTree]) -> Vec<String> {
    let mut found = Vec::new();
    for (i, token) in tokens.iter().enumerate() {
        match token {
            TokenTree::Literal(l) => {
                let written = l.to_string();
                if written.contains('"') {
                    found.push(written);
                }
            }
            TokenTree::Group(g) => {
                let inner = inside(g);
                // `#[doc…]` for an item, `#![doc…]` for the module itself.
                let before = tokens.get(..i).unwrap_or_default().iter().rev();
                let attribute =
                    before.take_while(|t| is_punct(Some(t), '!') || is_punct(Some(t), '#')).count() > 0;
                let doc = attribute && ident(inner.first()).as_deref() == Some("doc");
                if !doc {
                    found.extend(string_literals(&inner));
                }
            }
            _ => {}
        }
    }
    found
}

#[test]
fn tests_and_docs_are_left_out_of_the_literals() {
    let source = r#"//! the module's doc
        /// a doc
        #[error("an error")] fn f() { g("a message") }
        #[cfg(test)] mod tests { const X: &str = "a test"; }"#;
    assert_eq!(string_literals(&tokens("sample", source)), [r#""an error""#, r#""a message""#]);
}
