use alloc::string::ToString;

use super::read;

/// Every section, nearly every key.
pub(super) const VALID: &str = r#"
format = 1

[site]
name = "Heron Point"
rules = "iec"
earthing = "negative"
ambient = ["-25 degC", "30 degC"]

[[bank]]
name = "house"
chemistry = "lfp"
nominal = "24 V"
capacity = "400 Ah"
strings = 2
cut_off = "21 V"
highest = "29.2 V"
short_circuit = "4 kA"
internal_resistance = "6 mohm"
greatest_discharge = "200 A"
stud = "M8"

[[board]]
name = "main"
busbar = "250 A"
stud = "M8"
lugs_on_stud = 3

[[inverter]]
name = "mains"
power = "1200 W"
surge = "2400 W"
efficiency = "90 %"
idle = "12 W"
least = "21 V"
greatest = "32 V"
stud = "M8"
terminal = "75 degC"

[[load]]
name = "pump"
power = "60 W"
kind = "resistive"
count = 4
continuous = false
least = "20 V"
greatest = "30 V"
start = "30 A"
use = "critical"
stud = "M5"
terminal = "75 degC"

[[load]]
name = "radio"
current = "5 A"

[[circuit]]
name = "feeder"
from = "house"
to = "main"
positive_length = "1.5 m"
negative_length = "2 m"
size = "50 mm2"
negative_size = "70 mm2"
material = "copper"
class = 5
coating = "tinned"
insulation = "PVC 70 degC"
sheathed = true
installed = "clipped"
space = "engine"
bundled = 6
ambient = "40 degC"
moving = true
current = "100 A"
diversity = 0.7
drop = "3 %"
terminal = "75 degC"
from_lug = "M8"
to_lug = "M8"

[[circuit.device]]
name = "F2"
family = "gG"
rating = "100 A"
dc_voltage = "80 V"
breaking = "10 kA"
polarised = true
full_rated = true
pole = "positive"
end = "from"
from_source = "150 mm"
let_through = "12000 A2s"
terminal_range = ["2.5 mm2", "2/0 AWG"]
terminal = "75 degC"

[[circuit.device]]
family = "class T"
end = "to"
ac_only = true

[[circuit.device]]

[[circuit.joint]]
kind = "lug"
count = 2
resistance = "0.1 mohm"

[[circuit.part]]
name = "isolator"
kind = "switch"
rating = "200 A"
resistance = "0.2 mohm"
dc_voltage = "80 V"

[[circuit]]
name = "mains"
from = "main"
to = "mains"
one_way = "1.2 m"
device = "none"
return = "chassis"
return_resistance = "5 mohm"
cranking = true

[[circuit]]
name = "pump"
from = "main"
to = "pump"
one_way = "39 ft"

[[circuit]]
name = "radio"
from = "main"
to = "radio"
one_way = "12 m"

[stock]
[[stock.cable]]
size = "16 mm2"
insulation = "XLPE 90 degC"
length = "50 m"
price = 2.40

[[stock.device]]
family = "blade"
ratings = ["10 A", "15 A"]
dc_voltage = "58 V"
breaking = "1 kA"
price = 3

[[stock.lug]]
size = "16 mm2"
stud = "M8"

[rules.override]
continuous_factor = 1.2
drop = "4 %"
unfused_length = "250 mm"
engine_space = 0.8
bundling = 0.7
device_ratio = 1.0
aluminium = "admitted"
"#;

fn problems(text: &str) -> alloc::string::String {
    read(text).map_or_else(|problems| problems.to_string(), |_| "none".to_string())
}

#[test]
fn a_valid_document_is_read() {
    assert_eq!(problems(VALID), "none");
}
