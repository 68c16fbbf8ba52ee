//! Both routes.
