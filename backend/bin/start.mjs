// Starts Heddle: builds what is missing or older than its sources, then runs the server in this process.
const NEEDED = [20, 19];

const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
if (major < NEEDED[0] || (major === NEEDED[0] && minor < NEEDED[1])) {
  process.stderr.write(
    `Heddle needs Node.js ${NEEDED.join(".")} or newer, and this is ${process.versions.node}: install a newer one.\n`,
  );
  process.exit(1);
}

const { buildWhatIsMissing } = await import("./build.mjs");
buildWhatIsMissing(["kernels", "backend", "frontend"]);
await import("../dist/main.js");
