//! The reckoner's entry point: the program that works beside the page.

fn main() {
    lampladder_web::browser::reckoner::serve::start();
}
