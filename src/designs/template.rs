//! A commented design to begin with. A test runs it.

/// What `injectance new vertical` prints.
pub const VERTICAL: &str = r#"# A vertical stack: the current crosses the layers one after the other.
# Every quantity is a text with its unit; a spread may follow: "3.6 ± 0.4 nm", "45 nm ± 10 %",
# "38 +12 -7 nm", "1.5 nm ×/ 1.5" (factor), "26 .. 50 nm" (anything between). ± is one standard deviation.

title = "Iron on magnesia on n-silicon, first sketch"
temperature = "300 K"
# current_density = "1e4 A/cm²"            # without it voltages are told per a power of ten of it

[injector]
# `injectance materials list` shows what the library knows. Without `material`, state resistivity,
# bulk_asymmetry and spin_diffusion_length yourself.
ferromagnet = { material = "iron", thickness = "40 nm" }
# resistance_area: both spin channels in parallel. Without a barrier, leave the line out.
barrier = { material = "magnesia", resistance_area = "100 Ω µm²", thickness = "1.2 nm" }

[channel]
material = "silicon"
type = "n"
dopant = "phosphorus"
doping = "5e19 /cm³"
thickness = "2 µm"
end = "semi-infinite"                      # or "spin sink", "reflecting"; not needed with a [detector]
# resistivity = "1.5 ± 0.1 mΩ cm"          # beside `material` a property overrides the library ...
# note = "four-point measurement"          # ... and says where it comes from

# [detector]                               # a second contact, same keys as [injector]
# ferromagnet = { material = "iron", thickness = "40 nm" }
# barrier = { material = "magnesia", resistance_area = "100 Ω µm²" }

[layout]
kind = "vertical"

[goal]                                     # >=, <= or "a .. b" of the absolute value
injected_polarization = ">= 10 %"
# magnetoresistance = ">= 1 %"             # needs a [detector]
"#;
