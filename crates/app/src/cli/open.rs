//! Opens what stands where a session may stand.

use std::path::Path;

use record::facts_file::FactsFile;
use record::import::{Answers, Imported, MAX_BYTES, Profile, import};

use super::args::Args;
use super::failure::Failure;
use super::files;
use crate::App;
use crate::document::Document;

/// The window's state on a file.
///
/// # Errors
/// Unreadable or refused (3).
pub fn app(path: &Path, args: &Args) -> Result<App, Failure> {
    let Imported { recording, .. } = table(path, args)?;
    let mut app = App::new();
    let label = path.file_stem().unwrap_or_default().to_string_lossy().into_owned();
    app.document = Document::opened(recording, facts(args)?, &label);
    Ok(app)
}

/// A breath table, read.
fn table(path: &Path, args: &Args) -> Result<Imported, Failure> {
    let bytes = files::read(path, MAX_BYTES)?;
    let mut answers = Answers::none();
    for answer in &args.answers {
        answers.add(answer).map_err(Failure::refused)?;
    }
    let profile = match &args.profile {
        Some(path) => {
            let text = files::read_text(path)?;
            Some(Profile::read(&text).map_err(Failure::refused)?)
        }
        None => None,
    };
    let name = path.display().to_string();
    import(&bytes, &name, &answers, profile.as_ref()).map_err(Failure::refused)
}

/// The facts beside the test; nothing stated without `--facts`.
fn facts(args: &Args) -> Result<FactsFile, Failure> {
    let text = match &args.facts {
        Some(path) => files::read_text(path)?,
        None => return Ok(FactsFile::default()),
    };
    FactsFile::read(&text).map_err(Failure::refused)
}
