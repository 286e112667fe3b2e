//! A report as Markdown.

use super::model::{Report, Table};

/// The report as Markdown bytes.
pub fn render(report: &Report) -> Vec<u8> {
    let mut out = format!("# {}\n\n", block(&report.head));
    out += &format!("Verdict: **{}**\n\n", report.verdict.name());
    for text in std::iter::once(&report.about).chain(&report.remarks).filter(|t| !t.is_empty()) {
        out += &format!("{}\n\n", block(text));
    }
    for table in report.tables.iter().filter(|t| !t.rows.is_empty()) {
        out += &format!("## {}\n\n{}\n", escape(&table.title), grid(table));
    }
    if !report.findings.is_empty() {
        out += "## Findings\n\n";
        for finding in &report.findings {
            out += &format!(
                "- **{}**: {} ({})\n",
                finding.status.name(),
                escape(&finding.headline),
                escape(&finding.because)
            );
        }
        out.push('\n');
    }
    for (title, list) in [("Ways to bring the split back", &report.remedies), ("Notes", &report.notes)] {
        if !list.is_empty() {
            out += &format!("## {title}\n\n");
            for item in list {
                out += &format!("- {}\n", block(item));
            }
            out.push('\n');
        }
    }
    out += &format!("Correlations: {}\n\n", escape(&report.correlations));
    for caution in &report.cautions {
        out += &format!("{}\n\n", escape(caution));
    }
    out += &format!("{}\n", escape(&report.origin));
    out.into_bytes()
}

fn grid(table: &Table) -> String {
    let line = |cells: &[String]| {
        let cells: Vec<String> = cells.iter().map(|c| escape(c)).collect();
        format!("| {} |\n", cells.join(" | "))
    };
    let rule: Vec<&str> =
        (0..table.heads.len()).map(|column| if column < table.words { ":---" } else { "---:" }).collect();
    let mut out = line(&table.heads);
    out += &format!("| {} |\n", rule.join(" | "));
    for row in &table.rows {
        out += &line(row);
    }
    out
}

/// Text that begins a block: what would make it a list, a rule or a heading there stands for itself too.
fn block(text: &str) -> String {
    let text = escape(text.trim_start());
    let digits = text.chars().take_while(char::is_ascii_digit).count();
    match text.chars().nth(digits) {
        Some('-' | '+' | '=') if digits == 0 => format!("\\{text}"),
        Some('.' | ')') if digits > 0 => format!("{}\\{}", &text[..digits], &text[digits..]),
        _ => text,
    }
}

/// Characters that Markdown or HTML would read as markup stand for themselves.
fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '&' => out.push_str("&amp;"),
            '\\' | '`' | '*' | '_' | '[' | ']' | '#' | '|' | '!' | '~' => {
                out.push('\\');
                out.push(c);
            }
            '@' => out.push_str("&#64;"),
            c => out.push(c),
        }
    }
    // Addresses become links of themselves where nothing breaks them.
    out.replace("://", "&#58;//").replace("www.", "www&#46;").replace("WWW.", "WWW&#46;")
}

#[cfg(test)]
mod tests {
    use super::{block, escape};

    #[test]
    fn text_from_a_case_cannot_become_markup() {
        assert_eq!(escape("<b>|*x*"), "&lt;b&gt;\\|\\*x\\*");
        assert_eq!(escape("see http://a.example, www.b.example"), "see http&#58;//a.example, www&#46;b.example");
    }

    #[test]
    fn text_from_a_case_cannot_become_a_list_or_a_rule() {
        for (text, written) in [
            ("- item", "\\- item"),
            ("--- x", "\\--- x"),
            ("1. item", "1\\. item"),
            ("2) item", "2\\) item"),
            ("    code", "code"),
            ("C-210, met", "C-210, met"),
            ("3.4 m", "3\\.4 m"),
        ] {
            assert_eq!(block(text), written);
        }
    }
}
