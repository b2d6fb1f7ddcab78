-- triodeck in Neovim, from 0.7 on: attach the language server to SPICE decks.
--
--   dofile("/path/to/triodeck/lsp/clients/neovim/triodeck.lua")
--
-- To change something, set vim.g.triodeck before that line; see README.md.

local settings = vim.tbl_extend("force", {
  cmd = { "triodeck", "lsp" }, -- how the server is started
  filetype = "spice", -- for highlighting; false leaves the file type alone
  keys = true, -- K shows the hover, gd goes to the definition
  hints = true, -- region and Ron behind each MOSFET (Neovim 0.10 and later)
}, vim.g.triodeck or {})

local patterns = { "*.sp", "*.spi", "*.spice", "*.cir", "*.ckt", "*.net", "*.cdl", "*.lib", "*.mod" }

-- The folder that the server treats as one project.
local function root_of(file)
  local folder = vim.fn.fnamemodify(file, ":p:h")
  local mark = vim.fn.finddir(".git", folder .. ";")
  if mark ~= "" then
    return vim.fn.fnamemodify(mark, ":p:h:h")
  end
  return folder
end

local function on_attach(client, buffer)
  if settings.keys then
    vim.keymap.set("n", "K", vim.lsp.buf.hover, { buffer = buffer, desc = "triodeck: what is this" })
    vim.keymap.set("n", "gd", vim.lsp.buf.definition, { buffer = buffer, desc = "triodeck: where is this defined" })
  end
  if settings.hints and vim.lsp.inlay_hint then
    vim.lsp.inlay_hint.enable(true, { bufnr = buffer })
  end
end

local clients = {} -- by project folder, for Neovim before 0.8

local function attach(buffer)
  local file = vim.api.nvim_buf_get_name(buffer)
  if file == "" or vim.bo[buffer].buftype ~= "" then
    return
  end
  local root = root_of(file)
  local config = {
    name = "triodeck",
    cmd = settings.cmd,
    root_dir = root,
    get_language_id = function() return "spice-deck" end,
    on_attach = on_attach,
  }
  if vim.lsp.start then
    vim.lsp.start(config, { bufnr = buffer })
    return
  end
  config.on_exit = function() clients[root] = nil end
  clients[root] = clients[root] or vim.lsp.start_client(config)
  if clients[root] then
    vim.lsp.buf_attach_client(buffer, clients[root])
  end
end

vim.api.nvim_create_autocmd({ "BufReadPost", "BufNewFile" }, {
  group = vim.api.nvim_create_augroup("triodeck", { clear = true }),
  pattern = patterns,
  desc = "attach triodeck to SPICE decks",
  callback = function(event)
    if settings.filetype then
      vim.bo[event.buf].filetype = settings.filetype
    end
    attach(event.buf)
  end,
})
