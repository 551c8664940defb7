//! Why a document can't be put together.

/// Why a document can't be put together.
#[derive(Debug, thiserror::Error)]
pub enum ReportError {
    /// Two stations have different rows, so that they can't stand side by side.
    #[error("station \"{station}\" has other trace rows than the first station")]
    UnevenRows {
        /// The station that differs.
        station: String,
    },
    /// The writer of tables failed.
    #[error("a table could not be put together: {0}")]
    Csv(#[from] csv::Error),
    /// The writer of JSON failed.
    #[error("the JSON document could not be put together: {0}")]
    Json(#[from] serde_json::Error),
}
