// Runs before the first paint, so that a chosen day or night does not flash the other one.
try {
  const chosen = localStorage.getItem("heddle.scheme");
  if (chosen === "light" || chosen === "dark") document.documentElement.setAttribute("data-scheme", chosen);
} catch {
  // Storage may be forbidden; the system's scheme then holds.
}
