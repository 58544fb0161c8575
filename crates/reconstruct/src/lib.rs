//! reconstruct
