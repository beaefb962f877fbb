"""What the oracle scripts share. Written from the design's equations with scipy, not from the Rust code."""
