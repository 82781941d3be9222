// Prints what the npm package resistor-data makes of colour bands from 10 Ω up: node resistor-data.js [module path]
const resistors = require(process.argv[2] || "resistor-data");
const digits = ["black", "brown", "red", "orange", "yellow", "green", "blue", "violet", "grey", "white"];
const e24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91];
const e96 = [...Array(96).keys()].map((i) => Math.round(100 * Math.pow(10, i / 96)));

function row(figures, power, tolerance) {
  const bands = [...String(figures)].map((d) => digits[+d]).concat(digits[power], tolerance);
  const [notation, percent] = resistors.bandsToNotation(bands, bands.length);
  console.log([bands.join(" "), notation, resistors.notationToValue(notation), percent].join(","));
}

console.log("bands,notation,ohms,percent");
for (let power = 0; power < 6; power++) for (const v of e24) row(v, power, "gold");
for (let power = 0; power < 5; power++) for (const v of e96) row(v, power, "brown");
