-- What picture.sh shows: a deck with the hover of one device, in plain colours.

local colours = {
  Normal = { fg = "#1f2933", bg = "#fbfaf7" },
  NormalFloat = { fg = "#1f2933", bg = "#eef3f1" },
  FloatBorder = { fg = "#5b8a7d", bg = "#eef3f1" },
  Comment = { fg = "#7b8794" },
  Identifier = { fg = "#1f2933" },
  Statement = { fg = "#1f2933", bold = true },
  PreProc = { fg = "#8a4b08" },
  Constant = { fg = "#2b5f9e" },
  Number = { fg = "#2b5f9e" },
  String = { fg = "#2b5f9e" },
  Type = { fg = "#1f2933" },
  Annotation = { fg = "#1f7a5c" },
  NonText = { fg = "#d5d9de" },
  LineNr = { fg = "#b8c0c8" },
  StatusLine = { fg = "#52606d", bg = "#e6e9e6" },
  markdownCode = { fg = "#2b5f9e" },
}
vim.o.termguicolors = true
vim.o.background = "light"
for group, colour in pairs(colours) do
  vim.api.nvim_set_hl(0, group, colour)
end
vim.o.fillchars = "eob: "
vim.o.number, vim.o.laststatus, vim.o.ruler, vim.o.showmode, vim.o.shortmess = true, 0, false, false, "FIc"
vim.lsp.handlers["textDocument/hover"] = vim.lsp.with(vim.lsp.handlers.hover, { border = "rounded", max_width = 200 })
vim.diagnostic.config({ virtual_text = false, signs = false })

vim.cmd("edit " .. vim.env.DECK)
vim.fn.matchadd("Annotation", [[\(^\*@\|[;$]@\).*]])
vim.fn.search(vim.env.AT, "w")
vim.cmd("normal! zt")
vim.fn.winrestview({ topline = 1 })

local function floating()
  for _, w in ipairs(vim.api.nvim_list_wins()) do
    if vim.api.nvim_win_get_config(w).relative ~= "" then
      return true
    end
  end
end

local timer = vim.loop.new_timer()
timer:start(500, 250, vim.schedule_wrap(function()
  if floating() then
    timer:stop()
    vim.cmd("redraw!")
    vim.fn.writefile({ "shown" }, vim.env.READY)
  elseif #vim.lsp.get_active_clients() > 0 then
    vim.lsp.buf.hover()
  end
end))
