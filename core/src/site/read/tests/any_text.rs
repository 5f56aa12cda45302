//! Whatever the text, the reader ends with a site or with orderly problems.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use proptest::prelude::*;

use super::{VALID, read, read_bytes};

/// What every refusal owes its reader, whatever the text was.
fn is_orderly(text: &str) -> Result<(), TestCaseError> {
    let Err(problems) = read(text) else { return Ok(()) };
    prop_assert!(!problems.0.is_empty() && problems.0.len() <= 200);
    let lines = u32::try_from(text.matches('\n').count()).unwrap() + 1;
    for pair in problems.0.windows(2) {
        prop_assert!(pair[0].line <= pair[1].line, "{}", problems);
    }
    for problem in &problems.0 {
        prop_assert!(problem.line <= lines, "{problem}");
        let printed = problem.to_string();
        prop_assert!(printed.len() < 1000 && !printed.chars().any(char::is_control), "{printed:?}");
    }
    Ok(())
}

/// Pieces that a text of this kind is made of.
const PIECES: [&str; 38] = [
    "[",
    "]",
    "[[",
    "]]",
    "{",
    "}",
    "=",
    ".",
    ",",
    "\"",
    "'",
    "\"\"\"",
    "'''",
    "\n",
    "\r\n",
    "\r",
    " ",
    "#",
    "\\",
    "circuit",
    "device",
    "load",
    "site",
    "name",
    "from",
    "to",
    "rules",
    "override",
    "1",
    "1e400",
    "nan",
    "\"5 A\"",
    "\u{0}",
    "é",
    "[[circuit]]\n",
    "[[circuit.device]]\n",
    "name = \"a\"\n",
    "format = 1\n",
];

proptest! {
    #[test]
    fn random_text_never_panics(text in ".{0,400}") {
        is_orderly(&text)?;
    }

    #[test]
    fn random_bytes_never_panic(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        let _ = read_bytes(&bytes);
        is_orderly(&String::from_utf8_lossy(&bytes))?;
    }

    #[test]
    fn pieces_of_the_syntax_never_panic(
        pieces in prop::collection::vec(prop::sample::select(&PIECES[..]), 0..60)
    ) {
        is_orderly(&pieces.concat())?;
    }

    #[test]
    fn a_cut_document_never_panics(at in 0..VALID.len()) {
        is_orderly(&VALID[..at])?;
        is_orderly(&VALID[at..])?;
    }

    #[test]
    fn a_changed_document_never_panics(
        changes in prop::collection::vec((0..VALID.len(), any::<char>(), 0..3_u8), 1..6)
    ) {
        let mut text: Vec<char> = VALID.chars().collect();
        for (at, c, how) in changes {
            let at = at.min(text.len() - 1);
            match how {
                0 => text[at] = c,
                1 => text.insert(at, c),
                _ => { text.remove(at); }
            }
        }
        is_orderly(&text.into_iter().collect::<String>())?;
    }

    #[test]
    fn shuffled_lines_never_panic(order in prop::collection::vec(0..VALID.lines().count(), 0..80)) {
        let lines: Vec<&str> = VALID.lines().collect();
        let shuffled: Vec<&str> = order.into_iter().flat_map(|at| [lines[at], "\n"]).collect();
        is_orderly(&shuffled.concat())?;
    }
}
