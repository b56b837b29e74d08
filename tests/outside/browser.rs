//! The page through a real browser to PDF: size, pages, tags, text.

use std::path::Path;
use std::process::Command;

use crate::tools::{rampcrest, run};

/// Demo tests whose page is printed, with a reading that must be found on it.
const PAGES: &[(&str, &str)] =
    &[("kittiwake", "rising"), ("dunlin", "flattened"), ("curlew", "fibrillation")];

fn print(page: &Path, pdf: &Path) {
    let profile = tempfile::tempdir().expect("temporary folder");
    run(Command::new("chromium")
        .args(["--headless", "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run"])
        .args(["--disable-background-networking", "--disable-component-update", "--disable-sync"])
        .args(["--no-pdf-header-footer", "--generate-pdf-document-outline"])
        .arg(format!("--user-data-dir={}", profile.path().display()))
        .arg(format!("--print-to-pdf={}", pdf.display()))
        .arg(format!("file://{}", page.display())));
}

#[test]
fn every_demo_page_prints_on_a4_with_its_text() {
    let folder = tempfile::tempdir().expect("temporary folder");
    for (case, reading) in PAGES {
        let session = xtask::root().join("demo-sessions").join(case).join("session.json");
        let page = folder.path().join(format!("{case}.html"));
        let pdf = folder.path().join(format!("{case}.pdf"));
        run(Command::new(rampcrest())
            .arg("page")
            .arg(&session)
            .arg("-o")
            .arg(&page)
            .args(["--now", "2026-11-24T10:51:00+01:00"]));
        print(&page, &pdf);
        let info = run(Command::new("pdfinfo").arg(&pdf));
        let info = String::from_utf8_lossy(&info.stdout).into_owned();
        assert!(info.contains("A4"), "{case}: {info}");
        assert!(info.lines().any(|l| l.starts_with("Tagged:") && l.ends_with("yes")), "{info}");
        let pages: u32 = info
            .lines()
            .find_map(|l| l.strip_prefix("Pages:"))
            .and_then(|n| n.trim().parse().ok())
            .expect("page count");
        assert!((1..=8).contains(&pages), "{case}: {pages} pages");
        let text = run(Command::new("pdftotext").args(["-f", "1", "-l", "1"]).arg(&pdf).arg("-"));
        let text = String::from_utf8_lossy(&text.stdout).into_owned();
        for wanted in ["Decision support", "Key results", "Safety", reading] {
            assert!(text.contains(wanted), "{case}: page 1 lacks “{wanted}”:\n{text}");
        }
    }
}
