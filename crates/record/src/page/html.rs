//! Writing HTML: every text is escaped, and loses its combining marks, which paper fonts misplace.

use crate::presentation::labels::plain;

/// HTML under construction.
pub(super) struct Html(String);

impl Html {
    pub fn new() -> Self {
        Self(String::with_capacity(64 * 1024))
    }

    pub fn done(self) -> String {
        self.0
    }

    /// Markup as it is.
    pub fn raw(&mut self, markup: &str) {
        self.0.push_str(markup);
    }

    /// Text, escaped.
    pub fn text(&mut self, text: &str) {
        self.0.push_str(&escaped(text));
    }

    /// `<tag class>`.
    pub fn open(&mut self, tag: &str, class: &str) {
        self.0.push('<');
        self.0.push_str(tag);
        if !class.is_empty() {
            self.0.push_str(&format!(" class=\"{class}\""));
        }
        self.0.push('>');
    }

    /// `</tag>` and a line end.
    pub fn close(&mut self, tag: &str) {
        self.0.push_str(&format!("</{tag}>\n"));
    }

    /// An element that holds a text.
    pub fn element(&mut self, tag: &str, class: &str, text: &str) {
        self.open(tag, class);
        self.text(text);
        self.close(tag);
    }

    /// A number or reading that bears the key of its outcome, `id@at`.
    pub fn keyed(&mut self, class: &str, key: &str, text: &str) {
        let (id, at) = key.split_once('@').unwrap_or((key, ""));
        let (id, at) = (escaped(id), escaped(at));
        self.0.push_str(&format!("<span class=\"{class}\" data-id=\"{id}\" data-at=\"{at}\">"));
        self.text(text);
        self.0.push_str("</span>");
    }
}

/// Text for markup: escaped, without combining marks.
pub(super) fn escaped(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 8);
    for c in plain(text).chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            c if c.is_control() && c != '\n' => out.push(' '),
            c => out.push(c),
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_cannot_become_markup() {
        assert_eq!(
            escaped("<b a=\"1\" & 'x'>\u{7}V̇O₂"),
            "&lt;b a=&quot;1&quot; &amp; &#39;x&#39;&gt; VO₂"
        );
    }
}
