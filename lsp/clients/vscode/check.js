// Checks what can be checked without VS Code: that extension.js starts the server
// that the settings name, and that the server answers Microsoft's own protocol
// library as the extension's client would ask it.
//
//   go build -o /tmp/triodeck ./cmd/triodeck && SERVER=/tmp/triodeck npm test
"use strict";

const assert = require("node:assert");
const { execFileSync, spawn } = require("node:child_process");
const fs = require("node:fs");
const Module = require("node:module");
const path = require("node:path");
const { pathToFileURL } = require("node:url");

const server = process.env.SERVER || "triodeck";
const decks = path.resolve(process.env.DECKS || path.join(__dirname, "../../../testdata/demo"));
const manifest = require("./package.json");
setTimeout(() => { console.error("vscode: nothing came for 30 s"); process.exit(1); }, 30000).unref();

// The extension in a world of stand-ins: what does it start, and for what?
async function extension() {
  const made = [];
  class LanguageClient {
    constructor(id, name, run, options) { made.push({ id, run, options }); }
    async start() { made.push("started"); }
    async stop() { made.push("stopped"); }
  }
  const stand = {
    vscode: {
      workspace: {
        getConfiguration: (section) => ({ get: (key) => manifest.contributes.configuration.properties[`${section}.${key}`].default }),
        createFileSystemWatcher: (glob) => glob,
      },
    },
    "vscode-languageclient/node": { LanguageClient },
  };
  const load = Module._load;
  Module._load = (request, ...rest) => stand[request] || load(request, ...rest);
  const { activate, deactivate } = require("./extension.js");
  Module._load = load;
  await activate();
  await deactivate();
  assert.deepStrictEqual(made[0].run, { command: "triodeck", args: ["lsp"] });
  assert.deepStrictEqual(made[0].options.documentSelector, [{ language: manifest.contributes.languages[0].id }]);
  assert.deepStrictEqual(made.slice(1), ["started", "stopped"]);
}

async function protocol() {
  const { createProtocolConnection, StreamMessageReader, StreamMessageWriter } = require("vscode-languageserver-protocol/node");
  const demo = path.join(decks, "first_draft.sp");
  const uri = pathToFileURL(demo).toString();
  const child = spawn(server, ["lsp"], { stdio: ["pipe", "pipe", "inherit"] });
  const ended = new Promise((resolve) => child.on("exit", resolve));
  const c = createProtocolConnection(new StreamMessageReader(child.stdout), new StreamMessageWriter(child.stdin));
  c.listen();

  const init = await c.sendRequest("initialize", {
    processId: process.pid,
    rootUri: pathToFileURL(path.dirname(demo)).toString(),
    capabilities: {
      general: { positionEncodings: ["utf-16"] },
      textDocument: { hover: { contentFormat: ["markdown", "plaintext"] }, inlayHint: {}, publishDiagnostics: { relatedInformation: true } },
    },
  });
  assert.strictEqual(init.capabilities.positionEncoding, "utf-16");
  await c.sendNotification("initialized", {});

  const lint = () => {
    try {
      return execFileSync(server, ["lint", "--format", "json", demo], { stdio: ["ignore", "pipe", "ignore"] });
    } catch (e) {
      if (e.status !== 1) throw e;
      return e.stdout; // findings
    }
  };
  const severity = { error: 1, warning: 2, note: 3 };
  const wanted = JSON.parse(lint()).findings.map((f) => `${f.line}:${f.column} ${severity[f.severity]} ${f.message} [${f.rule}]`).sort();
  assert.ok(wanted.length > 0, "the command line has no findings to compare with");
  const same = new Promise((resolve) => {
    c.onNotification("textDocument/publishDiagnostics", (p) => {
      const got = p.diagnostics.map((d) => `${d.range.start.line + 1}:${d.range.start.character + 1} ${d.severity} ${d.message} [${d.code}]`).sort();
      if (p.uri === uri && JSON.stringify(got) === JSON.stringify(wanted)) resolve();
    });
  });
  const text = fs.readFileSync(demo, "utf8");
  await c.sendNotification("textDocument/didOpen", { textDocument: { uri, languageId: "spice-deck", version: 1, text } });
  await same;

  const line = text.split("\n").findIndex((l) => l.startsWith("M_sw"));
  const hover = await c.sendRequest("textDocument/hover", { textDocument: { uri }, position: { line, character: 1 } });
  assert.match(hover.contents.value, /`M_sw` · NMOS/);
  const hints = await c.sendRequest("textDocument/inlayHint", {
    textDocument: { uri }, range: { start: { line: 0, character: 0 }, end: { line: line + 1, character: 0 } },
  });
  assert.match(hints[0].label, /^deep triode .*Ω$/);
  await c.sendRequest("shutdown");
  await c.sendNotification("exit");
  assert.strictEqual(await ended, 0);
}

extension().then(protocol).then(
  () => { console.log("vscode: the extension starts the server; diagnostics, hover and hints arrive"); process.exit(0); },
  (e) => { console.error("vscode:", e); process.exit(1); },
);
