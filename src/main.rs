//! The `mirrorwell` program; everything it does is in the library.

fn main() -> std::process::ExitCode {
    mirrorwell::commands::start()
}
