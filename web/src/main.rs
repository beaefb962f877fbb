//! The page's entry point; everything else is in the library, so that browser tests can use it.

/// A quarter of the size of the usual one.
#[cfg(target_arch = "wasm32")]
#[global_allocator]
static ALLOCATOR: rlsf::SmallGlobalTlsf = rlsf::SmallGlobalTlsf::new();

fn main() {
    lampladder_web::start();
}
