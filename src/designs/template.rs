//! Commented designs to begin with. Tests run them.

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

/// What `injectance new stack` prints.
pub const STACK: &str = r#"# Any list of layers, from left to right; the charge current flows to the right.
# An entry of [[stack]] is exactly one of ferromagnet, normal, barrier or interface.

title = "Pinned and free cobalt around copper"
temperature = "4.2 K"
# current_density = "1e6 A/cm²"

[ends]                                     # what lies beyond the outermost layers:
left = "spin sink"                         # semi-infinite, spin sink, reflecting or fed in plane
right = "spin sink"

[[stack]]
# magnetization: "fixed", "fixed antiparallel" or "free"; the free ones turn between the parallel and
# the antiparallel state. Without `material`, state resistivity, bulk_asymmetry, spin_diffusion_length.
ferromagnet = { material = "cobalt", thickness = "12 nm", magnetization = "fixed" }

[[stack]]
# A direct interface. Empty: resistance, asymmetry and loss from the library. Or state
# interface_spin_resistance (AR*) or resistance_area, interface_asymmetry, spin_memory_loss;
# between two ferromagnets also flips_with = "left" or "right".
interface = {}

[[stack]]
# A normal layer: metal or semiconductor. The layer between a fixed and a free magnet is the channel,
# unless one says `channel = true`.
normal = { material = "copper", thickness = "20 nm", resistivity = "0.9 ± 0.2 µΩ cm", note = "an override says where it comes from" }

[[stack]]
interface = {}
# barrier = { material = "alumina", resistance_area = "5 Ω µm²" }   # a tunnel barrier in its place

[[stack]]
ferromagnet = { material = "cobalt", thickness = "12 nm", magnetization = "free" }

[layout]
kind = "vertical"

[goal]                                     # injected_polarization, magnetoresistance, resistance_area_change
resistance_area_change = ">= 0.5 fΩ m²"
# state = "antiparallel"                   # the state an injected polarization is read in
"#;
