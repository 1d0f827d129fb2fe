//! stand-in
use super::*;
pub mod tags {
    pub const BASE: u32 = 10;
    pub const SEAWARD_SIDE: u32 = 11;
    pub const LANDWARD_SIDE: u32 = 12;
    pub fn is_surface(t: u32) -> bool {
        t < 10
    }
}
#[derive(Debug, Clone, PartialEq)]
pub enum PlaceKind {
    Surface(Feature),
    Contact { above_roof: bool },
}
#[derive(Debug, Clone, PartialEq)]
pub struct Place {
    pub at_m: [f64; 2],
    pub inward: [f64; 2],
    pub layer: usize,
    pub kind: PlaceKind,
    pub available_m: f64,
}
pub struct FreeBody {
    pub areas_m2: Vec<f64>,
    pub centroids_m: Vec<[f64; 2]>,
    pub seaward_x_m: f64,
}
impl Section {
    pub fn region(&self, p: [f64; 2]) -> Option<u32> {
        self.contains(p).then(|| self.layer_at(p) as u32)
    }
    pub fn outline(&self) -> mesher::Outline {
        let mut lines = vec![];
        let b = self.boundary();
        let ns = self.surface().n_segments();
        for i in 0..b.n_segments() {
            let s = b.segment(i);
            let tag = if i < ns { self.feature_of(i) as u32 } else { [12, 10, 11][i - ns] };
            let arc = b.arcs()[i].map(|a| mesher::Arc { center_m: a.center_m, radius_m: a.radius_m });
            lines.push(mesher::Line { points_m: vec![s.point(0.0), s.point(1.0)], closed: false, tag, arcs: vec![arc], open: false });
        }
        for c in self.contact_lines() {
            lines.push(mesher::Line { points_m: c.points_m, closed: false, tag: 100 + c.contact as u32, arcs: vec![], open: false });
        }
        mesher::Outline { lines }
    }
    fn available(&self, p: [f64; 2], n: [f64; 2]) -> f64 {
        let mut best = f64::INFINITY;
        for s in self.boundary().segments() {
            for (d, _) in s.line_hits(p, n) {
                if d > 1e-6 {
                    best = best.min(d)
                }
            }
        }
        for c in self.contact_lines() {
            for e in c.points_m.windows(2) {
                let d = [e[1][0] - e[0][0], e[1][1] - e[0][1]];
                let r = [e[0][0] - p[0], e[0][1] - p[1]];
                let det = n[0] * d[1] - n[1] * d[0];
                let t = (r[0] * d[1] - r[1] * d[0]) / det;
                let u = (r[0] * n[1] - r[1] * n[0]) / det;
                if t > 1e-6 && 0.0 <= u && u <= 1.0 {
                    best = best.min(t)
                }
            }
        }
        best
    }
    pub fn surface_places(&self, spacing: f64) -> Vec<Place> {
        let mut out = vec![];
        let limit = self.brow_m()[0] + 2.0 * self.cliff_height_m();
        for i in 0..self.surface().n_segments() {
            let f = self.feature_of(i);
            if matches!(f, Feature::Platform | Feature::Floor) {
                continue;
            }
            let s = self.surface().segment(i);
            let k = ((s.length_m() / spacing).ceil() as usize).max(1);
            for j in 0..k {
                let t = (j as f64 + 0.5) / k as f64;
                let p = s.point(t);
                if p[0] > limit {
                    break;
                }
                let d = s.direction(t);
                let n = [d[1], -d[0]];
                let inn = [p[0] + 1e-6 * n[0], p[1] + 1e-6 * n[1]];
                out.push(Place {
                    at_m: p,
                    inward: n,
                    layer: self.layer_at(inn),
                    kind: PlaceKind::Surface(f),
                    available_m: self.available(p, n),
                })
            }
        }
        out
    }
    pub fn contact_places(&self, spacing: f64) -> Vec<Place> {
        let mut out = vec![];
        let limit = self.brow_m()[0] + 2.0 * self.cliff_height_m();
        let roof = self.roof_level_m();
        for c in self.contact_lines() {
            for e in c.points_m.windows(2) {
                let l = (e[1][0] - e[0][0]).hypot(e[1][1] - e[0][1]);
                if l < 1e-9 {
                    continue;
                }
                let k = ((l / spacing / 2.0).ceil() as usize).max(1);
                for j in 0..k {
                    let t = (j as f64 + 0.5) / k as f64;
                    let p = [e[0][0] + t * (e[1][0] - e[0][0]), e[0][1] + t * (e[1][1] - e[0][1])];
                    if p[0] > limit || p[0] < self.lip_m()[0].min(self.brow_m()[0]) - 0.5 {
                        continue;
                    }
                    for sg in [1.0, -1.0] {
                        let n = [-sg * (e[1][1] - e[0][1]) / l, sg * (e[1][0] - e[0][0]) / l];
                        let q = [p[0] + 1e-6 * n[0], p[1] + 1e-6 * n[1]];
                        if !self.contains(q) {
                            continue;
                        }
                        out.push(Place {
                            at_m: p,
                            inward: n,
                            layer: self.layer_at(q),
                            kind: PlaceKind::Contact { above_roof: p[1] > roof },
                            available_m: self.available(p, n),
                        })
                    }
                }
            }
        }
        out
    }
    pub fn free_body(&self, line: [[f64; 2]; 2]) -> FreeBody {
        let (a, _) = self.surface().nearest(line[0]);
        let (b, _) = self.surface().nearest(line[1]);
        let part = self.surface().part(a, b);
        let (pts, _) = part.flattened(0.01);
        let n = self.n_layers();
        let mut area = vec![0.0; n];
        let mut cen = vec![[0.0; 2]; n];
        // sampled stand-in
        let (x0, x1) = pts.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |m, p| (m.0.min(p[0]), m.1.max(p[0])));
        let (z0, z1) = pts.iter().fold((f64::INFINITY, f64::NEG_INFINITY), |m, p| (m.0.min(p[1]), m.1.max(p[1])));
        let k = 60;
        let (dx, dz) = ((x1 - x0) / k as f64, (z1 - z0) / k as f64);
        for i in 0..k {
            for j in 0..k {
                let p = [x0 + (i as f64 + 0.5) * dx, z0 + (j as f64 + 0.5) * dz];
                let mut c = false;
                for q in 0..pts.len() {
                    let (u, v) = (pts[q], pts[(q + 1) % pts.len()]);
                    if (u[1] > p[1]) != (v[1] > p[1]) {
                        let x = u[0] + (p[1] - u[1]) / (v[1] - u[1]) * (v[0] - u[0]);
                        if p[0] < x {
                            c = !c
                        }
                    }
                }
                if c {
                    let l = self.layer_at(p);
                    area[l] += dx * dz;
                    cen[l][0] += p[0] * dx * dz;
                    cen[l][1] += p[1] * dx * dz
                }
            }
        }
        for l in 0..n {
            if area[l] > 0.0 {
                cen[l][0] /= area[l];
                cen[l][1] /= area[l];
            }
        }
        FreeBody { areas_m2: area, centroids_m: cen, seaward_x_m: x0 }
    }
}
