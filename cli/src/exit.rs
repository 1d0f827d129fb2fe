//! Exit codes of the program and which one counts where several apply.

/// How a run ended.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Exit {
    /// 0: done.
    Done,
    /// 1: done, `--exit-over-limit` given, and a check is over its limit or a part was refused.
    OverLimit,
    /// 2: wrong use of the command line.
    Usage,
    /// 3: the model is wrong; no output was written.
    ModelWrong,
    /// 4: a file cannot be read or written.
    File,
    /// 5: the analysis could not be completed or missed its target error.
    Analysis,
    /// 6: some sections of several failed.
    SomeSections,
    /// 130: interrupted.
    Interrupted,
}

impl Exit {
    /// The number handed to the shell.
    pub fn code(self) -> u8 {
        match self {
            Self::Done => 0,
            Self::OverLimit => 1,
            Self::Usage => 2,
            Self::ModelWrong => 3,
            Self::File => 4,
            Self::Analysis => 5,
            Self::SomeSections => 6,
            Self::Interrupted => 130,
        }
    }

    /// The one that counts of two: 130, 2, 4, 3, 5, 6, 1, 0 in this order.
    #[must_use]
    pub fn worst(self, other: Self) -> Self {
        if self.rank() < other.rank() { other } else { self }
    }

    fn rank(self) -> u8 {
        match self {
            Self::Done => 0,
            Self::OverLimit => 1,
            Self::SomeSections => 2,
            Self::Analysis => 3,
            Self::ModelWrong => 4,
            Self::File => 5,
            Self::Usage => 6,
            Self::Interrupted => 7,
        }
    }
}

impl From<Exit> for std::process::ExitCode {
    fn from(exit: Exit) -> Self {
        Self::from(exit.code())
    }
}

#[cfg(test)]
mod tests {
    use super::Exit;

    #[test]
    fn the_code_that_counts_follows_the_contract() {
        let falling =
            [Exit::Interrupted, Exit::Usage, Exit::File, Exit::ModelWrong, Exit::Analysis, Exit::SomeSections, Exit::OverLimit, Exit::Done];
        for (i, high) in falling.iter().enumerate() {
            for low in &falling[i..] {
                assert_eq!(high.worst(*low), *high);
                assert_eq!(low.worst(*high), *high);
            }
        }
        assert_eq!(falling.map(Exit::code), [130, 2, 4, 3, 5, 6, 1, 0]);
    }
}
