-- Drives triodeck.lua in a headless Neovim; .ci/editor-neovim runs it with
-- DECK, CLEAN and the findings of `triodeck lint --format json` in WANT.

local function fail(text)
  io.stderr:write("neovim: " .. text .. "\n")
  vim.cmd("cquit 1")
end

local function check(ok, text)
  if not ok then
    fail(text)
  end
end

-- The server's own word that a file was looked at, even if it has no findings.
local heard = {}
local publish = vim.lsp.handlers["textDocument/publishDiagnostics"]
vim.lsp.handlers["textDocument/publishDiagnostics"] = function(err, result, ...)
  publish(err, result, ...)
  if result and result.uri then
    heard[vim.uri_to_fname(result.uri)] = true
  end
end

local limit = 20000 -- ms for anything to arrive

local function open(path)
  vim.cmd("edit " .. vim.fn.fnameescape(path))
  local full = vim.fn.fnamemodify(path, ":p")
  check(vim.wait(limit, function() return heard[full] end, 20), "no diagnostics for " .. path)
end

local severities = { error = vim.diagnostic.severity.ERROR, warning = vim.diagnostic.severity.WARN, note = vim.diagnostic.severity.INFO }

local function shown()
  local list = {}
  for _, d in ipairs(vim.diagnostic.get(0)) do
    table.insert(list, ("%d:%d %d %s"):format(d.lnum + 1, d.col + 1, d.severity, d.message))
  end
  table.sort(list)
  return table.concat(list, "\n")
end

-- The findings that the editor shows are those of the command line, word for word.
local wanted = {}
for _, f in ipairs(vim.fn.json_decode(table.concat(vim.fn.readfile(vim.env.WANT), "\n")).findings) do
  table.insert(wanted, ("%d:%d %d %s"):format(f.line, f.column, severities[f.severity], f.message))
end
table.sort(wanted)
wanted = table.concat(wanted, "\n")
check(#wanted > 0, "the command line has no findings to compare with")

open(vim.env.DECK)
check(vim.wait(limit, function() return shown() == wanted end, 20), "diagnostics are\n" .. shown() .. "\nand not\n" .. wanted)

-- The hover as a user sees it: in a floating window.
local function hover(pattern)
  check(vim.fn.search(pattern, "w") > 0, pattern .. " is not in the deck")
  vim.lsp.buf.hover()
  local text
  check(vim.wait(limit, function()
    for _, w in ipairs(vim.api.nvim_list_wins()) do
      if vim.api.nvim_win_get_config(w).relative ~= "" then
        text = table.concat(vim.api.nvim_buf_get_lines(vim.api.nvim_win_get_buf(w), 0, -1, false), "\n")
        vim.api.nvim_win_close(w, true)
        return true
      end
    end
  end, 20), "no hover on " .. pattern)
  return text
end

local function holds(text, part)
  check(text:find(part, 1, true), "the hover does not say\n" .. part .. "\nbut\n" .. text)
end

local device = hover([[^M_sw]])
holds(device, "`M_sw` · NMOS · `nch`, level 1 · W/L = 4 µm / 180 nm")
holds(device, "| region      | Ron       |")
holds(device, "| deep triode | 116–229 Ω |")
holds(hover([[^M_sw\s\+\zssamp]]), "| 0.095–0.595 V | annotated at line ")
holds(hover([[^C_hold samp 0 \zs2p]]), "`2p` = 2 pF (2e-12)")

-- A mended line loses its finding: the model's name as it should be.
local row = vim.fn.search("nch_lvt", "w")
check(row > 0, "nch_lvt is not in the deck")
local line = vim.fn.getline(row):gsub("nch_lvt", "nch")
vim.fn.setline(row, line)
check(vim.wait(limit, function() return not shown():find("nch_lvt", 1, true) end, 20), "the finding did not go with its cause:\n" .. shown())

-- The definition of a model opens the library.
vim.fn.search([[^M_sw.*\zsnch]], "w")
vim.cmd("set hidden")
vim.lsp.buf.definition()
check(vim.wait(limit, function() return vim.api.nvim_buf_get_name(0):find("heron180.lib", 1, true) end, 20), "the definition was not opened")
check(vim.api.nvim_get_current_line():find("^%.model nch nmos"), "the definition is not the model's card: " .. vim.api.nvim_get_current_line())

open(vim.env.CLEAN)
check(shown() == "", "a clean deck has findings:\n" .. shown())

print("neovim: diagnostics, hover, edit and definition arrive\n")
vim.cmd("qall!")
