//! A whole site: its document, its checks, its report.
