//! System tests of enolattice: see the files beside this one.
