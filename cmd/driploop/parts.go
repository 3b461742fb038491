package main

import "github.com/spf13/cobra"

func (c *Command) parts() *cobra.Command { return &cobra.Command{Use: "parts"} }
