import * as fs from "node:fs";
import * as path from "node:path";
import * as vscode from "vscode";
import {
  Executable,
  LanguageClient,
  LanguageClientOptions,
  RevealOutputChannelOn,
  State,
} from "vscode-languageclient/node";

const REPORT = "backcone-report";
let client: LanguageClient | undefined;
let reports: Reports;

/** Starts the server for the first spec that is opened, and keeps one for the whole window. */
export async function activate(context: vscode.ExtensionContext): Promise<void> {
  reports = new Reports();
  context.subscriptions.push(
    vscode.workspace.registerTextDocumentContentProvider(REPORT, reports),
    vscode.commands.registerCommand("backcone.showReport", showReport),
    vscode.commands.registerCommand("backcone.restart", restart),
    vscode.workspace.onDidChangeConfiguration((e) => {
      if (e.affectsConfiguration("backcone.launcher")) {
        void restart();
      }
    }),
    vscode.workspace.onDidGrantWorkspaceTrust(() => void restart()),
  );
  await start();
}

export async function deactivate(): Promise<void> {
  await client?.stop();
}

async function restart(): Promise<void> {
  await client?.stop().catch(() => undefined);
  client = undefined;
  await start();
}

async function start(): Promise<void> {
  const launcher = findLauncher();
  if (!launcher) {
    const open = "Open the setting";
    const chosen = await vscode.window.showWarningMessage(
      "The backcone launcher was found neither in this folder nor on the PATH. Highlighting works; margins need it.",
      open,
    );
    if (chosen === open) {
      await vscode.commands.executeCommand("workbench.action.openSettings", "backcone.launcher");
    }
    return;
  }
  // a .cmd file is run by the shell of Windows, and by nothing else
  const shell = launcher.toLowerCase().endsWith(".cmd");
  const server: Executable = {
    command: shell ? `"${launcher}"` : launcher,
    args: ["serve"],
    options: { shell },
  };
  const options: LanguageClientOptions = {
    documentSelector: [
      { scheme: "file", language: "backcone" },
      { scheme: "untitled", language: "backcone" },
    ],
    initializationOptions: settings(),
    synchronize: {
      configurationSection: "backcone",
      fileEvents: vscode.workspace.createFileSystemWatcher("**/*.{drive,method}"),
    },
    revealOutputChannelOn: RevealOutputChannelOn.Never,
  };
  const started = new LanguageClient("backcone", "Backcone", server, options);
  client = started;
  try {
    await started.start();
  } catch (e) {
    void vscode.window.showErrorMessage(`The backcone server did not start (${launcher}): ${String(e)}`);
  }
}

function settings(): object {
  const c = vscode.workspace.getConfiguration("backcone");
  return {
    hints: { requirements: c.get("hints.requirements"), derived: c.get("hints.derived") },
    lens: c.get("lens"),
  };
}

/** The setting, else the launcher of an opened folder that is trusted, else the one on the PATH. */
function findLauncher(): string | undefined {
  const names = process.platform === "win32" ? ["backcone.cmd"] : ["backcone"];
  const set = vscode.workspace.getConfiguration("backcone").get<string>("launcher", "").trim();
  if (set) {
    return set;
  }
  const folders: string[] = [];
  if (vscode.workspace.isTrusted) {
    for (const f of vscode.workspace.workspaceFolders ?? []) {
      if (f.uri.scheme === "file") {
        folders.push(f.uri.fsPath);
      }
    }
  }
  folders.push(...(process.env.PATH ?? "").split(path.delimiter));
  for (const folder of folders) {
    for (const name of names) {
      const file = path.join(folder, name);
      if (folder && isProgram(file)) {
        return file;
      }
    }
  }
  return undefined;
}

function isProgram(file: string): boolean {
  try {
    fs.accessSync(file, process.platform === "win32" ? fs.constants.R_OK : fs.constants.X_OK);
    return fs.statSync(file).isFile();
  } catch {
    return false;
  }
}

/** The equations behind the value under the cursor, as a page beside the text. */
async function showReport(): Promise<void> {
  const editor = vscode.window.activeTextEditor;
  if (!editor || editor.document.languageId !== "backcone") {
    return;
  }
  if (!client || client.state !== State.Running) {
    void vscode.window.showWarningMessage("The backcone server is not running.");
    return;
  }
  const at = editor.selection.active;
  const answer = await client.sendRequest<{ title: string; markdown: string } | null>("workspace/executeCommand", {
    command: "backcone.report",
    arguments: [editor.document.uri.toString(), { line: at.line, character: at.character }],
  });
  if (!answer) {
    void vscode.window.showInformationMessage(
      "No value here. Put the cursor on a fact, a requirement, or the name of a rating.",
    );
    return;
  }
  const uri = reports.keep(answer.title, answer.markdown);
  await vscode.commands.executeCommand("markdown.showPreviewToSide", uri);
}

class Reports implements vscode.TextDocumentContentProvider {
  private readonly pages = new Map<string, string>();
  private readonly changed = new vscode.EventEmitter<vscode.Uri>();
  readonly onDidChange = this.changed.event;

  keep(title: string, markdown: string): vscode.Uri {
    const uri = vscode.Uri.from({ scheme: REPORT, path: `/${title.replace(/[^A-Za-z0-9_.-]+/g, "_")}.md` });
    this.pages.set(uri.toString(), markdown);
    this.changed.fire(uri);
    return uri;
  }

  provideTextDocumentContent(uri: vscode.Uri): string {
    return this.pages.get(uri.toString()) ?? "";
  }
}
