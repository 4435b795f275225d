//! The single file: shell, styles, glue and program in one page that asks nothing of anybody.
//!
//! ```text
//! head   policy: only the scripts and the style of this very file may run, and nothing may be fetched
//!        style: styles/*.css in the order of their names
//! body   the shell of index.html
//!        wasm, worker: data blocks
//!        glue, boot: scripts
//! ```

use std::fmt;
use std::fs;
use std::path::{Path, PathBuf};

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use sha2::{Digest as _, Sha256};
use wasm_bindgen_cli_support::Bindgen;

use super::machine::{self, During, Failure, Outcome};
use super::pack::pack;
use super::wasm::{self, Compiler};

const UNPACK: &str = include_str!("../shell/unpack.js");
const BOOT: &str = include_str!("../shell/boot.js");
const WORKER: &str = include_str!("../shell/worker.js");

/// How hard the page is compressed where a server would do it, to say how much that is: as hard as it goes.
const GZIP_LEVEL: u8 = 10;

/// What a gzip file has beside its compressed data.
const GZIP_FRAME: usize = 18;

/// A page that was built.
pub(crate) struct Built {
    /// The directory it is in.
    pub(crate) dist: PathBuf,
    /// The single file.
    pub(crate) file: PathBuf,
    bytes: usize,
    gzip_bytes: usize,
}

impl fmt::Display for Built {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (file, bytes, gzip) = (self.file.display(), self.bytes, self.gzip_bytes);
        write!(f, "built {file}: {bytes} bytes, {gzip} as gzip")
    }
}

/// Where the single file is written.
pub(crate) fn single_file(project: &Path) -> PathBuf {
    project.join("dist").join("chordwright.html")
}

/// Builds the page from the sources: the single file, and the module for those who embed it.
pub(crate) fn build() -> Outcome<Built> {
    let project = machine::project()?;
    let program = wasm::build(&Compiler::find()?, &project)?;
    let file = single_file(&project);
    let dist = project.join("dist");
    write_module(&program, &dist.join("module"))?;
    let page = Page::of(&project, &program)?.text()?;
    machine::write(&file, &page)?;
    let gzip_bytes = miniz_oxide::deflate::compress_to_vec(page.as_bytes(), GZIP_LEVEL).len() + GZIP_FRAME;
    Ok(Built { dist, file, bytes: page.len(), gzip_bytes })
}

/// The page's program as a module of its own, for pages that want its answers without its looks.
fn write_module(program: &Path, directory: &Path) -> Outcome<()> {
    let failed = "the module could not be written";
    let mut bindgen = bindgen(program);
    bindgen.web(true).during(failed)?.typescript(true).omit_default_module_path(false);
    bindgen.generate(directory).during(failed)
}

fn bindgen(program: &Path) -> Bindgen {
    let mut bindgen = Bindgen::new();
    bindgen.input_path(program).out_name("chordwright");
    bindgen.remove_name_section(true).remove_producers_section(true);
    bindgen
}

/// The parts of the single file.
struct Page {
    shell: String,
    style: String,
    glue: String,
    boot: String,
    program: Vec<u8>,
}

impl Page {
    fn of(project: &Path, program: &Path) -> Outcome<Self> {
        let failed = "the page's program could not be joined to its script";
        let mut output = bindgen(program).no_modules(true).during(failed)?.generate_output().during(failed)?;
        Ok(Self {
            shell: machine::read(&project.join("index.html"))?,
            style: styles(&project.join("styles"))?,
            glue: output.js().to_owned(),
            boot: format!("{UNPACK}{BOOT}"),
            program: output.wasm_mut().emit_wasm(),
        })
    }

    /// The whole file.
    fn text(&self) -> Outcome<String> {
        for script in [&self.glue, &self.boot, WORKER] {
            harmless(script, &["</script", "<!--"])?;
        }
        harmless(&self.style, &["</style"])?;
        let style = format!("<style>{}</style>", self.style);
        let page = put(&self.shell, "<!-- policy -->", &self.policy())?;
        let page = put(&page, "<!-- styles -->", &style)?;
        put(&page, "<!-- program -->", &self.program_block()?)
    }

    /// Lets the scripts and the style of this file run, lets the worker be made of them, and shuts out everything else.
    fn policy(&self) -> String {
        let (glue, boot, style) = (hash(&self.glue), hash(&self.boot), hash(&self.style));
        format!(
            "<meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; \
             script-src 'wasm-unsafe-eval' {glue} {boot}; style-src {style}; style-src-attr 'none'; img-src data:; \
             worker-src blob:; base-uri 'none'; form-action 'none'\">"
        )
    }

    fn program_block(&self) -> Outcome<String> {
        let size = self.program.len();
        let packed = BASE64.encode(pack(&self.program).during("the page's program could not be packed")?);
        let (glue, boot) = (&self.glue, &self.boot);
        Ok(format!(
            "<script type=\"text/plain\" id=\"wasm\" data-size=\"{size}\">{packed}</script>\n\
             <script type=\"text/plain\" id=\"worker\">{WORKER}</script>\n\
             <script id=\"glue\">{glue}</script>\n\
             <script>{boot}</script>"
        ))
    }
}

/// All style sheets of a directory, one after the other in the order of their names.
fn styles(directory: &Path) -> Outcome<String> {
    if !directory.is_dir() {
        return Ok(String::new());
    }
    let entries = fs::read_dir(directory).during(format!("{} cannot be read", directory.display()))?;
    let mut sheets: Vec<PathBuf> = entries.flatten().map(|entry| entry.path()).collect();
    sheets.retain(|sheet| sheet.extension().is_some_and(|extension| extension == "css"));
    sheets.sort();
    sheets.iter().map(|sheet| machine::read(sheet)).collect()
}

/// Refuses text that would end the element it is put into.
fn harmless(text: &str, endings: &[&str]) -> Outcome<()> {
    match endings.iter().find(|ending| text.contains(**ending)) {
        Some(ending) => {
            Err(Failure::new(format!("a part of the page holds `{ending}` and cannot be put into one file")))
        }
        None => Ok(()),
    }
}

/// Puts a part in the place that the shell keeps for it.
fn put(shell: &str, place: &str, part: &str) -> Outcome<String> {
    match shell.split_once(place) {
        Some((before, after)) => Ok([before, part, after].concat()),
        None => Err(Failure::new(format!("index.html has no place `{place}`"))),
    }
}

/// The name of a script or style in the policy.
fn hash(text: &str) -> String {
    format!("'sha256-{}'", BASE64.encode(Sha256::digest(text)))
}
