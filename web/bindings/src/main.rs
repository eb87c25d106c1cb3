//! Turns the compiled core into a module for JavaScript: `bindings CORE.wasm OUT_DIR PRODUCT_LOCK`.
//!
//! The glue format must match the `wasm-bindgen` that compiled the core to the last digit, so the version in
//! the product's lock file decides, and a difference ends the build with what to change.

use std::{env, error::Error, fs, path::PathBuf};

use wasm_bindgen_cli_support::Bindgen;

/// This tool's own lock file, which says what version of the library it was compiled with.
const OWN_LOCK: &str = include_str!("../Cargo.lock");

fn main() -> Result<(), Box<dyn Error>> {
    let mut arguments = env::args_os().skip(1).map(PathBuf::from);
    let (Some(core), Some(out), Some(lock), None) =
        (arguments.next(), arguments.next(), arguments.next(), arguments.next())
    else {
        return Err("usage: bindings CORE.wasm OUT_DIR PRODUCT_LOCK".into());
    };
    let wanted = locked_version(&fs::read_to_string(&lock)?, "wasm-bindgen")?;
    let ours = locked_version(OWN_LOCK, "wasm-bindgen-cli-support")?;
    if wanted != ours {
        return Err(format!(
            "the core uses wasm-bindgen {wanted} but this tool was built with {ours}: \
             set wasm-bindgen-cli-support to ={wanted} in web/bindings/Cargo.toml"
        )
        .into());
    }
    Bindgen::new()
        .input_path(core)
        .web(true)?
        .omit_default_module_path(true)
        .typescript(true)
        .generate(out)?;
    Ok(())
}

/// Version of `package` in the text of a Cargo lock file.
fn locked_version(lock: &str, package: &str) -> Result<String, String> {
    let mut lines = lock.lines();
    lines
        .find(|line| *line == format!("name = \"{package}\""))
        .and_then(|_| lines.next())
        .and_then(|line| line.strip_prefix("version = \"")?.strip_suffix('"').map(String::from))
        .ok_or_else(|| format!("no version of {package} in the lock file"))
}
