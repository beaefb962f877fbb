//! The page's entry point; everything else is in the library, so that browser tests can use it.

fn main() {
    lampladder_web::start();
}
