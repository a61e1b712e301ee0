//! The command `axirad`.

fn main() -> std::process::ExitCode {
    axirad::cli::main_with(std::env::args_os())
}
