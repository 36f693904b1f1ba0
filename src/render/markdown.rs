//! Blocks as Markdown.

use super::block::Block;
use super::safe::safe;

/// Writes a page.
pub fn markdown(page: &[Block]) -> String {
    let mut out = String::new();
    for (at, block) in page.iter().enumerate() {
        if at > 0 && !(is_item(block) && page.get(at - 1).is_some_and(is_item)) {
            out.push('\n');
        }
        out.push_str(&one(block));
        out.push('\n');
    }
    out
}

fn is_item(block: &Block) -> bool {
    !matches!(
        block,
        Block::Title(..) | Block::Head(_) | Block::Heading(_) | Block::Para(_) | Block::Claim(_)
    )
}

fn one(block: &Block) -> String {
    match block {
        Block::Title(_, text) => format!("# {}", escaped(text)),
        Block::Head(text) => format!("# {}", escaped(text)),
        Block::Branch(depth, text) => format!("{}- {}", "  ".repeat(*depth), escaped(text)),
        Block::Heading(text) => format!("## {}", escaped(text)),
        Block::Para(text) => escaped(text),
        Block::Numbered(number, text) => format!("{number}. {}", escaped(text)),
        Block::Bullet(text) => format!("- {}", escaped(text)),
        Block::Under(text) => format!("   - {}", escaped(text)),
        Block::Claim(text) => format!("**{}**", escaped(text)),
        Block::For(text) => format!("- for: {}", escaped(text)),
        Block::Against(text) => format!("- against: {}", escaped(text)),
    }
}

/// Marks that would be read as Markdown or HTML, behind a backslash; code marks that pair up stay.
fn escaped(text: &str) -> String {
    let text = safe(text);
    let paired = text.matches('`').count().is_multiple_of(2);
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        let special = matches!(
            c,
            '\\' | '*' | '_' | '[' | ']' | '<' | '>' | '#' | '|' | '~'
        ) || (c == '`' && !paired);
        if special {
            out.push('\\');
        }
        out.push(c);
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_are_not_read_as_markdown_or_html() {
        let page = [Block::Bullet("a *b* <script> [x](y) `id`".to_owned())];
        assert_eq!(
            markdown(&page),
            "- a \\*b\\* \\<script\\> \\[x\\](y) `id`\n"
        );
        assert_eq!(markdown(&[Block::Para("a ` b".to_owned())]), "a \\` b\n");
    }
}
