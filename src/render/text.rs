//! Blocks as text for a terminal or a pipe.

use console::Style;
use textwrap::{Options, WordSeparator, WordSplitter};

use super::Look;
use super::block::Block;
use super::safe::safe;
use crate::diagnosis::Verdict;

/// Lines of a tree move in no further than this many steps.
const DEEPEST: usize = 9;

/// Writes a page.
pub fn text(page: &[Block], look: Look) -> String {
    let mut out = String::new();
    for (at, block) in page.iter().enumerate() {
        if at > 0 && needs_room(block, page.get(at - 1)) {
            out.push('\n');
        }
        out.push_str(&one(block, look));
        out.push('\n');
    }
    out
}

/// An empty line stands before headings, and around paragraphs that follow a list.
fn needs_room(block: &Block, before: Option<&Block>) -> bool {
    match block {
        Block::Head(_) | Block::Heading(_) => true,
        Block::Para(_) => !matches!(
            before,
            Some(Block::Head(_) | Block::Heading(_) | Block::Title(..))
        ),
        _ => false,
    }
}

fn one(block: &Block, look: Look) -> String {
    let style = |s: Style| s.force_styling(look.color);
    match block {
        Block::Title(verdict, text) => style(of(*verdict))
            .apply_to(filled(text, "", "", look))
            .to_string(),
        Block::Head(text) => style(Style::new().bold())
            .apply_to(filled(text, "", "", look))
            .to_string(),
        Block::Heading(text) => style(Style::new().bold())
            .apply_to(filled(&text.to_uppercase(), "", "", look))
            .to_string(),
        Block::Para(text) => filled(text, "", "", look),
        Block::Numbered(number, text) => filled(text, &format!("{number}. "), "   ", look),
        Block::Bullet(text) => filled(text, "- ", "  ", look),
        Block::Under(text) => filled(text, "   ", "   ", look),
        Block::Claim(text) => style(Style::new().bold())
            .apply_to(filled(text, "", "  ", look))
            .to_string(),
        Block::For(text) => filled(text, "  + ", "    ", look),
        Block::Branch(depth, text) => {
            let indent = "  ".repeat((*depth).min(DEEPEST));
            filled(text, &indent, &format!("{indent}    "), look)
        }
        Block::Against(text) => filled(text, "  - ", "    ", look),
    }
}

fn of(verdict: Verdict) -> Style {
    let bold = Style::new().bold();
    match verdict {
        Verdict::Steady => bold.green(),
        Verdict::Watch => bold.cyan(),
        Verdict::ActToday => bold.yellow(),
        Verdict::ActNow => bold.red(),
    }
}

fn filled(text: &str, first: &str, rest: &str, look: Look) -> String {
    // Words break at spaces only: an id or a path that is cut can't be copied.
    let options = Options::new(look.width)
        .word_separator(WordSeparator::AsciiSpace)
        .word_splitter(WordSplitter::NoHyphenation)
        .initial_indent(first)
        .subsequent_indent(rest);
    textwrap::fill(&safe(text), options)
}
