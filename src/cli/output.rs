//! Standard output: the one place that decides what a reader who goes away means.

use super::exit::Stop;
use std::io::{ErrorKind, Write};

/// Prints bytes whole. A reader that goes away (`| head`) has seen enough: the run goes on and its status stands.
///
/// # Errors
/// Anything else that keeps the output from being written, a full disk for one.
pub fn print(stdout: &mut dyn Write, bytes: &[u8]) -> Result<(), Stop> {
    match stdout.write_all(bytes).and_then(|()| stdout.flush()) {
        Err(error) if error.kind() != ErrorKind::BrokenPipe => {
            Err(Stop::Usage(format!("standard output cannot be written: {error}")))
        }
        _ => Ok(()),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::io::{Error, Result as IoResult};

    struct Failing(ErrorKind);

    impl Write for Failing {
        fn write(&mut self, _: &[u8]) -> IoResult<usize> {
            Err(Error::from(self.0))
        }
        fn flush(&mut self) -> IoResult<()> {
            Ok(())
        }
    }

    #[test]
    fn a_closed_pipe_is_no_error_and_a_full_disk_is() {
        assert!(print(&mut Failing(ErrorKind::BrokenPipe), b"x").is_ok());
        assert!(print(&mut Failing(ErrorKind::StorageFull), b"x").is_err());
    }
}
