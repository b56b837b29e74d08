//! The command line as data.

use std::ffi::OsString;
use std::path::PathBuf;

use egui::Theme;
use lexopt::{Arg, Parser, ValueExt};

use super::failure::Failure;
use crate::shell::Renderer;

/// What is to be done.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Verb {
    /// Show the window.
    #[default]
    Window,
    /// Every outcome of a file.
    Derive,
    /// Edits on a session.
    Edit,
    /// The accessibility tree of a view.
    Describe,
    /// A view as an image.
    Picture,
    /// The findings page.
    Page,
    /// A session from a table.
    Import,
    /// A signed folder.
    Sign,
    /// A check of a signature.
    Verify,
    /// Runs over folders.
    Batch,
    /// Is there a graphics card?
    Probe,
    /// What a frame costs.
    BenchFrame,
    /// All views on one picture.
    Sheet,
    /// Usage.
    Help,
    /// Version.
    Version,
}

impl Verb {
    const NAMES: [(&'static str, Verb); 12] = [
        ("derive", Verb::Derive),
        ("edit", Verb::Edit),
        ("describe", Verb::Describe),
        ("picture", Verb::Picture),
        ("page", Verb::Page),
        ("import", Verb::Import),
        ("sign", Verb::Sign),
        ("verify", Verb::Verify),
        ("batch", Verb::Batch),
        ("probe", Verb::Probe),
        ("bench-frame", Verb::BenchFrame),
        ("sheet", Verb::Sheet),
    ];

    /// Options beside `--facts` and `--now`, which go with every verb, and the number of files.
    fn takes(self) -> (&'static [&'static str], std::ops::RangeInclusive<usize>) {
        match self {
            Verb::Window => (&["renderer", "out"], 0..=usize::MAX),
            Verb::Derive => (&["json", "answer", "profile"], 1..=1),
            Verb::Edit => (&["out", "json"], 2..=2),
            Verb::Describe => (&["view", "json", "size", "theme"], 1..=1),
            Verb::Picture => (&["view", "size", "scale", "theme", "out", "json"], 1..=1),
            Verb::Page => (&["out", "json"], 1..=1),
            Verb::Import => (&["profile", "answer", "out", "json"], 1..=1),
            Verb::Sign => (&["signer", "key", "passphrase-fd", "out", "json"], 1..=1),
            Verb::Verify => (&["trust", "json"], 1..=1),
            Verb::Batch => (&["out", "jobs", "json"], 1..=usize::MAX),
            Verb::BenchFrame => (&["json", "view", "size", "scale", "frames", "threads"], 0..=1),
            Verb::Sheet => (&["size", "scale", "out"], 0..=1),
            Verb::Probe | Verb::Help | Verb::Version => (&[], 0..=0),
        }
    }
}

/// Everything the command line says.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Args {
    /// What is to be done.
    pub verb: Verb,
    /// Files, in order.
    pub files: Vec<PathBuf>,
    /// `--json`.
    pub json: bool,
    /// `--facts`.
    pub facts: Option<PathBuf>,
    /// `--profile`.
    pub profile: Option<PathBuf>,
    /// `--answer`, each `COLUMN=READING`.
    pub answers: Vec<String>,
    /// `-o`, `--out`.
    pub out: Option<PathBuf>,
    /// `--view`.
    pub view: Option<String>,
    /// `--size`, pixels.
    pub size: Option<[usize; 2]>,
    /// `--scale`, pixels per point.
    pub scale: Option<f32>,
    /// `--theme`.
    pub theme: Option<Theme>,
    /// `--now`, RFC 3339.
    pub now: Option<String>,
    /// `--renderer`.
    pub renderer: Renderer,
    /// `--frames` of the frame bench.
    pub frames: Option<usize>,
    /// `--threads` of the frame bench.
    pub threads: Option<usize>,
}

/// Widest and highest picture, pixels.
const LARGEST: usize = 16_384;

impl Args {
    /// Reads the arguments after the program's name.
    ///
    /// # Errors
    /// Usage (exit code 2): what was not understood.
    pub fn parse(given: impl IntoIterator<Item = OsString>) -> Result<Self, Failure> {
        let mut parser = Parser::from_args(given);
        let mut args = Self::default();
        let mut named = Vec::new();
        let mut verb_is_open = true;
        while let Some(arg) = parser.next().map_err(Failure::usage)? {
            match arg {
                Arg::Value(value) => {
                    let verb = Verb::NAMES.iter().find(|(name, _)| value == *name);
                    match verb {
                        Some((_, verb)) if verb_is_open => args.verb = *verb,
                        _ => args.files.push(value.into()),
                    }
                    verb_is_open = false;
                }
                Arg::Short('h') | Arg::Long("help") => {
                    return Ok(Self { verb: Verb::Help, ..Self::default() });
                }
                Arg::Short('V') | Arg::Long("version") => {
                    return Ok(Self { verb: Verb::Version, ..Self::default() });
                }
                Arg::Short('o') => {
                    named.push("out".to_owned());
                    args.set("out", &mut parser)?;
                }
                Arg::Long(name) => {
                    let name = name.to_owned();
                    args.set(&name, &mut parser)?;
                    named.push(name);
                }
                Arg::Short(letter) => {
                    return Err(Failure::usage(format!("“-{letter}” is not an option")));
                }
            }
        }
        args.check(&named)?;
        Ok(args)
    }

    fn set(&mut self, name: &str, parser: &mut Parser) -> Result<(), Failure> {
        if name == "json" {
            self.json = true;
            return Ok(());
        }
        let known = [
            "facts",
            "profile",
            "answer",
            "out",
            "view",
            "size",
            "scale",
            "theme",
            "now",
            "renderer",
            "frames",
            "threads",
            "signer",
            "key",
            "passphrase-fd",
            "trust",
            "jobs",
        ];
        if !known.contains(&name) {
            return Err(Failure::usage(format!("“--{name}” is not an option")));
        }
        let value = parser.value().map_err(Failure::usage)?;
        let path = || Some(PathBuf::from(value.clone()));
        match name {
            "facts" => self.facts = path(),
            "profile" => self.profile = path(),
            "out" => self.out = path(),
            _ => {
                let text = value.string().map_err(Failure::usage)?;
                self.set_text(name, text)?;
            }
        }
        Ok(())
    }

    fn set_text(&mut self, name: &str, text: String) -> Result<(), Failure> {
        let wrong = |wanted: &str| Failure::usage(format!("“--{name} {text}” is not {wanted}"));
        match name {
            "answer" => self.answers.push(text),
            "view" => self.view = Some(text),
            "now" => self.now = Some(text),
            "size" => self.size = Some(size(&text).ok_or_else(|| wrong("WIDTHxHEIGHT in pixels"))?),
            "scale" => {
                let scale = text.parse().ok().filter(|scale| (0.25..=8.0).contains(scale));
                self.scale = Some(scale.ok_or_else(|| wrong("a number from 0.25 to 8"))?);
            }
            "theme" => {
                self.theme = Some(match text.as_str() {
                    "light" => Theme::Light,
                    "dark" => Theme::Dark,
                    _ => return Err(wrong("light or dark")),
                });
            }
            "renderer" => {
                self.renderer =
                    Renderer::from_name(&text).ok_or_else(|| wrong("auto, gpu or cpu"))?;
            }
            "frames" => self.frames = Some(text.parse().map_err(|_| wrong("a number"))?),
            "threads" => self.threads = Some(text.parse().map_err(|_| wrong("a number"))?),
            // Of the verbs that are not there yet.
            _ => {}
        }
        Ok(())
    }

    /// Options and files must fit the verb.
    fn check(&self, named: &[String]) -> Result<(), Failure> {
        let (options, files) = self.verb.takes();
        for name in named {
            if !options.contains(&name.as_str()) && name != "facts" && name != "now" {
                return Err(Failure::usage(format!("“--{name}” does not go with this command")));
            }
        }
        if !files.contains(&self.files.len()) {
            return Err(Failure::usage(match self.files.len() {
                0 => "a file is missing".to_owned(),
                n if n < *files.start() => "a second file is missing".to_owned(),
                _ => "there are too many files".to_owned(),
            }));
        }
        Ok(())
    }
}

fn size(text: &str) -> Option<[usize; 2]> {
    let (width, height) = text.split_once(['x', '×'])?;
    let side = |text: &str| text.parse().ok().filter(|n| (1..=LARGEST).contains(n));
    Some([side(width)?, side(height)?])
}

#[cfg(test)]
mod tests {
    use super::*;

    fn parse(line: &str) -> Result<Args, Failure> {
        Args::parse(line.split_whitespace().map(OsString::from))
    }

    #[test]
    fn a_picture_with_all_its_options() {
        let args = parse(
            "picture a.json --view circulation --size 3840x2160 --scale 2 --theme=dark -o p.png",
        )
        .expect("fits");
        assert_eq!(args.verb, Verb::Picture);
        assert_eq!(args.files, [PathBuf::from("a.json")]);
        assert_eq!((args.size, args.scale), (Some([3840, 2160]), Some(2.0)));
        assert_eq!((args.theme, args.out), (Some(Theme::Dark), Some("p.png".into())));
    }

    #[test]
    fn a_verb_is_only_the_first_word() {
        let args = parse("a.csv derive").expect("two files for the window");
        assert_eq!((args.verb, args.files.len()), (Verb::Window, 2));
        assert_eq!(parse("--renderer cpu a.csv").expect("fits").renderer, Renderer::Cpu);
    }

    #[test]
    fn what_does_not_fit_is_a_question_of_usage() {
        for line in [
            "derive",
            "derive a b",
            "derive a --size 3x3",
            "picture a --size 0x3",
            "picture a --size 3",
            "picture a --scale nan",
            "picture a --theme blue",
            "edit a",
            "page a --frobnicate",
            "page a -x",
            "probe a",
            "--renderer",
            "--renderer vulkan",
        ] {
            let failure = parse(line).expect_err(line);
            assert_eq!(failure.exit as u8, 2, "{line}");
        }
    }
}
