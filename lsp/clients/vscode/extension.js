// Starts triodeck's language server for SPICE decks. Everything else is the
// server's: see the project's README.
"use strict";

const { workspace } = require("vscode");
const { LanguageClient } = require("vscode-languageclient/node");

let client;

async function activate() {
  const [command, ...args] = workspace.getConfiguration("triodeck").get("command");
  client = new LanguageClient(
    "triodeck",
    "triodeck",
    { command, args },
    {
      documentSelector: [{ language: "spice-deck" }],
      synchronize: {
        // Libraries that are not open count, too.
        fileEvents: workspace.createFileSystemWatcher("**/*.{sp,spi,spice,cir,ckt,net,cdl,lib,mod,inc}"),
      },
    },
  );
  await client.start();
}

function deactivate() {
  return client && client.stop();
}

module.exports = { activate, deactivate };
