//! The gRPC services.
