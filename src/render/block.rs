//! What a page is made of.

use crate::diagnosis::Verdict;

/// A part of a page. The texts may hold words from logs; whoever writes them down makes them safe.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Block {
    /// The first line: the verdict in words.
    Title(Verdict, String),
    /// The name of what is explained.
    Head(String),
    /// The head of a section.
    Heading(String),
    /// A paragraph.
    Para(String),
    /// A numbered item.
    Numbered(usize, String),
    /// An item.
    Bullet(String),
    /// More about the item before.
    Under(String),
    /// A cause, with what speaks for and against it under it.
    Claim(String),
    /// Speaks for the claim before.
    For(String),
    /// Speaks against the claim before.
    Against(String),
    /// A line of a tree, so many steps in.
    Branch(usize, String),
}

/// A heading as a sentence begins: the first letter large.
pub(super) fn sentence(text: &str) -> String {
    let mut chars = text.chars();
    if chars.clone().nth(1).is_some_and(char::is_uppercase) {
        return text.to_owned(); // pH stays pH
    }
    chars.next().map_or_else(String::new, |first| {
        first.to_uppercase().chain(chars).collect()
    })
}
