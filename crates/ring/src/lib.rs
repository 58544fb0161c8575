//! ring
