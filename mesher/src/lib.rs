//! Meshing of a plane section: tagged lines in, six-node triangles out. Knows geometry and tags, no material and no load.
