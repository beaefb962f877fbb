//! The reckoner's entry point: the program that works beside the page.

/// A quarter of the size of the usual one.
#[cfg(target_arch = "wasm32")]
#[global_allocator]
static ALLOCATOR: rlsf::SmallGlobalTlsf = rlsf::SmallGlobalTlsf::new();

fn main() {
    lampladder_web::browser::reckoner::serve::start();
}
