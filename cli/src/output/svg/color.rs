//! Color scales that are perceptually even, survive color blindness and grey printing, and hold no green.
//!
//! Colors are mixed in OKLab (B. Ottosson, "A perceptual color space for image processing", 2020), whose lightness follows what the
//! eye sees. Published constants.

/// Lightness, chroma, hue in degrees.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Lch {
    /// 0 black to 1 white.
    pub lightness: f64,
    /// Colorfulness, 0 grey.
    pub chroma: f64,
    /// Hue, degrees.
    pub hue_deg: f64,
}

impl Lch {
    /// As `#rrggbb`.
    pub fn hex(self) -> String {
        let [r, g, b] = self.srgb().map(|value| (value * 255.0).round() as u8);
        format!("#{r:02x}{g:02x}{b:02x}")
    }

    /// As sRGB components, 0 to 1, cut off where the color lies outside.
    pub fn srgb(self) -> [f64; 3] {
        let (sin, cos) = self.hue_deg.to_radians().sin_cos();
        let (a, b) = (self.chroma * cos, self.chroma * sin);
        let l = (self.lightness + 0.3963377774 * a + 0.2158037573 * b).powi(3);
        let m = (self.lightness - 0.1055613458 * a - 0.0638541728 * b).powi(3);
        let s = (self.lightness - 0.0894841775 * a - 1.2914855480 * b).powi(3);
        let linear = [
            4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s,
            -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s,
            -0.0041960863 * l - 0.7034186147 * m + 1.7076147010 * s,
        ];
        linear.map(|value| {
            let value = value.clamp(0.0, 1.0);
            if value <= 0.0031308 { 12.92 * value } else { 1.055 * value.powf(1.0 / 2.4) - 0.055 }
        })
    }
}

fn mix(from: Lch, to: Lch, t: f64) -> Lch {
    let at = |a: f64, b: f64| a + (b - a) * t.clamp(0.0, 1.0);
    Lch { lightness: at(from.lightness, to.lightness), chroma: at(from.chroma, to.chroma), hue_deg: at(from.hue_deg, to.hue_deg) }
}

/// Tension, 0 (weak) to 1 (strong): pale to dark orange-brown. It gets much darker than compression ever does.
pub fn tension(t: f64) -> Lch {
    let from = Lch { lightness: 0.90, chroma: 0.065, hue_deg: 75.0 };
    mix(from, Lch { lightness: 0.40, chroma: 0.14, hue_deg: 35.0 }, t)
}

/// Compression, 0 (weak) to 1 (strong): nearly white to a middle blue.
pub fn compression(t: f64) -> Lch {
    let from = Lch { lightness: 0.975, chroma: 0.012, hue_deg: 250.0 };
    mix(from, Lch { lightness: 0.66, chroma: 0.115, hue_deg: 255.0 }, t)
}

/// Utilization, 0 to 1 (0 = none, 1 = the top of the scale): pale sand to dark plum.
pub fn utilization(t: f64) -> Lch {
    let from = Lch { lightness: 0.965, chroma: 0.02, hue_deg: 85.0 };
    mix(from, Lch { lightness: 0.36, chroma: 0.13, hue_deg: -15.0 }, t)
}

#[cfg(test)]
mod tests {
    use super::{Lch, compression, tension, utilization};

    /// Published example values of OKLab: white, and pure red at L 0.6280, C 0.2577, h 29.23 degrees (from memory of the CSS Color 4 text).
    #[test]
    fn known_colors_come_out() {
        assert_eq!(Lch { lightness: 1.0, chroma: 0.0, hue_deg: 0.0 }.hex(), "#ffffff");
        assert_eq!(Lch { lightness: 0.62796, chroma: 0.25768, hue_deg: 29.234 }.hex(), "#ff0000");
    }

    fn grey([r, g, b]: [f64; 3]) -> f64 {
        // Rec. 709 weights, which photocopiers and printers come close to.
        0.2126 * r + 0.7152 * g + 0.0722 * b
    }

    #[test]
    fn every_scale_darkens_evenly_also_in_grey() {
        for scale in [tension, compression, utilization] {
            let greys: Vec<f64> = (0..=10).map(|i| grey(scale(f64::from(i) / 10.0).srgb())).collect();
            for pair in greys.windows(2) {
                let step = pair[0] - pair[1];
                assert!(0.01 < step && step < 0.12, "{greys:?}");
            }
        }
    }

    #[test]
    fn strong_tension_is_darker_than_any_compression() {
        assert!(grey(tension(0.7).srgb()) < grey(compression(1.0).srgb()));
    }

    #[test]
    fn nothing_looks_green() {
        for scale in [tension, compression, utilization] {
            for i in 0..=20 {
                let [r, g, b] = scale(f64::from(i) / 20.0).srgb();
                assert!(!(r + 0.02 < g && b + 0.02 < g), "{i}: {r} {g} {b}");
            }
        }
    }
}
