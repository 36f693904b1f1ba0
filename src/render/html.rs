//! What every HTML page shares: one file, no script, nothing from the network, fit for print.

use super::safe::safe;

/// Text as it may stand in HTML.
pub(super) fn escaped(text: &str) -> String {
    let mut out = String::new();
    for c in safe(text).chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            c => out.push(c),
        }
    }
    out
}

/// A whole document; `kind` is the class of its body, `body` is HTML.
pub(super) fn document(title: &str, kind: &str, body: &str) -> String {
    let title = escaped(title);
    format!(
        "<!doctype html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n\
         <meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n<title>{title}</title>\n\
         <style>{STYLE}</style>\n</head>\n<body class=\"{kind}\">\n{body}\n</body>\n</html>\n"
    )
}

const STYLE: &str = include_str!("print.css");
