//! Exit statuses, and everything that ends a run early.

use crate::engine::error::EngineError;
use crate::engine::findings::Status;
use crate::input::Diagnostics;
use std::path::PathBuf;

/// How a run ended. These are the only statuses the program has.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Exit {
    /// No criterion is "not met" (attention keeps 0), or the command had nothing to judge.
    Met = 0,
    /// The case was worked and some criterion is not met; or a published check point failed.
    NotMet = 1,
    /// The input cannot be used; nothing was written.
    BadInput = 2,
    /// A correlation has no answer there.
    NoAnswer = 3,
}

impl From<Status> for Exit {
    fn from(verdict: Status) -> Self {
        match verdict {
            Status::Met | Status::Attention => Self::Met,
            Status::NotMet => Self::NotMet,
        }
    }
}

/// What stops a run.
#[derive(Debug, thiserror::Error)]
pub enum Stop {
    /// The case or its table cannot be used.
    #[error("{0}")]
    Input(Diagnostics),
    /// A file cannot be read or written.
    #[error("{path}: {why}", path = path.display())]
    File {
        /// Which.
        path: PathBuf,
        /// Why, and what would be right.
        why: String,
    },
    /// Something else the user can put right.
    #[error("{0}")]
    Usage(String),
    /// The engine has no answer.
    #[error("{0}")]
    Engine(#[from] EngineError),
}

impl Stop {
    /// The status that goes with it.
    pub fn exit(&self) -> Exit {
        match self {
            Self::Input(_) | Self::File { .. } | Self::Usage(_) => Exit::BadInput,
            Self::Engine(error) => match error {
                EngineError::NoAnswer { .. } | EngineError::Search { .. } | EngineError::NotFinite { .. } => {
                    Exit::NoAnswer
                }
                EngineError::NoMethod { .. } | EngineError::Geometry { .. } | EngineError::Record { .. } => {
                    Exit::BadInput
                }
            },
        }
    }
}
